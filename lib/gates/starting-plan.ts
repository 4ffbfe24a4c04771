import type { ChannelLimitGate, Gate, GateLevel, GatePlan, LimitedQuantity } from "@/lib/gates/plan";
import type { CampaignVehicle } from "@/lib/measure/types";

/** What the starting limits depend on. */
type EngineKind = Pick<CampaignVehicle, "engine" | "aspiration">;

/**
 * Limits at full load by kind of engine [common practice, no source]. Lambda and knock must be shown; what a short pull hardly
 * shows, or few cars log, should be. Injector duty is off: it depends on the kind of injection.
 */
function startingLimits({ engine, aspiration }: EngineKind): ChannelLimitGate[] {
  const petrol = engine === "spark ignition";
  const limit = (
    quantity: LimitedQuantity,
    level: GateLevel,
    limits: Partial<Pick<ChannelLimitGate, "min" | "max" | "leastLoadS">>,
  ): ChannelLimitGate => ({
    ...{ id: `limit.${quantity}`, kind: "channel_limit", level, quantity },
    ...{ min: null, max: null, leastLoadS: 3, ...limits },
  });
  return [
    limit("lambda", "must", petrol ? { min: 0.78, max: 0.9 } : { min: 1.15 }),
    ...(petrol ? [limit("knock_retard", "must", { max: 3 })] : []),
    limit("exhaust_temperature", "should", { max: petrol ? 950 : 850, leastLoadS: 20 }),
    ...(aspiration === "natural" ? [] : [limit("boost_overshoot", "should", { max: 15 })]),
    limit("intake_temperature_rise", "should", { max: 20 }),
    limit("coolant_temperature", "should", { max: 110 }),
    limit("injector_duty", "off", { max: 90 }),
  ];
}

/** Gates on what changed in the calibration. The step limits are off; their figures are common practice, no source. */
const CALIBRATION: Gate[] = [
  { id: "touched", kind: "touched", level: "must", allowed: null, uncovered: false },
  {
    id: "step_limit",
    kind: "step_limit",
    level: "off",
    scope: [],
    measure: "share",
    maxNeighbourStep: 50,
    movedAtMost: 20,
    against: "standing",
  },
  { id: "coverage", kind: "coverage", level: "should", atLeastPct: 80 },
  { id: "integrity", kind: "integrity", level: "must" },
  { id: "declaration", kind: "declaration", level: "must" },
];

/** The plan a new programme starts with; a lead edits it. A gain is not asked until a lead asks for it. */
export function startingPlan(
  engine: EngineKind = { engine: "spark ignition", aspiration: "turbo" },
): GatePlan {
  return {
    plan: 1,
    gates: [
      { id: "evidence.twins", kind: "evidence", level: "must", ask: "closed_twins", atLeastPerSide: 3 },
      { id: "evidence.order", kind: "evidence", level: "must", ask: "counterbalanced" },
      { id: "evidence.days", kind: "evidence", level: "must", ask: "road_days", atLeast: 1 },
      { id: "conditions.factor", kind: "conditions", level: "should", ask: "factor_in_range" },
      {
        id: "conditions.temperature",
        kind: "conditions",
        level: "must",
        ask: "alike_temperature",
        withinK: 5,
      },
      { id: "conditions.pressure", kind: "conditions", level: "must", ask: "alike_pressure", withinHpa: 10 },
      { id: "conditions.mass", kind: "conditions", level: "must", ask: "alike_mass", withinKg: 15 },
      {
        id: "conditions.tyres",
        kind: "conditions",
        level: "must",
        ask: "alike_tyre_pressure",
        withinKpa: 10,
      },
      { id: "conditions.fuel", kind: "conditions", level: "must", ask: "alike_fuel" },
      { id: "conditions.gear", kind: "conditions", level: "must", ask: "alike_gear" },
      { id: "conditions.closure", kind: "conditions", level: "should", ask: "twin_closure", withinPct: 2 },
      { id: "gain", kind: "gain", level: "off", fromRpm: 2500, toRpm: 4500, atLeastPct: 1 },
      { id: "no_loss", kind: "no_loss", level: "must", fromRpm: null, toRpm: null, beyondPct: 1 },
      { id: "sprint.80-120", kind: "sprint", level: "should", time: "80-120", notSlowerByS: 0.1 },
      { id: "sprint.100-200", kind: "sprint", level: "should", time: "100-200", notSlowerByS: 0.1 },
      ...startingLimits(engine),
      { id: "smooth", kind: "smooth_curve", level: "must", withinPct: 2 },
      ...CALIBRATION,
    ],
  };
}

const OFFERED: ReadonlySet<Gate["kind"]> = new Set([
  "conditions",
  "channel_limit",
  "smooth_curve",
  ...CALIBRATION.map(({ kind }) => kind),
]);

/** Gates that can be asked for by now and that an older plan does not name, switched off. */
export function gatesNotIn(plan: GatePlan, engine?: EngineKind): Gate[] {
  return startingPlan(engine)
    .gates.filter(({ kind, id }) => OFFERED.has(kind) && !plan.gates.some((gate) => gate.id === id))
    .map((gate) => ({ ...gate, level: "off" }));
}
