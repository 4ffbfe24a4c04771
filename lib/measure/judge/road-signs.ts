import { fixed } from "@/lib/measure/judge/words";
import { EARTH_RADIUS_M } from "@/lib/measure/road/strip-position";
import type { RunSignals, SampledChannel } from "@/lib/measure/run/run-signals";
import type { CampaignRun, Note, Span } from "@/lib/measure/types";
import { median, robustDeviation } from "@/lib/signal/statistics";
import { RADIAN_DEG, STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** A road climbs less than this between two fixes [common practice, no source]: metres, and a share of the way. */
const ALTITUDE_JUMP_M = 5;
const STEEPEST = 0.2;
/** A car pitches up by a few per cent of its acceleration; outside these the sensor is turned round, scaled or loose. */
const ACCELERATION_SLOPE = [0.7, 1.5] as const;
/** Way by positions against way by speed and time: beyond this, a clock or a unit is off. */
const WAY_LIMIT = 0.03;
const LEAST_WAY_M = 300;
/** Two legs differ visibly from this difference of deceleration on, m/s²: about 2 m/s of wind or 0.15 % of slope each way. */
const LEAST_CONTRAST_MPS2 = 0.03;

/** Sensors of the road that can't be believed in one log: their notes, and the log's signals without them. */
export function believableRoad(signals: RunSignals): { signals: RunSignals; notes: Note[] } {
  const altitude = altitudeFault(signals.altitude);
  const acceleration = accelerationFault(signals);
  return {
    signals: {
      ...signals,
      altitude: altitude ? null : signals.altitude,
      acceleration: acceleration ? null : signals.acceleration,
    },
    notes: [altitude, acceleration].filter((note) => note !== null),
  };
}

function altitudeFault(altitude: SampledChannel | null): Note | null {
  if (!altitude) return null;
  const { times, values } = altitude;
  for (let i = 1; i < times.length; i++) {
    const pause = times[i] - times[i - 1];
    const jump = Math.abs(values[i] - values[i - 1]);
    // 60 m/s: faster than any run here, so that no real climb is taken for a jump.
    if (jump <= ALTITUDE_JUMP_M + STEEPEST * 60 * Math.max(0, pause - 0.2)) continue;
    return {
      code: "altitude_jump",
      consequence: "masked",
      message: `The altitude jumps by ${fixed(jump, 1)} m at ${fixed(times[i], 1)} s; it is left out of the slope. Give the receiver a clear sky and time to settle.`,
    };
  }
  return null;
}

/** Slope of the accelerometer's reading over the change of speed, by least squares on points half a second apart. */
function accelerationFault({ acceleration, speedRows, timeS, rateHz }: RunSignals): Note | null {
  if (!acceleration) return null;
  const half = Math.max(1, Math.round(0.5 * rateHz));
  const x: number[] = [];
  const y: number[] = [];
  let k = 0;
  for (let i = half; i + half < timeS.length; i += half) {
    const rise = (speedRows[i + half] - speedRows[i - half]) / (timeS[i + half] - timeS[i - half]);
    let sum = 0;
    let n = 0;
    while (k < acceleration.times.length && acceleration.times[k] < timeS[i - half]) k++;
    for (let j = k; j < acceleration.times.length && acceleration.times[j] <= timeS[i + half]; j++, n++)
      sum += acceleration.values[j];
    if (n === 0 || speedRows[i] < 3) continue;
    x.push(rise);
    y.push(sum / n);
  }
  const mean = (values: number[]) => values.reduce((sum, v) => sum + v, 0) / values.length;
  const [mx, my] = [mean(x), mean(y)];
  const spread = x.reduce((sum, v) => sum + (v - mx) ** 2, 0);
  // Without a pull and a coast-down in the log there is nothing to compare with.
  if (x.length < 10 || spread / x.length < 0.1) return null;
  const slope = x.reduce((sum, v, i) => sum + (v - mx) * (y[i] - my), 0) / spread;
  if (slope > ACCELERATION_SLOPE[0] && slope < ACCELERATION_SLOPE[1]) return null;
  const why =
    slope < -0.5
      ? "it points the other way"
      : Math.abs(slope * STANDARD_GRAVITY_MPS2 - 1) < 0.3
        ? "it reads in g"
        : "scale or mounting is off";
  return {
    code: "accelerometer_disagrees",
    consequence: "masked",
    message: `The longitudinal acceleration goes ${fixed(slope, 2)} times with the change of road speed: ${why}. It is left out of the slope; correct its sign or unit in a channel key.`,
  };
}

/** Whether the way by GPS positions goes with the way by speed and time; GPS speed where logged, else the finding speed. */
export function clockNotes(signals: RunSignals): Note[] {
  const { latitude, longitude, gps } = signals;
  if (!latitude || !longitude) return [];
  const speed = gps ?? { times: signals.timeS, values: signals.speedRows, rateHz: signals.rateHz };
  let bySpeed = 0;
  let byPosition = 0;
  let last = -1;
  let k = 0;
  for (let i = 0; i < latitude.times.length; i++) {
    const t = latitude.times[i];
    while (k + 1 < longitude.times.length && longitude.times[k] < t - 1e-6) k++;
    if (Math.abs(longitude.times[k] - t) > 0.05 || (last >= 0 && t - latitude.times[last] < 2)) continue;
    if (last >= 0 && t - latitude.times[last] < 4) {
      const way = wayBetween(speed, latitude.times[last], t);
      const north = (latitude.values[i] - latitude.values[last]) / RADIAN_DEG;
      const before = nearest(longitude, latitude.times[last]);
      const east = ((longitude.values[k] - before) / RADIAN_DEG) * Math.cos(latitude.values[i] / RADIAN_DEG);
      const chord = EARTH_RADIUS_M * Math.hypot(north, east);
      if (way > 10 && chord > 1) {
        bySpeed += way;
        byPosition += chord;
      }
    }
    last = i;
  }
  const off = byPosition / bySpeed - 1;
  if (!(bySpeed > LEAST_WAY_M) || Math.abs(off) < WAY_LIMIT) return [];
  return [
    {
      code: "clock_disagrees",
      consequence: "warned",
      message: `The GPS positions lie ${fixed(byPosition, 0)} m apart, ${gps ? "GPS speed" : "wheel speed"} times the log's time makes ${fixed(bySpeed, 0)} m. ${gps ? "The log's clock or the unit of the speed is off" : "The wheel speed's scale or the log's clock is off"}; check the time column's unit and the speed's.`,
    },
  ];
}

function nearest({ times, values }: SampledChannel, t: number): number {
  let k = 0;
  while (k + 1 < times.length && times[k + 1] <= t + 1e-6) k++;
  return values[k];
}

/** Way between two times by the trapezium rule over the samples inside, whose mean speed stands for the whole. */
function wayBetween({ times, values }: SampledChannel, fromS: number, toS: number): number {
  let sum = 0;
  let n = 0;
  for (let i = 0; i < times.length && times[i] <= toS; i++) {
    if (times[i] < fromS || Number.isNaN(values[i])) continue;
    sum += values[i];
    n++;
  }
  return n === 0 ? 0 : (sum / n) * (toS - fromS);
}

/** A coast-down's run as the legs are compared: what it says of wind and slope together. */
interface LegRun {
  run: CampaignRun;
  signals: RunSignals;
  coasts: readonly Span[];
}

/**
 * Runs whose coast-down goes with the other leg: wind and slope slow one leg more than the other, and a run that rolls like
 * those of the leg it was not typed as was likely typed the wrong way. Needs three runs a leg, and legs that differ clearly.
 */
export function legNotes(runs: readonly LegRun[]): Map<string, Note[]> {
  const found = new Map<string, Note[]>();
  const excess = excessDecelerations(runs.filter(({ run }) => run.leg));
  const legs = (["out", "back"] as const).map((leg) => excess.filter((e) => e.leg === leg));
  if (legs.some((list) => list.length < 3)) return found;
  const centres = legs.map((list) => median(list.map((e) => e.value)));
  const contrast = Math.abs(centres[0] - centres[1]);
  const scatter = legs.flatMap((list, k) => list.map((e) => e.value - centres[k]));
  if (contrast < Math.max(LEAST_CONTRAST_MPS2, 4 * robustDeviation(scatter))) return found;
  for (const { id, leg, value } of excess) {
    const own = centres[leg === "out" ? 0 : 1];
    const other = centres[leg === "out" ? 1 : 0];
    if (Math.abs(value - other) > contrast / 4 || Math.abs(value - own) < (3 * contrast) / 4) continue;
    found.set(id, [
      {
        code: "leg_doubtful",
        consequence: "warned",
        message: `Wind and slope act on this coast-down as on those of the leg ${leg === "out" ? "back" : "out"}, typed is ${leg}. Check out and back.`,
      },
    ]);
  }
  return found;
}

/** Mean deceleration of each run's coast-down beyond what all of them share at that speed (c0 + c2 v²), m/s². */
function excessDecelerations(runs: readonly LegRun[]): { id: string; leg: "out" | "back"; value: number }[] {
  const blocks = runs.flatMap(({ signals, coasts }, index) => {
    const out: { index: number; v2: number; d: number }[] = [];
    const width = Math.max(3, Math.round(2 * signals.rateHz));
    for (let i = 0; i + width < signals.timeS.length; i += width) {
      const [from, to] = [signals.timeS[i], signals.timeS[i + width]];
      if (!coasts.some((coast) => from >= coast.from_s && to <= coast.to_s)) continue;
      const [v, w] = [signals.speedRows[i], signals.speedRows[i + width]];
      out.push({ index, v2: ((v + w) / 2) ** 2, d: (v - w) / (to - from) });
    }
    return out;
  });
  const n = blocks.length;
  const sum = (of: (b: (typeof blocks)[number]) => number) => blocks.reduce((total, b) => total + of(b), 0);
  const [mx, my] = [sum((b) => b.v2) / n, sum((b) => b.d) / n];
  const slope = sum((b) => (b.v2 - mx) * (b.d - my)) / sum((b) => (b.v2 - mx) ** 2);
  return runs.flatMap(({ run }, index) => {
    const own = blocks.filter((b) => b.index === index);
    if (own.length < 5 || !run.leg) return [];
    return [{ id: run.id, leg: run.leg, value: median(own.map((b) => b.d - my - slope * (b.v2 - mx))) }];
  });
}
