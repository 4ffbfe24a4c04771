import { legNotes } from "@/lib/measure/judge/road-signs";
import { amongRuns } from "@/lib/measure/judge/speed-agreement";
import type { PreparedRun } from "@/lib/measure/run/prepare-run";

/**
 * Adds to the runs' notes what only several runs of one car show: a wheel scale or a GPS offset that one run does not share, and a leg
 * that was likely typed the wrong way (per road day; where GPS positions tell the leg, they have the word).
 */
export function judgeTogether(prepared: readonly PreparedRun[]): void {
  const seen = prepared.filter((p) => p.signals !== null);
  const among = amongRuns(seen.map(({ run, agreement }) => ({ id: run.id, agreement })));
  const days = new Set(seen.map(({ run }) => run.road_day ?? ""));
  for (const day of days) {
    const rolling = seen.flatMap(({ run, signals, segments }) =>
      (run.road_day ?? "") === day && signals && segments?.coast && !signals.latitude
        ? [{ run, signals, coasts: segments.coasts }]
        : [],
    );
    for (const [id, notes] of legNotes(rolling)) among.set(id, [...(among.get(id) ?? []), ...notes]);
  }
  for (const { run, notes } of seen) notes.push(...(among.get(run.id) ?? []));
}
