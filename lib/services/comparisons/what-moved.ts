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

/** Runs that went, told by whether somebody set them aside or their road day lost its other side. */
function departures(gone: readonly InputRun[], setAside: ReadonlySet<string>): string[] {
  const taken = gone.filter((run) => setAside.has(run.runId));
  const alone = gone.filter((run) => !setAside.has(run.runId));
  const sentences: string[] = [];
  if (taken.length > 0) sentences.push(`${named(taken)} ${were(taken)} set aside.`);
  if (alone.length > 0)
    sentences.push(
      `${named(alone)} no longer ${alone.length === 1 ? "counts" : "count"}: which road days have both sides has changed.`,
    );
  return sentences;
}

/**
 * What differs between the input of a result and what counts now, one sentence each; empty when nothing does.
 * @param before what the result was computed from
 * @param runs what is known of the runs now, to tell why one no longer counts
 */
export function whatMoved(
  before: ComparisonInput,
  after: ComparisonInput,
  runs: readonly { id: string; setAsideAt: Date | null }[],
): string[] {
  const known = new Map(before.runs.map((run) => [run.runId, run]));
  const left = new Map(after.runs.map((run) => [run.runId, run]));
  const added = after.runs.filter((run) => !known.has(run.runId));
  const gone = before.runs.filter((run) => !left.has(run.runId));
  const sentences: string[] = [];
  const setAside = new Set(runs.filter((run) => run.setAsideAt !== null).map((run) => run.id));
  if (added.length > 0)
    sentences.push(`${named(added)} ${added.length === 1 ? "counts" : "count"} now and did not then.`);
  sentences.push(...departures(gone, setAside));
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
