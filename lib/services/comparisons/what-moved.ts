import type { ComparisonInput } from "@/db/schema/comparisons";

type InputRun = ComparisonInput["runs"][number];

const list = (items: readonly (string | number)[]) =>
  items.length < 2 ? `${items[0] ?? ""}` : `${items.slice(0, -1).join(", ")} and ${items.at(-1)}`;

const named = (runs: readonly InputRun[]) =>
  `${runs.length === 1 ? "Run" : "Runs"} ${list(runs.map((run) => run.number))}`;

const were = (runs: readonly InputRun[]) => (runs.length === 1 ? "was" : "were");

/** Names of what differs between two readings of one run, e.g. "gear", "leg". */
function changesOf(before: InputRun, after: InputRun): string[] {
  const old = JSON.parse(before.fields) as Record<string, unknown>;
  const now = JSON.parse(after.fields) as Record<string, unknown>;
  const fields = [...new Set([...Object.keys(old), ...Object.keys(now)])].filter(
    (field) => old[field] !== now[field],
  );
  const own = (["leg", "kind", "side"] as const).filter((key) => before[key] !== after[key]);
  return [...own, ...(before.order === after.order ? [] : ["place in the driven order"]), ...fields];
}

/**
 * What differs between the input of a result and what counts now, one sentence each; empty when nothing does.
 * @param before what the result was computed from
 */
export function whatMoved(before: ComparisonInput, after: ComparisonInput): string[] {
  const known = new Map(before.runs.map((run) => [run.runId, run]));
  const left = new Map(after.runs.map((run) => [run.runId, run]));
  const added = after.runs.filter((run) => !known.has(run.runId));
  const gone = before.runs.filter((run) => !left.has(run.runId));
  const sentences: string[] = [];
  if (added.length > 0) sentences.push(`${named(added)} ${were(added)} attached or brought back.`);
  if (gone.length > 0) sentences.push(`${named(gone)} ${were(gone)} set aside.`);
  for (const run of after.runs) {
    const earlier = known.get(run.runId);
    const changes = earlier ? changesOf(earlier, run) : [];
    if (changes.length > 0) sentences.push(`Run ${run.number} was changed: ${list(changes)}.`);
  }
  if (before.sheetVersion !== after.sheetVersion)
    sentences.push(`The vehicle sheet went from version ${before.sheetVersion} to ${after.sheetVersion}.`);
  if (before.analysisVersion !== after.analysisVersion)
    sentences.push(
      `The analysis went from version ${before.analysisVersion} to version ${after.analysisVersion}.`,
    );
  return sentences;
}
