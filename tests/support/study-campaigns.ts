import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { randomStream } from "@/lib/signal/random";
import { type Scenario, simulateCampaign } from "./generator";
import { scoreCampaign } from "./score-campaign";

/** Kinds of campaign that the coverage study mixes. All have 6 + 6 runs at 25 rows a second. */
const KINDS: [string, Partial<Scenario>][] = [
  ["front drive, wheel channel", {}],
  ["rear drive, natural aspiration", { car: "coupe" }],
  [
    "all-wheel drive diesel, no undriven wheel",
    { car: "estate", sensors: { undrivenWheel: false, wheelScale: 1.006 } },
  ],
  ["diesel at 2 °C", { car: "estate", tempC: 2 }],
  ["GPS and engine speed", { sensors: { undrivenWheel: false, drivenWheel: false } }],
  [
    "GPS alone",
    { sensors: { undrivenWheel: false, drivenWheel: false, engineSpeed: false, accelerometer: false } },
  ],
  ["strong gusty wind", { windMps: 4, windBetweenRunsMps: 0.8, gustMps: 1 }],
  ["undulating strip", { undulation: 2.5, tilt: 0.008 }],
  [
    "coarse engine speed, wrong wheel scale",
    { sensors: { rpmStep: 50, wheelScale: 1.03, wheelStepKmh: 0.1 } },
  ],
  ["typed inputs", { known: false, massTypedOverTrue: 1.01 }],
  [
    "coast-downs in pieces",
    {
      after: (run) => [
        { what: "neutral", seconds: 5 },
        { what: "brake", toMps: 40 - 2 * run },
        { what: "neutral", seconds: 6 },
        { what: "brake", toMps: 8 },
      ],
    },
  ],
  [
    "a car with soft tyres, spin in two runs",
    { physics: { slipStiffnessN: 220_000, rollingV2: 0.00025 }, spinInRuns: [3, 8] },
  ],
  [
    "stamps that jitter, rows lost, slow pedal",
    { logger: { jitterS: 0.002, lostRows: 0.02, pedalStepPct: 2 }, pedalRampS: 0.4 },
  ],
];

/** Orders of six a side that drift cannot pass for a change; twins go out and back. */
const ORDERS = ["ABBABAABABBA", "BAABABBABAAB", "AABBBBAABBAA", "ABBAABBAABBA"];

/** Half of the campaigns have no change; the others gain or lose this much over a drawn range. */
const CHANGES_PCT = [2, -2, 3, 5, -4, 8];

/** One campaign of the study: what it was and how the analysis did. Errors in percent and percentage points. */
export interface StudyOutcome {
  seed: number;
  kind: string;
  gainPct: number;
  usable: number;
  held: boolean;
  claimed: boolean;
  halfWidthPp: number;
  peakPct: number;
  curveRmsPct: number;
  deltaVsRealisedPp: number;
  known: boolean;
  wheel: boolean;
}

/** The campaign that belongs to a seed: kind, order and change follow from it. */
function studyScenario(seed: number): { kind: string; scenario: Partial<Scenario> } {
  const random = randomStream(seed, 91);
  const [kind, changes] = KINDS[Math.floor(seed / 2) % KINDS.length];
  const gainPct = seed % 2 === 0 ? 0 : CHANGES_PCT[random.nextBelow(CHANGES_PCT.length)];
  const diesel = changes.car === "estate";
  const gainFromRpm = (diesel ? 1900 : 2300) + 100 * random.nextBelow(8);
  const scenario: Partial<Scenario> = {
    ...changes,
    order: ORDERS[random.nextBelow(ORDERS.length)],
    directions: "+-+-+-+-+-+-",
    gainPct,
    gainFromRpm,
    gainToRpm: gainFromRpm + (diesel ? 1200 : 2000),
    driftPerRun: 0.0015 * random.nextNormal(),
    sensors: { ...changes.sensors, rateHz: 25 },
  };
  return { kind, scenario };
}

/** Simulates and analyses the campaign of a seed, and scores it against its truth. */
export function studyCampaign(seed: number): StudyOutcome {
  const { kind, scenario } = studyScenario(seed);
  const simulated = simulateCampaign(scenario, seed);
  const result = analyseCampaign(simulated.campaign, simulated.logs);
  const score = scoreCampaign(result, simulated.truth);
  return {
    seed,
    kind,
    gainPct: scenario.gainPct ?? 0,
    usable: result.runs.filter((run) => run.usable).length,
    held: score.bandHolds === true,
    claimed: score.claims.length > 0,
    halfWidthPp: score.halfWidthPp,
    peakPct: score.peakPct,
    curveRmsPct: score.curveRmsPct,
    deltaVsRealisedPp: score.deltaVsRealisedPp,
    known: scenario.known !== false,
    wheel: scenario.sensors?.undrivenWheel !== false,
  };
}
