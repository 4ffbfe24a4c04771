import type { GateNumber, GateWords } from "@/components/features/programmes/gate-field-words";
import { calibrationGateWords } from "@/components/features/programmes/gate-words-calibration";
import type { Gate, LimitedQuantity } from "@/lib/gates/plan";
import { QUANTITIES } from "@/lib/gates/quantities";

/** Sprint times that the analysis knows, by their name in a result. */
export const SPRINT_TIMES: { value: string; label: string }[] = [
  ...["60-100", "80-120", "100-150", "100-200", "0-50", "0-100"].map((time) => ({
    value: time,
    label: `${time} km/h`,
  })),
  { value: "0-60 mph", label: "0-60 mph" },
  ...["18.288 m", "201.168 m", "402.336 m", "1000 m"].map((time) => ({ value: time, label: time })),
];

const REGION: GateNumber[] = [
  { name: "fromRpm", label: "from 1/min" },
  { name: "toRpm", label: "to 1/min" },
];

/** What a gate asks, in words, and the numbers that a lead sets. */
export function gateWords(gate: Gate): GateWords {
  switch (gate.kind) {
    case "evidence":
      switch (gate.ask) {
        case "closed_twins":
          return {
            title: "Closed twins on each side",
            numbers: [{ name: "atLeastPerSide", label: "at least" }],
          };
        case "counterbalanced":
          return { title: "Sides driven in a counterbalanced order", numbers: [] };
        case "road_days":
          return { title: "Road days", numbers: [{ name: "atLeast", label: "at least" }] };
      }
      break;
    case "conditions":
      switch (gate.ask) {
        case "factor_in_range":
          return { title: "Weather factor inside its permitted range", numbers: [] };
        case "alike_temperature":
          return {
            title: "A and B alike in air temperature",
            numbers: [{ name: "withinK", label: "within", unit: "K" }],
          };
        case "alike_pressure":
          return {
            title: "A and B alike in air pressure",
            numbers: [{ name: "withinHpa", label: "within", unit: "hPa" }],
          };
        case "alike_mass":
          return {
            title: "A and B alike in mass",
            numbers: [{ name: "withinKg", label: "within", unit: "kg" }],
          };
        case "alike_tyre_pressure":
          return {
            title: "A and B alike in tyre pressure",
            note: "As typed for the road days, front and rear each.",
            numbers: [{ name: "withinKpa", label: "within", unit: "kPa" }],
          };
        case "alike_fuel":
          return {
            title: "A and B on the same fuel",
            note: "Compares the fuel notes of the road days.",
            numbers: [],
          };
        case "alike_gear":
          return { title: "A and B driven in the same gear", numbers: [] };
        case "twin_closure":
          return { title: "Twins close", numbers: [{ name: "withinPct", label: "within", unit: "%" }] };
      }
      break;
    case "gain":
      return {
        title: "Gain in torque in a region",
        numbers: [{ name: "atLeastPct", label: "at least", unit: "%" }, ...REGION],
      };
    case "no_loss":
      return {
        title: "No loss in torque",
        note: "Empty ends: 500 above the start of the pull, 300 below the limiter.",
        numbers: [{ name: "beyondPct", label: "beyond", unit: "%" }, ...REGION],
      };
    case "sprint": {
      const time = SPRINT_TIMES.find((known) => known.value === gate.time)?.label ?? gate.time;
      return {
        title: `${time}: not slower`,
        numbers: [{ name: "notSlowerByS", label: "by more than", unit: "s" }],
      };
    }
    case "channel_limit": {
      const { name, unit } = QUANTITIES[gate.quantity];
      return {
        title: `${name} at full load`,
        note: SENSOR_NOTE[gate.quantity],
        numbers: [
          { name: "min", label: "at least", unit: unit.trim() },
          { name: "max", label: "at most", unit: unit.trim() },
          { name: "leastLoadS", label: "load held", unit: "s" },
        ],
      };
    }
    case "smooth_curve":
      return {
        title: "Smooth curve",
        note: "No ripple or spike of the mean curve beyond this share of its local fit.",
        numbers: [{ name: "withinPct", label: "within", unit: "%" }],
      };
    default:
      return calibrationGateWords(gate);
  }
}

const SENSOR_NOTE: Partial<Record<LimitedQuantity, string>> = {
  exhaust_temperature: "A sensor follows slowly: a short pull can't show it.",
  boost_overshoot: "Over a logged target, else over the plateau after the peak.",
  injector_duty: "For one injection a cycle; direct injection has its own window.",
};

export const GATE_GROUPS: { kinds: Gate["kind"][]; title: string }[] = [
  { kinds: ["evidence"], title: "Evidence" },
  { kinds: ["conditions"], title: "Conditions" },
  { kinds: ["gain", "no_loss"], title: "Gain and loss" },
  { kinds: ["sprint"], title: "Sprints" },
  { kinds: ["channel_limit", "smooth_curve"], title: "Engine at full load" },
  { kinds: ["touched", "step_limit", "coverage", "integrity", "declaration"], title: "Calibration" },
];

export const LEVEL_WORDS: Record<Gate["level"], string> = {
  must: "Must",
  should: "Should",
  off: "Off",
};
