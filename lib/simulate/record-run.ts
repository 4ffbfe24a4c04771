import type { KnownChannel, LogTable } from "@/lib/logs/types";
import type { RandomStream } from "@/lib/signal/random";
import { type RunConditions, type RunTrace, type Sensors, STEP_S } from "@/lib/simulate/types";
import { STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** Records a driven run the way a logger would: rates, lags, noise, steps. */
export function recordRun(
  trace: RunTrace,
  run: RunConditions,
  sensors: Sensors,
  random: RandomStream,
): LogTable {
  const last = trace.t[trace.length - 1];
  const rows = Math.floor(last * sensors.rateHz);
  const timeS = Float64Array.from({ length: rows }, (_, i) => Math.round((1000 * i) / sensors.rateHz) / 1000);
  const at = (series: Float64Array | Uint8Array, t: number) => {
    const x = Math.min(trace.length - 1, Math.max(0, t / STEP_S));
    const i = Math.min(trace.length - 2, Math.floor(x));
    return series[i] + (x - i) * (series[i + 1] - series[i]);
  };
  const stepped = (x: number, step: number) => (step > 0 ? Math.round(x / step) * step : x);
  const channels: LogTable["channels"] = [];
  const add = (channel: KnownChannel, unit: string, value: (t: number, i: number) => number) => {
    channels.push({ channel, column: channel, unitFound: unit, unit, values: timeS.map(value) });
  };
  const kmh = (mps: number, noise: number, step: number) =>
    stepped(mps * 3.6 + noise * random.nextNormal(), step) / 3.6;
  const { wheelNoiseKmh, wheelStepKmh, wheelScale } = sensors;
  if (sensors.undrivenWheel)
    add("wheel_speed_undriven", "m/s", (t) =>
      kmh(wheelScale * at(trace.v, t - 0.012), wheelNoiseKmh, wheelStepKmh),
    );
  if (sensors.drivenWheel)
    add("wheel_speed_driven", "m/s", (t) =>
      kmh(wheelScale * at(trace.v, t - 0.012) * (1 + at(trace.slip, t - 0.012)), wheelNoiseKmh, wheelStepKmh),
    );
  const fixes = new Map<number, { v: number; s: number; h: number }>();
  let drift = 0;
  const fixAt = (t: number) => {
    const k = Math.floor(t * sensors.gpsHz + 1e-9);
    let fix = fixes.get(k);
    if (!fix) {
      const when = k / sensors.gpsHz;
      const keep = Math.exp(-1 / (sensors.gpsHz * 30));
      drift = drift * keep + 0.5 * Math.sqrt(1 - keep * keep) * random.nextNormal();
      const s = at(trace.s, when);
      fix = {
        v: kmh(at(trace.v, when - sensors.gpsLagS), sensors.gpsNoiseKmh, 0.01),
        s,
        h: Math.round((run.heightM(s) + 120 + drift) * 10) / 10,
      };
      fixes.set(k, fix);
    }
    return fix;
  };
  if (sensors.gps) add("gps_speed", "m/s", (t) => fixAt(t).v);
  if (sensors.engineSpeed)
    add("engine_speed", "1/min", (t) => {
      const since = t - sensors.rpmLagS - run.pedalS;
      const shuffle =
        since > 0 ? sensors.shuffleRpm * Math.exp(-since / 0.18) * Math.sin(2 * Math.PI * 4.5 * since) : 0;
      return stepped(
        at(trace.rpm, t - sensors.rpmLagS) + shuffle + sensors.rpmNoise * random.nextNormal(),
        sensors.rpmStep,
      );
    });
  if (sensors.pedal) add("pedal", "%", (t) => at(trace.pedal, t) + 0.1 * random.nextNormal());
  if (sensors.position) {
    const cos = Math.cos((31.2 * Math.PI) / 180);
    add("latitude", "deg", (t) => -31.2 + (fixAt(t).s * 0.3) / 111_195);
    add("longitude", "deg", (t) => -112.4 + (fixAt(t).s * Math.sqrt(1 - 0.09)) / (111_195 * cos));
    add("altitude", "m", (t) => fixAt(t).h);
  }
  if (sensors.accelerometer)
    add("longitudinal_acceleration", "m/s²", (t) => {
      const s = at(trace.s, t);
      const slope = (run.heightM(s + 0.5) - run.heightM(s - 0.5)) * run.direction;
      return 0.05 + 1.089 * at(trace.a, t) + STANDARD_GRAVITY_MPS2 * slope + 0.15 * random.nextNormal();
    });
  return {
    format: "delimited",
    timeS,
    channels,
    encoding: "utf-8",
    delimiter: ",",
    decimal: ".",
    rowsRead: rows,
    rowsRefused: [],
    time: { column: "time", form: "s", from: "0", toS: timeS[rows - 1], rateHz: sensors.rateHz, gaps: [] },
    leftOut: [],
    problems: [],
  };
}
