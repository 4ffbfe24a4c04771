import "server-only";
import { readdirSync } from "node:fs";
import { join } from "node:path";

/** Names of the sample files that the demo offers under /samples, the road day's runs in driven order. */
export function sampleRuns(): string[] {
  return readdirSync(join(process.cwd(), "public/samples"))
    .filter((name) => name.startsWith("run-"))
    .sort();
}
