import { fallNote, fallResult, type NetFall, pooledFalls } from "@/lib/measure/sprint/net-fall";
import type { Campaign, RunResult } from "@/lib/measure/types";

/** What tells the effect of the road's fall on a run's times. */
export interface FallInput {
  /** By the run's own altitude; null = not known. */
  fall: NetFall | null;
  /** Seconds that 1 % of fall takes off each time. */
  sensitivityS: Readonly<Record<string, number>>;
}

/** Start value of the limit on the net fall; SAE J1263 asks for a constant grade below 0.5 %. */
const USUAL_LIMIT_PCT = 0.5;

/**
 * Adds to each result the net fall of its run, pooled over the runs of one kind and road day, and its effect on each time. A
 * sprint beyond the limit, or whose fall is not known, gets a note. `results` has one element a run of the campaign.
 */
export function addFalls(
  { runs, settings }: Pick<Campaign, "runs" | "settings">,
  results: readonly RunResult[],
  inputs: ReadonlyMap<string, FallInput>,
): void {
  for (const kind of ["pull", "sprint"] as const) {
    const members = runs.flatMap((run, k) => {
      const input = inputs.get(run.id);
      return run.kind === kind && input && results[k].usable
        ? [{ run, result: results[k], fall: input.fall, sensitivityS: input.sensitivityS }]
        : [];
    });
    const falls = pooledFalls(
      members.map(({ run, fall }) => ({ leg: run.leg ?? null, roadDay: run.road_day ?? null, fall })),
    );
    members.forEach(({ result, sensitivityS }, k) => {
      Object.assign(result, fallResult(falls[k], sensitivityS));
      const note = kind === "sprint" && fallNote(falls[k], settings.fall_limit_pct ?? USUAL_LIMIT_PCT);
      if (note) result.notes = [...result.notes, { ...note, consequence: "warned" }];
    });
  }
}
