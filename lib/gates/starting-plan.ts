import type { Gate, GatePlan } from "@/lib/gates/plan";

/** The plan a new programme starts with; a lead edits it. A gain is not asked until a lead asks for it. */
export function startingPlan(): GatePlan {
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
    ],
  };
}

/** Conditions that can be asked for by now and that an older plan does not name, switched off. */
export function conditionsNotIn(plan: GatePlan): Gate[] {
  return startingPlan()
    .gates.filter(({ kind, id }) => kind === "conditions" && !plan.gates.some((gate) => gate.id === id))
    .map((gate) => ({ ...gate, level: "off" }));
}
