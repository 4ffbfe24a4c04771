/** How much a gate binds: a must blocks a promotion unless waived, a should is shown, off is not asked. */
export type GateLevel = "must" | "should" | "off";

/** `waived` is given by a lead in a decision, `stale` by whoever knows that the inputs have moved; neither is computed here. */
export type GateState = "met" | "not_met" | "too_little" | "does_not_apply" | "waived" | "stale";

interface Asked<Kind extends string> {
  /** Stable within a plan, e.g. `evidence.twins`. */
  id: string;
  kind: Kind;
  level: GateLevel;
}

export type EvidenceGate = Asked<"evidence"> &
  (
    | { ask: "closed_twins"; atLeastPerSide: number }
    | { ask: "counterbalanced" }
    | { ask: "road_days"; atLeast: number }
  );

export type ConditionsGate = Asked<"conditions"> &
  (
    | { ask: "factor_in_range" }
    | { ask: "alike_temperature"; withinK: number }
    | { ask: "alike_pressure"; withinHpa: number }
    | { ask: "alike_mass"; withinKg: number }
    | { ask: "alike_tyre_pressure"; withinKpa: number }
    | { ask: "alike_fuel" }
    | { ask: "alike_gear" }
    | { ask: "twin_closure"; withinPct: number }
  );

/** Somewhere-region claim on torque; the whole simultaneous band must lie on the safe side. */
export type GainGate = Asked<"gain"> & { fromRpm: number; toRpm: number; atLeastPct: number };

/** Null ends stand for 500 above the start of the pull and 300 below the limiter. */
export type NoLossGate = Asked<"no_loss"> & {
  fromRpm: number | null;
  toRpm: number | null;
  beyondPct: number;
};

/** `time` is a name of `times_s`, e.g. "80-120" (km/h). */
export type SprintGate = Asked<"sprint"> & { time: string; notSlowerByS: number };

/** What a limit can be set on: an engine channel under full load, or a figure drawn from one. */
export type LimitedQuantity =
  | "lambda"
  | "knock_retard"
  | "exhaust_temperature"
  | "boost_overshoot"
  | "intake_temperature"
  | "intake_temperature_rise"
  | "coolant_temperature"
  | "injector_duty";

/**
 * Limits of an engine quantity at full load on side B, in its own unit (lambda 1, retard °, temperatures °C, rise K, overshoot
 * kPa, duty %). `leastLoadS`: a shorter pull can't show that it stays inside. At least one limit is a number.
 */
export type ChannelLimitGate = Asked<"channel_limit"> & {
  quantity: LimitedQuantity;
  min: number | null;
  max: number | null;
  leastLoadS: number;
};

/** No ripple or spike of B's mean curve beyond x % of its local fit. */
export type SmoothCurveGate = Asked<"smooth_curve"> & { withinPct: number };

/** Names as a description writes them; a function's name allows every characteristic that the description puts into it. */
export interface NamedTables {
  functions: string[];
  characteristics: string[];
}

/** Only what is named changed against what stands (null = anything described); `uncovered`: bytes outside the description may. */
export type TouchedGate = Asked<"touched"> & { allowed: NamedTables | null; uncovered: boolean };

/**
 * Limits on changed tables, `scope` naming them or their functions ([] = all). `measure`: "share" = % of the span of the values
 * before (of the value's own size where they are all alike), "unit" = each table's own unit. A null limit is not asked.
 */
export type StepLimitGate = Asked<"step_limit"> & {
  scope: string[];
  measure: "share" | "unit";
  maxNeighbourStep: number | null;
  movedAtMost: number | null;
  against: "parent" | "standing";
};

/** Usable runs of any kind visited at least x % of the cells that changed against what stands. */
export type CoverageGate = Asked<"coverage"> & { atLeastPct: number };

/** The image matches its fingerprint and its declared checksum regions. */
export type IntegrityGate = Asked<"integrity">;

/** What the revision says about emission and safety does not contradict what it changes. */
export type DeclarationGate = Asked<"declaration">;

export type Gate =
  | EvidenceGate
  | ConditionsGate
  | GainGate
  | NoLossGate
  | SprintGate
  | ChannelLimitGate
  | SmoothCurveGate
  | TouchedGate
  | StepLimitGate
  | CoverageGate
  | IntegrityGate
  | DeclarationGate;

/** A versioned plan: the version is kept by whoever stores it. */
export interface GatePlan {
  plan: 1;
  gates: Gate[];
}

export interface GateResult {
  id: string;
  kind: Gate["kind"];
  level: GateLevel;
  state: GateState;
  /** Short name of what is asked, e.g. "No loss beyond 1 %, 2,200 to 6,300 per minute". */
  title: string;
  /** One plain sentence: why this state. */
  why: string;
  /** What to do next; null when met or when it does not apply. */
  next: string | null;
}
