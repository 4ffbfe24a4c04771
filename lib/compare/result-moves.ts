import type { CampaignResult, DeltaRegion } from "@/lib/measure/types";

/** A figure with its half-width; null = not had. */
export interface MovedValue {
  value: number | null;
  halfWidth: number | null;
}

/** One figure of a comparison under two computations of the same input. */
export interface ResultMove {
  what: string;
  unit: string;
  /** A difference B − A, printed with its sign. */
  isDifference: boolean;
  before: MovedValue;
  after: MovedValue;
}

export interface ResultMoves {
  /** Every figure that either result has, moved or not. */
  figures: ResultMove[];
  regions: { before: DeltaRegion[]; after: DeltaRegion[] };
  /** Runs that one computation uses and the other refuses. */
  runs: { id: string; usableBefore: boolean; usableAfter: boolean }[];
}

type Named = Map<string, Omit<ResultMove, "before" | "after"> & { is: MovedValue }>;

function figuresOf({ sides, delta }: CampaignResult): Named {
  const named: Named = new Map();
  const add = (
    what: string,
    unit: string,
    value: number | null | undefined,
    halfWidth: number | null | undefined,
    isDifference = true,
  ) => {
    if (value === null || value === undefined) return;
    named.set(what, { what, unit, isDifference, is: { value, halfWidth: halfWidth ?? null } });
  };
  for (const side of ["A", "B"]) {
    const peak = sides[side]?.peak;
    add(`Peak power, side ${side}`, "kW", peak?.engine_kw, peak?.uncertainty_kw, false);
    add(`Peak torque, side ${side}`, "N·m", peak?.engine_nm, peak?.uncertainty_nm, false);
  }
  const peaks = delta?.peak_difference;
  add("Peak power, B − A", "kW", peaks?.engine_kw, peaks?.half_width_kw);
  add("Peak torque, B − A", "N·m", peaks?.engine_nm, peaks?.half_width_nm);
  for (const mean of delta?.range_means ?? []) {
    const { from_rpm, to_rpm, pct, low_pct, high_pct } = mean;
    const half = low_pct === null || high_pct === null ? null : (high_pct - low_pct) / 2;
    add(`Mean of ${from_rpm}–${to_rpm} per minute, B − A`, "%", pct, half);
  }
  for (const [name, time] of Object.entries(delta?.times_difference ?? {}))
    add(`Time ${name}, B − A`, "s", time.difference_s, time.half_width_s);
  return named;
}

const NONE: MovedValue = { value: null, halfWidth: null };

/** Sets two results of one input side by side: figures by name, verdict regions, and runs whose verdict changed. */
export function resultMoves(before: CampaignResult, after: CampaignResult): ResultMoves {
  const [old, now] = [figuresOf(before), figuresOf(after)];
  const figures = [...new Set([...old.keys(), ...now.keys()])].flatMap((name): ResultMove[] => {
    const known = now.get(name) ?? old.get(name);
    if (!known) return [];
    const { what, unit, isDifference } = known;
    return [
      { what, unit, isDifference, before: old.get(name)?.is ?? NONE, after: now.get(name)?.is ?? NONE },
    ];
  });
  const usable = new Map(before.runs.map((run) => [run.id, run.usable]));
  return {
    figures,
    regions: { before: before.delta?.regions ?? [], after: after.delta?.regions ?? [] },
    runs: after.runs.flatMap(({ id, usable: usableAfter }) => {
      const usableBefore = usable.get(id);
      return usableBefore === undefined || usableBefore === usableAfter
        ? []
        : [{ id, usableBefore, usableAfter }];
    }),
  };
}
