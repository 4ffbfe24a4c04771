/** A stretch of a side's mean curve that leaves its local fit by more than the runs' scatter explains. */
export interface CurveAnomaly {
  code: "spike" | "ripple";
  from_rpm: number;
  to_rpm: number;
  /** Largest deviation from the local fit, signed. */
  size_pct: number;
  /** What it had to exceed there. */
  limit_pct: number;
  /** Runs that deviate there by more than half of it to the same side, of those that cover it. */
  runs: { showing: number; of: number };
}

/** Deviation of a side's mean curve from its local fit, with the half-width of its simultaneous interval; null where it can't be judged. */
export interface Smoothness {
  rpm: number[];
  deviation_pct: (number | null)[];
  half_width_pct: (number | null)[];
}
