/** One line of the bench: what is measured, against what, and the budget that the ratio (or the seconds) must keep. */
export interface BenchLine {
  what: string;
  ours: () => unknown;
  /** What the ratio is taken against: work in this process, or a program that states its own CPU ms. Null: plain CPU seconds. */
  reference: { name: string; work: () => unknown } | { name: string; cpuMs: () => number } | null;
  /** Why the line can't be run here; null when it can. */
  notRun: string | null;
  /** Highest ratio or CPU seconds; null = shown only. */
  budget: number | null;
  /** Finds out whether both sides give the same, and says so; throws when they don't. */
  agreement?: () => string;
}

const ROUNDS = 5;
/** A batch of calls lasts at least this, so that a coarse clock does no harm; short work is taken in several batches. */
const BATCH_MS = 25;
const BATCHES = 7;
const WARM_MS = 600;

/** CPU milliseconds of one call, over as many calls as fill `leastMs`; the clock is read around all of them. */
function cpuMs(work: () => unknown, leastMs: number): number {
  let calls = 0;
  const start = performance.now();
  const before = process.cpuUsage();
  do {
    work();
    calls++;
  } while (performance.now() - start < leastMs);
  const spent = process.cpuUsage(before);
  return (spent.user + spent.system) / 1000 / calls;
}

/** The middle of several batches as the references take it; one call alone where it lasts long. */
function middleMs(work: () => unknown): number {
  const first = cpuMs(work, BATCH_MS);
  if (first > 4 * BATCH_MS) return first;
  const batches = Array.from({ length: BATCHES }, () => cpuMs(work, BATCH_MS)).sort((a, b) => a - b);
  return batches[BATCHES >> 1];
}

/** One round: ours and the reference right after each other; warmed up, since code that idled in between is forgotten. */
function round({ ours, reference }: BenchLine): number {
  cpuMs(ours, WARM_MS);
  const own = middleMs(ours);
  if (reference === null) return own / 1000;
  return own / ("work" in reference ? middleMs(reference.work) : reference.cpuMs());
}

/** Warms a line up, runs its rounds and prints the middle one. Returns whether it kept its budget; null without one or when not run. */
export function printLine(line: BenchLine): boolean | null {
  const { what, reference, budget } = line;
  const against = (reference ? `x ${reference.name}` : "CPU seconds").padEnd(40);
  if (line.notRun !== null) {
    console.log(`not run  ${against} ${what}: ${line.notRun}`);
    return null;
  }
  cpuMs(line.ours, WARM_MS);
  if (reference && "work" in reference) cpuMs(reference.work, WARM_MS);
  const values = Array.from({ length: ROUNDS }, () => round(line)).sort((a, b) => a - b);
  const value = values[ROUNDS >> 1];
  const inside = budget === null ? null : value <= budget;
  const verdict =
    inside === null ? "no budget" : `${inside ? "inside" : "OUTSIDE"} ${Number(budget?.toPrecision(3))}`;
  const spread = `${values[0].toFixed(3)} to ${values[ROUNDS - 1].toFixed(3)}`;
  const same = line.agreement ? `; ${line.agreement()}` : "";
  console.log(`${value.toFixed(3).padStart(7)}  ${against} ${what}: ${verdict} (rounds ${spread}${same})`);
  return inside;
}
