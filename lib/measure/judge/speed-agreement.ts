import { fixed, signedPercent } from "@/lib/measure/judge/words";
import type { RunSignals, SampledChannel } from "@/lib/measure/run/run-signals";
import type { Note, Reason } from "@/lib/measure/types";
import { median, quantile } from "@/lib/signal/statistics";

/** How the wheel speed of one log goes with its GPS speed. */
export interface SpeedAgreement {
  wheel: "undriven" | "driven";
  /** Wheel over GPS, without hard acceleration. */
  ratio: number;
  /** The same over the first, middle and last third of the driving. */
  thirds: number[];
  /** GPS behind the wheel, s. */
  lagS: number;
  /** False when the offset lies at the end of what was tried, or none fits better than another. */
  settled: boolean;
  /** When the comparison begins and ends, s. */
  from_s: number;
  to_s: number;
}

const LARGEST_LAG_S = 1.5;
const LAG_STEP_S = 0.05;
/** Every n-th sample is enough for the offset. */
const MOST_SAMPLES = 250;
const LEAST_SPEED_MPS = 8;
const STEADY_MPS2 = 0.8;
/** Two tyres of one car and their wear stay within 4 % [common practice, no source]. */
const SCALE_LIMIT = 0.04;
/** Beyond this one of the two is in another unit, or not the speed of this car. */
const UNIT_LIMIT = 0.15;
const CHANGE_LIMIT = 0.015;
/** Receivers are up to 0.2 s behind (measurement.md 7.4, from memory); more is a matter of clocks. */
const USUAL_LAG_S = 0.6;
/** The offset is the receiver's own and hardly changes from run to run, s. */
const LAG_CHANGE_S = 0.2;
const RUN_SCALE_LIMIT = 0.01;

/** 430 km/h: no road car is faster on a strip. */
const LARGEST_SPEED_MPS = 120;

/** Ratios that one unit read as another makes. */
const UNIT_RATIOS: readonly [number, string][] = [
  [1.609344, "miles an hour and kilometres an hour"],
  [1.852, "knots and kilometres an hour"],
  [3.6, "kilometres an hour and metres a second"],
  [1.150779, "knots and miles an hour"],
  [2.236936, "miles an hour and metres a second"],
];

/** Compares wheel and GPS speed of one log; null when either is absent or they share under 40 samples at speed. O(samples). */
export function speedAgreement(signals: RunSignals): SpeedAgreement | null {
  const { gps } = signals;
  const wheel = signals.undriven ? "undriven" : "driven";
  const reference = signals[wheel];
  if (!gps || !reference) return null;
  const start = Math.max(gps.times[0], reference.times[0]) + LARGEST_LAG_S;
  const end =
    Math.min(gps.times[gps.times.length - 1], reference.times[reference.times.length - 1]) - LARGEST_LAG_S;
  const used: number[] = [];
  for (let i = 0; i < gps.times.length; i++) {
    const at = valueAt(reference, gps.times[i]);
    if (gps.times[i] > start && gps.times[i] < end && at > LEAST_SPEED_MPS && gps.values[i] > 1) used.push(i);
  }
  if (used.length < 40) return null;
  const stride = Math.ceil(used.length / MOST_SAMPLES);
  const { lagS, settled } = bestLag(
    reference,
    gps,
    used.filter((_, k) => k % stride === 0),
  );
  const ratios = used.flatMap((i) => {
    const t = gps.times[i] - lagS;
    const slope = valueAt(reference, t + 0.5) - valueAt(reference, t - 0.5);
    return Math.abs(slope) < STEADY_MPS2 ? [valueAt(reference, t) / gps.values[i]] : [];
  });
  if (ratios.length < 30) return null;
  const third = Math.floor(ratios.length / 3);
  return {
    wheel,
    ratio: median(ratios),
    thirds: [0, 1, 2].map((k) => median(ratios.slice(k * third, (k + 1) * third))),
    lagS,
    settled,
    from_s: gps.times[used[0]],
    to_s: gps.times[used[used.length - 1]],
  };
}

function valueAt({ times, values }: SampledChannel, t: number): number {
  let low = 0;
  let high = times.length - 1;
  while (low + 1 < high) {
    const middle = (low + high) >>> 1;
    if (times[middle] <= t) low = middle;
    else high = middle;
  }
  const u = Math.min(1, Math.max(0, (t - times[low]) / (times[high] - times[low])));
  return values[low] + u * (values[high] - values[low]);
}

/** The offset at which wheel and GPS differ least once a common factor is taken out. */
function bestLag(
  reference: SampledChannel,
  gps: SampledChannel,
  used: readonly number[],
): { lagS: number; settled: boolean } {
  const steps = Math.round(LARGEST_LAG_S / LAG_STEP_S);
  const misfits: number[] = [];
  for (let k = -steps; k <= steps; k++) {
    let rr = 0;
    let rg = 0;
    let gg = 0;
    for (const i of used) {
      const r = valueAt(reference, gps.times[i] - k * LAG_STEP_S);
      rr += r * r;
      rg += r * gps.values[i];
      gg += gps.values[i] ** 2;
    }
    misfits.push((gg - (rg * rg) / rr) / used.length);
  }
  let best = 0;
  for (let k = 1; k < misfits.length; k++) if (misfits[k] < misfits[best]) best = k;
  const atEnd = best === 0 || best === misfits.length - 1;
  const [left, middle, right] = [misfits[best - 1], misfits[best], misfits[best + 1]];
  const bend = left + right - 2 * middle;
  const refine = atEnd || !(bend > 0) ? 0 : (left - right) / (2 * bend);
  // Half a second off must fit clearly worse, or the speed hardly changes and no offset can be told.
  const off = Math.round(0.5 / LAG_STEP_S);
  const worse = Math.min(misfits[best - off] ?? Infinity, misfits[best + off] ?? Infinity);
  return { lagS: (best - steps + refine) * LAG_STEP_S, settled: !atEnd && worse > 1.5 * middle };
}

/** Why a log whose road speed no road car reaches is not used; null when it is plausible. */
export function implausibleSpeed({ speedRows, speedName }: RunSignals): Reason | null {
  const top = quantile(speedRows, 0.99);
  if (!(top > LARGEST_SPEED_MPS)) return null;
  return {
    code: "speed_implausible",
    message: `The ${speedName} speed reaches ${fixed(3.6 * top, 0)} km/h. Its unit is wrong: state it in a channel key.`,
  };
}

/** Why a log whose speeds contradict each other beyond any tyre is not used; null when they agree. */
export function speedContradiction(agreement: SpeedAgreement | null): Reason | null {
  if (!agreement || Math.abs(agreement.ratio - 1) < UNIT_LIMIT) return null;
  const { ratio } = agreement;
  const unit = UNIT_RATIOS.find(([r]) => Math.abs(ratio / r - 1) < 0.04 || Math.abs(ratio * r - 1) < 0.04);
  return {
    code: "speed_units_disagree",
    message: `The ${agreement.wheel} wheel speed is ${fixed(ratio, 2)} times the GPS speed${unit ? `, as ${unit[1]} are` : ""}. One of the two is read in the wrong unit or is not this car's speed; state the units in a channel key.`,
  };
}

/** Findings about wheel against GPS in one log: scale beyond 4 %, scale that changes on the way, an offset that is large or not settled. */
export function agreementNotes(agreement: SpeedAgreement | null): Note[] {
  if (!agreement) return [];
  const { ratio, thirds, lagS, settled, wheel } = agreement;
  const span = { from_s: agreement.from_s, to_s: agreement.to_s };
  const notes: Note[] = [];
  if (Math.abs(ratio - 1) > SCALE_LIMIT) {
    notes.push({
      code: "wheel_scale",
      consequence: "warned",
      ...span,
      message: `The ${wheel} wheel speed reads ${signedPercent(ratio - 1)} against GPS. GPS sets the scale of what is shown; check the rolling circumference in the logger or the control unit.`,
    });
  }
  const spread = Math.max(...thirds) - Math.min(...thirds);
  if (spread > CHANGE_LIMIT && wheel === "undriven") {
    notes.push({
      code: "wheel_scale_changes",
      consequence: "warned",
      ...span,
      message: `Wheel over GPS speed changes by ${fixed(100 * spread, 1)} % within the run (${thirds.map((x) => fixed(x, 3)).join(", ")} by thirds). Look for poor satellite reception or a slipping or locking wheel.`,
    });
  }
  if (!settled || Math.abs(lagS) > USUAL_LAG_S) {
    notes.push({
      code: "gps_offset",
      consequence: "warned",
      ...span,
      message: settled
        ? `The GPS speed lies ${fixed(Math.abs(lagS), 2)} s ${lagS > 0 ? "behind" : "ahead of"} the wheel speed; it was shifted. Check how the logger stamps the two.`
        : "The time offset between GPS and wheel speed could not be settled. Check how the logger stamps the two.",
    });
  }
  return notes;
}

/** Findings that only several runs of one car show: a scale or a GPS offset that one run does not share with the others. */
export function amongRuns(
  runs: readonly { id: string; agreement: SpeedAgreement | null }[],
): Map<string, Note[]> {
  const known = runs.flatMap(({ id, agreement }) => (agreement ? [{ id, agreement }] : []));
  const found = new Map<string, Note[]>();
  if (known.length < 3) return found;
  const ratio = median(known.map((run) => run.agreement.ratio));
  const lag = median(known.map((run) => run.agreement.lagS));
  for (const { id, agreement } of known) {
    const notes: Note[] = [];
    const own = agreement.ratio / ratio - 1;
    if (Math.abs(own) > RUN_SCALE_LIMIT) {
      notes.push({
        code: "wheel_scale_differs",
        consequence: "warned",
        message: `Wheel over GPS speed lies ${signedPercent(own)} away from the other runs. Check tyre pressures, and whether wheels or logger settings were changed in between.`,
      });
    }
    if (agreement.settled && Math.abs(agreement.lagS - lag) > LAG_CHANGE_S) {
      notes.push({
        code: "gps_offset_differs",
        consequence: "warned",
        message: `The GPS speed lies ${fixed(Math.abs(agreement.lagS - lag), 2)} s ${agreement.lagS > lag ? "later" : "earlier"} against the wheel speed than in the other runs. Check how the logger stamps the two.`,
      });
    }
    if (notes.length > 0) found.set(id, notes);
  }
  return found;
}
