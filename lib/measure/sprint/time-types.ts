/** Seconds by the name of a time, as in `times_s`. */
export type TimesByName = Record<string, number>;

/** Where the fall of a run is known from. */
export type FallSource = "altitude" | "pooled altitude" | "road day";

/** Times and speeds of a run, and what the fall of the road does to them. Uncertainties are standard ones. */
export interface RunTimings {
  times_s?: TimesByName;
  times_uncertainty_s?: TimesByName;
  /** Instantaneous speed at a distance, km/h. */
  speed_at_kmh?: Record<string, number>;
  speed_uncertainty_kmh?: Record<string, number>;
  /** Mean speed over the last 20.1168 m before a distance, km/h. */
  trap_kmh?: Record<string, number>;
  trap_uncertainty_kmh?: Record<string, number>;
  /** End-height difference over distance, positive downhill; null = not known. */
  net_fall_pct?: number | null;
  net_fall_uncertainty_pct?: number | null;
  net_fall_from?: FallSource | null;
  /** What the fall adds to each time (negative: the run was faster for it). */
  fall_effect_s?: TimesByName;
  fall_effect_uncertainty_s?: TimesByName;
}

/** How many runs of a side went out and back; `unknown` = leg not stated. */
export interface LegCounts {
  out: number;
  back: number;
  unknown: number;
}

/**
 * One time of both sides: the mean of out and back, and B − A, each with the half-width of its own interval (null: too few runs).
 * Results of older versions state the difference only.
 */
export interface TimeDifference {
  a_s: number;
  b_s: number;
  difference_s: number;
  half_width_s: number | null;
  n_a: number;
  n_b: number;
  kind?: "pull" | "sprint";
  a_half_width_s?: number | null;
  b_half_width_s?: number | null;
  legs_a?: LegCounts;
  legs_b?: LegCounts;
}
