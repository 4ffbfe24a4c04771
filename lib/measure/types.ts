import type {
  ChannelDifference,
  EngineChannel,
  RunFullLoad,
  SideFullLoad,
} from "@/lib/measure/engine/full-load-types";
import type { CurveAnomaly, Smoothness } from "@/lib/measure/engine/smoothness-types";
import type { RunTimings, TimeDifference } from "@/lib/measure/sprint/time-types";

/**
 * Input and output of the analysis. The spelling is that of the campaign file and of the result that
 * `npm run -s analyse` prints (snake_case with the unit in the name), so that one shape serves file, database and page.
 * `null` = not known or a gap; nothing is invented.
 */
export type FactorId =
  | "j1349_eta85"
  | "j1349_sqrt"
  | "iso1585_si"
  | "din70020"
  | "j607_std"
  | "ci_na"
  | "ci_turbo_12"
  | "ci_turbo_15"
  | "ci_turbo_liquid";
export type FactorChoice = "auto" | "none" | FactorId;
export type RunKind = "pull" | "coast-down" | "sprint";
export type Leg = "out" | "back";

export interface CampaignVehicle {
  label: string;
  engine: "spark ignition" | "compression ignition";
  aspiration: "natural" | "turbo" | "supercharged";
  displacement_l?: number | null;
  drive: "FWD" | "RWD" | "AWD";
  mass_kg: number;
  mass_uncertainty_kg?: number | null;
  tyre?: string | null;
  rolling_circumference_m?: number | null;
  gear_ratios?: number[] | null;
  final_drive?: number | null;
  speed_at_rpm?: { gear: number; rpm: number; speed_kmh: number } | null;
  redline_rpm: number;
  engine_inertia_kgm2?: number | null;
  wheel_inertia_kgm2?: number | null;
  mesh_efficiency?: number | null;
  /** Standard uncertainties of the figures above; absent: what the class of the figure is worth (vehicle.ts). */
  rolling_circumference_uncertainty_m?: number | null;
  engine_inertia_uncertainty_kgm2?: number | null;
  wheel_inertia_uncertainty_kgm2?: number | null;
  mesh_efficiency_uncertainty?: number | null;
  qc_mg_per_l_cycle?: number | null;
}

export interface RunWeather {
  temp_c: number;
  pressure_hpa: number;
  rh_pct: number;
}

export interface CampaignRun {
  id: string;
  file: string;
  kind: RunKind;
  side?: string | null;
  leg?: Leg | null;
  order?: number | null;
  gear?: number | null;
  started_at?: string | null;
  weather?: RunWeather | null;
  /** Groups runs that share losses; absent: all runs of the campaign are one road day. */
  road_day?: string | null;
  /** Test mass of this run, where it differs from the vehicle's (another road day, another driver). */
  mass_kg?: number | null;
}

export interface CampaignSettings {
  factor: FactorChoice;
  rpm_step: number;
  level: number;
  seed: number;
  /** Ranges over which the difference is averaged, 1/min; absent: the compared range and its thirds. */
  rpm_ranges?: [number, number][] | null;
  /** Timed beside the usual ranges and distances. */
  speed_pairs?: ({ from_kmh: number; to_kmh: number } | { from_mph: number; to_mph: number })[] | null;
  distances_m?: number[] | null;
  /** Net fall of a sprint beyond which it gets a note, %; absent: 0.5. */
  fall_limit_pct?: number | null;
}

export interface Campaign {
  campaign: 1;
  vehicle: CampaignVehicle;
  runs: CampaignRun[];
  compare?: { a: string; b: string } | null;
  settings: CampaignSettings;
}

/** What a finding does: figures are left out ("masked"), shown with a warning ("warned"), or the run is not used ("refused"). */
export type Consequence = "masked" | "warned" | "refused";

export interface Reason {
  code: string;
  message: string;
}
/** A finding about a run, with the span it is about where it has one. Results of older versions state no consequence. */
export interface Note extends Reason {
  from_s?: number;
  to_s?: number;
  consequence?: Consequence;
}
export interface Span {
  from_s: number;
  to_s: number;
}
export type Series = (number | null)[];

export interface FactorResult {
  id: FactorId | "none";
  value: number | null;
  in_range: boolean | null;
  applied: boolean;
  why: string;
}

export interface PowerCurve {
  rpm: number[];
  tractive_kw: Series;
  wheel_kw: Series;
  engine_kw: Series;
  engine_nm: Series;
  engine_kw_reference: Series;
  engine_nm_reference: Series;
}

/** What the uncertainty of an absolute figure is made of. */
export type BudgetComponent =
  | "mass"
  | "speed scale"
  | "wind"
  | "grade"
  | "rolling and air resistance"
  | "engine inertia"
  | "wheel inertia"
  | "mesh efficiency"
  | "weather"
  | "smoothing"
  | "repeatability";

/** One independent part: its standard uncertainty (one standard deviation) and in a sentence where that comes from. */
export interface BudgetPart {
  component: BudgetComponent;
  standard_pct: number;
  standard_kw: number;
  basis: string;
}

/** Uncertainty budget of a peak power: the expanded figure is the coverage factor times the root sum of squares. */
export interface UncertaintyBudget {
  coverage_factor: number;
  parts: BudgetPart[];
  expanded_pct: number;
  expanded_kw: number;
}

/** Highest power and torque; the uncertainties are expanded (about 95 %). Results of older versions lack the last two members. */
export interface Peak {
  engine_kw: number;
  engine_kw_rpm: number;
  engine_nm: number;
  engine_nm_rpm: number;
  uncertainty_kw: number | null;
  uncertainty_nm?: number | null;
  budget?: UncertaintyBudget | null;
}

export interface RunResult extends RunTimings {
  id: string;
  usable: boolean;
  reasons: Note[];
  notes: Note[];
  speed_source?: string | null;
  sample_rate_hz?: number | null;
  segments?: { pull?: Span; coast?: Span; sprint?: Span };
  loss?: {
    f0_n: number;
    f1_n_per_mps: number;
    f2_n_per_mps2: number;
    source: "run" | "twin" | "road day";
  } | null;
  factor?: FactorResult;
  curve?: PowerCurve | null;
  peak?: Peak | null;
  full_load?: RunFullLoad;
}

export interface SideResult {
  n: number;
  basis: "reference" | "day";
  rpm: number[];
  engine_kw: Series;
  engine_nm: Series;
  /** Expanded uncertainty of `engine_kw` at each point, kW. */
  engine_kw_uncertainty?: Series;
  peak: Peak | null;
  full_load?: SideFullLoad | null;
  /** Null: too few runs to tell ripple from scatter. */
  smoothness?: Smoothness | null;
  anomalies?: CurveAnomaly[];
}

/** Mean difference B − A over a range of engine speed; its interval stands alone, it is not part of the simultaneous band. */
export interface RangeMean {
  from_rpm: number;
  to_rpm: number;
  pct: number;
  low_pct: number | null;
  high_pct: number | null;
  /** Smallest mean difference that these runs could have shown here (80 % chance). */
  resolvable_pct: number | null;
  n_a: number;
  n_b: number;
}

export interface DeltaRegion {
  from_rpm: number;
  to_rpm: number;
  verdict: "gain" | "loss";
}

export interface DeltaResult {
  quantity: "engine_nm";
  basis: "reference" | "day";
  rpm: number[];
  pct: Series;
  low_pct: Series;
  high_pct: Series;
  abs_nm: Series;
  level: number;
  simultaneous: boolean;
  method: string;
  regions: DeltaRegion[];
  resolvable_pct: Series;
  /**
   * What the half-width of the band is made of besides the standard error; null without a band. `smoothing_pct`: what it allows
   * for smoothing, median over the curve; older results do not state it.
   */
  band?: { critical_value: number; df: number; smoothing_pct?: number } | null;
  drift_pct_per_run: number | null;
  twins: { side: string; out: string; back: string; closure_pct: number | null }[];
  /** Difference of the two sides' peaks (B − A) with the half-width of its own interval. */
  peak_difference?: {
    engine_kw: number;
    half_width_kw: number | null;
    engine_nm: number;
    half_width_nm: number | null;
  } | null;
  /** Differences of times (B − A) with their own interval, per name as in `times_s`. */
  times_difference?: Record<string, TimeDifference>;
  range_means?: RangeMean[];
  /** Engine channels at full load that both sides carry. */
  channels?: Partial<Record<EngineChannel, ChannelDifference>>;
  warnings?: Reason[];
}

/** Scatter between the runs of one road day, with side, leg and drift taken out; what the plan of a later day rests on. */
export interface RepeatabilityResult {
  road_day: string | null;
  runs: number;
  /** Degrees of freedom of both standard deviations: runs less what was taken out. 0 = none can be had. */
  df: number;
  /** Standard deviation between runs of the torque at one engine speed, %. */
  sd_point_pct: number | null;
  /** The same of the mean torque over a range of `range_rpm`, %. */
  sd_range_pct: number | null;
  range_rpm: number;
  /** How the out and the back run of the twins agree, %: root mean square and largest. */
  closure: { twins: number; rms_pct: number | null; largest_pct: number | null };
}

export interface CampaignResult {
  analysis_version: string;
  runs: RunResult[];
  repeatability?: RepeatabilityResult[];
  sides: Record<string, SideResult>;
  delta?: DeltaResult | null;
  warnings?: Reason[];
}
