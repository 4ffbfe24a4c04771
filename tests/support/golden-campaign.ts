import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { parseCampaignFile } from "@/lib/campaign/campaign-schema";
import { readLog } from "@/lib/logs/read-log";
import type { LogTable } from "@/lib/logs/types";
import type { Campaign } from "@/lib/measure/types";

const GOLDEN = new URL("../golden/", import.meta.url);

/** Truth of a simulated campaign, as the simulator wrote it (tests/golden/README.md). */
export interface ProgrammeTruth {
  id: string;
  runs: {
    id: string;
    revision: string;
    power_factor: number;
    peak_power_day_kw: number;
    in_gear_times: Record<string, number | null>;
    t_pedal_step_s: number;
    t_redline_s: number;
    t_neutral_s: number;
    wind_along_mps: number;
    loss_neutral: { f0_n: number; f1_n_per_mps: number; f2_n_per_mps2: number };
  }[];
  evaluate_rpm: [number, number];
  curves: Record<
    string,
    { as_driven_ref: { rpm: number[]; torque_nm: (number | null)[]; power_kw: (number | null)[] } }
  >;
  delta: {
    base: string;
    other: string;
    rpm: number[];
    as_driven_delta_pct: (number | null)[];
    realised_run_factor_bias_pct: number;
  };
}

/** The truth of one golden campaign. */
export function goldenTruth(id: string): ProgrammeTruth {
  const all = JSON.parse(
    gunzipSync(readFileSync(new URL("runs/truth.json.gz", GOLDEN))).toString("utf8"),
  ) as { programmes: ProgrammeTruth[] };
  const found = all.programmes.find((programme) => programme.id === id);
  if (!found) throw new Error(`No truth for ${id}`);
  return found;
}

const read = new Map<string, LogTable>();

/** A golden campaign with its logs read (each log once a test file). */
export function goldenCampaign(
  id: string,
  file = "campaign-known.json",
): { campaign: Campaign; logs: Map<string, LogTable> } {
  const folder = new URL(`runs/${id}/`, GOLDEN);
  const { campaign } = parseCampaignFile(readFileSync(new URL(file, folder), "utf8"));
  const logs = new Map<string, LogTable>();
  for (const run of campaign.runs) {
    const key = `${id}/${run.file}`;
    const log =
      read.get(key) ??
      readLog(readFileSync(new URL(run.file, folder)), { fileName: run.file, drive: campaign.vehicle.drive });
    read.set(key, log);
    logs.set(run.id, log);
  }
  return { campaign, logs };
}
