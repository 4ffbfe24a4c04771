import { readFileSync } from "node:fs";
import { basename, dirname, resolve } from "node:path";
import { parseArgs } from "node:util";
import { type CampaignFile, CampaignFileError, parseCampaignFile } from "@/lib/campaign/campaign-schema";
import { FileRefusedError } from "@/lib/errors";
import { readLog } from "@/lib/logs/read-log";
import type { ChannelKey, LogTable } from "@/lib/logs/types";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";

const USAGE = "Usage: npm run -s analyse -- path/to/campaign.json [--run r03]";

class CallError extends Error {}

function call(): { path: string; run: string | undefined } {
  const { values, positionals } = parseArgs({ allowPositionals: true, options: { run: { type: "string" } } });
  if (positionals.length !== 1) throw new CallError("Name exactly one campaign file.");
  return { path: positionals[0], run: values.run };
}

function text(path: string): string {
  try {
    return readFileSync(path, "utf8");
  } catch (error) {
    throw new CallError(
      `Can't read ${basename(path)}: ${(error as NodeJS.ErrnoException).code ?? "unknown error"}.`,
    );
  }
}

/** Keeps the runs asked for; the comparison needs them all, so one run alone has none. */
function oneRun(file: CampaignFile, id: string | undefined): CampaignFile {
  if (id === undefined) return file;
  const runs = file.campaign.runs.filter((run) => run.id === id);
  if (runs.length === 0) throw new CallError(`The campaign has no run "${id}".`);
  return { ...file, campaign: { ...file.campaign, runs, compare: null } };
}

function load(file: CampaignFile, folder: string): Map<string, LogTable | FileRefusedError> {
  const logs = new Map<string, LogTable | FileRefusedError>();
  for (const { id, file: name } of file.campaign.runs) {
    const reference = file.keys.get(id);
    const key =
      typeof reference === "string"
        ? (JSON.parse(text(resolve(folder, reference))) as ChannelKey)
        : reference;
    let bytes: Uint8Array;
    try {
      bytes = readFileSync(resolve(folder, name));
    } catch {
      logs.set(
        id,
        new FileRefusedError(
          "file_not_found",
          `The log ${name} can't be opened. Check the path beside the campaign file.`,
        ),
      );
      continue;
    }
    try {
      logs.set(id, readLog(bytes, { key, fileName: basename(name), drive: file.campaign.vehicle.drive }));
    } catch (error) {
      if (!(error instanceof FileRefusedError)) throw error;
      logs.set(id, error);
    }
  }
  return logs;
}

/** Prints the result as JSON. Exit status 0: analysed; 1: no run is usable; 2: wrong call or campaign file. */
function main(): number {
  try {
    const { path, run } = call();
    const file = oneRun(parseCampaignFile(text(path)), run);
    const result = analyseCampaign(file.campaign, load(file, dirname(path)));
    console.log(JSON.stringify(result, null, 1));
    for (const refused of result.runs.filter((r) => !r.usable)) {
      console.error(`${refused.id}: ${refused.reasons.map((r) => `${r.code}: ${r.message}`).join(" ")}`);
    }
    return result.runs.some((r) => r.usable) ? 0 : 1;
  } catch (error) {
    if (error instanceof CampaignFileError || error instanceof CallError || error instanceof SyntaxError) {
      console.error(error.message);
      return 2;
    }
    if ((error as NodeJS.ErrnoException).code?.startsWith("ERR_PARSE_ARGS")) {
      console.error(`${(error as Error).message}\n${USAGE}`);
      return 2;
    }
    throw error;
  }
}

process.exitCode = main();
