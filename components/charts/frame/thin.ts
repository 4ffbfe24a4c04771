import type { Series } from "@/components/charts/frame/series";

/**
 * Indices that are enough to draw a series into `columns` pixel columns: per column the first, lowest, highest and last
 * point, so that no spike is lost. Gaps are kept: the first null of each run of nulls stays in, which breaks the line there.
 * Shorter inputs come back whole. Never compute from a thinned series.
 */
export function thinIndices(xs: readonly number[], values: Series, columns: number): number[] {
  const n = Math.min(xs.length, values.length);
  const all = Array.from({ length: n }, (_, i) => i);
  const start = xs[0];
  const end = xs[n - 1];
  if (n <= columns * 4 || start === undefined || end === undefined || end <= start) return all;

  const kept: number[] = [];
  let column = 0;
  let bucket: number[] = [];
  const close = () => {
    kept.push(...bucketPicks(values, bucket));
    bucket = [];
  };
  for (let i = 0; i < n; i += 1) {
    const x = xs[i] ?? end;
    const here = Math.min(columns - 1, Math.floor(((x - start) / (end - start)) * columns));
    if (here !== column) {
      close();
      column = here;
    }
    bucket.push(i);
  }
  close();
  return kept;
}

/**
 * One set of indices that is enough to draw several series on a shared x: the union of what each needs. For a server that
 * sends traces to a page: about `4 × series × columns` points at most, whatever the length of the log.
 */
export function thinTogether(xs: readonly number[], series: readonly Series[], columns: number): number[] {
  const kept = new Set(series.flatMap((values) => thinIndices(xs, values, columns)));
  return [...kept].sort((a, b) => a - b);
}

function bucketPicks(values: Series, bucket: readonly number[]): number[] {
  const picks = new Set<number>();
  let lowest: number | null = null;
  let highest: number | null = null;
  let inGap = false;
  for (const i of bucket) {
    const value = values[i] ?? null;
    if (value === null) {
      if (!inGap) picks.add(i);
      inGap = true;
      continue;
    }
    // Both sides of a gap stay, so that the line ends and starts where the data do.
    if (inGap) picks.add(i);
    inGap = false;
    if (lowest === null || value < (values[lowest] ?? 0)) lowest = i;
    if (highest === null || value > (values[highest] ?? 0)) highest = i;
  }
  for (const i of [bucket[0], lowest, highest, bucket.at(-1)]) {
    if (i !== undefined && i !== null) picks.add(i);
  }
  return [...picks].sort((a, b) => a - b);
}
