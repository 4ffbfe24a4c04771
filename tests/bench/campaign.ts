import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { parseCampaignFile } from "@/lib/campaign/campaign-schema";
import { readLog } from "@/lib/logs/read-log";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import type { BenchLine } from "./line";

const FOLDER = "tests/golden/runs/p1-hatch-a-b";
const golden = (name: string) => gunzipSync(readFileSync(`${FOLDER}/${name}.gz`));
const { campaign } = parseCampaignFile(readFileSync(`${FOLDER}/campaign-known.json`, "utf8"));
const bytes = campaign.runs.map((run) => [run.id, golden(run.file.replace(/\.gz$/, ""))] as const);
const readAll = () => new Map(bytes.map(([id, content]) => [id, readLog(content)]));
const logs = readAll();

/** A campaign of 12 runs. */
export const lines: BenchLine[] = [
  {
    what: "12 runs from bytes to result",
    ours: () => analyseCampaign(campaign, readAll()),
    reference: null,
    notRun: null,
    budget: 1.5,
  },
  {
    what: "analyse 12 runs that are read",
    ours: () => analyseCampaign(campaign, logs),
    reference: { name: "reading their logs", work: readAll },
    notRun: null,
    budget: null,
  },
];
