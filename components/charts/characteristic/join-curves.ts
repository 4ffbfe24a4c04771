/** A curve by its own points, x ascending; null = no value there. */
export interface PointCurve {
  x: readonly number[];
  y: readonly (number | null)[];
}

/**
 * Value of a curve at `x` as a control unit reads it: straight between two points, held beyond the first and the last
 * (common practice, no source). Of points with the same x the last counts. Null beside a gap and for an empty curve. O(log n).
 */
export function curveAt({ x: xs, y: ys }: PointCurve, x: number): number | null {
  const last = xs.length - 1;
  if (last < 0) return null;
  if (x < (xs[0] ?? 0)) return ys[0] ?? null;
  let low = 0;
  let high = last;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((xs[middle] ?? 0) <= x) low = middle;
    else high = middle - 1;
  }
  const y0 = ys[low] ?? null;
  const [x0 = 0, x1] = [xs[low], xs[low + 1]];
  if (x === x0 || x1 === undefined) return y0;
  const y1 = ys[low + 1] ?? null;
  return y0 === null || y1 === null ? null : y0 + ((y1 - y0) * (x - x0)) / (x1 - x0);
}

export interface JoinedCurves {
  /** All points of both, ascending, each once. */
  x: number[];
  a: (number | null)[];
  b: (number | null)[];
  /** B − A; null where either has none. */
  delta: (number | null)[];
}

/** Both curves at all points of both. One of them may be absent: its values are then gaps. O((n + m) log(n + m)). */
export function joinCurves(a: PointCurve | null, b: PointCurve | null): JoinedCurves {
  const x = [...new Set([...(a?.x ?? []), ...(b?.x ?? [])])].sort((p, q) => p - q);
  const valuesA = x.map((at) => (a ? curveAt(a, at) : null));
  const valuesB = x.map((at) => (b ? curveAt(b, at) : null));
  const delta = x.map((_, i) => {
    const [before, after] = [valuesA[i] ?? null, valuesB[i] ?? null];
    return before === null || after === null ? null : after - before;
  });
  return { x, a: valuesA, b: valuesB, delta };
}
