import type { ComparedRun } from "@/lib/compare/band/run-design";
import type { DeltaResult } from "@/lib/measure/types";

/**
 * Pairs an out and a back run of one side and road day, nearest in order first. Closure = mean over the shared engine speeds
 * of back over out, minus 1, in percent (signed); null when they share fewer than three points.
 */
export function findTwins(
  runs: readonly ComparedRun[],
  logTorque: (run: number) => ArrayLike<number>,
): DeltaResult["twins"] {
  const pairs: { out: number; back: number; distance: number }[] = [];
  runs.forEach((out, i) => {
    if (out.leg !== "out") return;
    runs.forEach((back, j) => {
      if (back.leg !== "back" || back.side !== out.side || back.roadDay !== out.roadDay) return;
      pairs.push({ out: i, back: j, distance: Math.abs((back.order ?? j) - (out.order ?? i)) });
    });
  });
  pairs.sort((p, q) => p.distance - q.distance || p.out - q.out || p.back - q.back);
  const taken = new Set<number>();
  const chosen: typeof pairs = [];
  for (const pair of pairs) {
    if (taken.has(pair.out) || taken.has(pair.back)) continue;
    taken.add(pair.out);
    taken.add(pair.back);
    chosen.push(pair);
  }
  chosen.sort((p, q) => p.out - q.out);
  return chosen.map(({ out, back }) => {
    const a = logTorque(out);
    const b = logTorque(back);
    let sum = 0;
    let shared = 0;
    for (let k = 0; k < a.length; k++) {
      if (Number.isNaN(a[k]) || Number.isNaN(b[k])) continue;
      sum += b[k] - a[k];
      shared++;
    }
    const closure = shared < 3 ? null : 100 * Math.expm1(sum / shared);
    return { side: runs[out].side, out: runs[out].id, back: runs[back].id, closure_pct: closure };
  });
}
