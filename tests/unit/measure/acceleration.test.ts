import { describe, expect, it } from "vitest";
import {
  crossingUncertaintyS,
  cubicCrossingS,
  gradeAccelerationMps2,
  gradeTimeEffectS,
  INITIAL_MOVEMENT_M,
  kineticPowerW,
  type MotionTrace,
  motionTrace,
  speedCrossingS,
  traceAt,
  trapSpeedMps,
  wayCrossingS,
} from "@/lib/measure/sprint/acceleration";
import { checkValue, checkValues } from "../../support/check-values";
import { expectClose } from "../../support/expect-close";

const trace = (speed: (t: number) => number, toS: number, stepS: number): MotionTrace => {
  const timeS = Float64Array.from({ length: Math.round(toS / stepS) + 1 }, (_, i) => i * stepS);
  return motionTrace(timeS, timeS.map(speed));
};

describe("constant acceleration from rest (closed form, exact lengths by definition of the foot)", () => {
  for (const value of checkValues("acc.const4.")) {
    it(`${value.id} — ${value.source}`, () => {
      const run = trace((t) => value.inputs.a * t, 30, 0.07);
      const at = wayCrossingS(run, value.expected.s_m);
      expectClose(at, value.expected.t_s, value.tolerance);
      expectClose(traceAt(run, at ?? 0, "speedMps"), value.expected.v_ms, value.tolerance);
      expectClose(traceAt(run, at ?? 0, "wayM"), value.expected.s_m, value.tolerance);
      if (value.expected.v_avg_last_66ft !== undefined) {
        expectClose(trapSpeedMps(run, value.expected.s_m), value.expected.v_avg_last_66ft, value.tolerance);
      }
    });
  }
  const rollout = checkValue("acc.rollout");
  it(`${rollout.id} — ${rollout.source}`, () => {
    const run = trace((t) => rollout.inputs.a * t, 16, 0.1);
    const movement = wayCrossingS(run, INITIAL_MOVEMENT_M) ?? Number.NaN;
    const { expected, tolerance } = rollout;
    expectClose(movement, expected.t_rollout, tolerance);
    expectClose(traceAt(run, movement, "speedMps"), expected.v_at_rollout, tolerance);
    const hundred = speedCrossingS(run, 100 / 3.6) ?? Number.NaN;
    expectClose(hundred, expected.t_0_100_from_rest, tolerance);
    expectClose(hundred - movement, expected.t_0_100_from_rollout, tolerance);
    // The second clock runs over the quarter mile from rest, less the time of the first 0.3048 m + 402.336 m convention.
    const quarter = wayCrossingS(run, 402.336 + INITIAL_MOVEMENT_M) ?? Number.NaN;
    expectClose(quarter - movement, expected.quarter_from_rollout_line, tolerance);
  });
});

describe("closed forms of a real launch", () => {
  const power = checkValue("acc.constpower");
  it(`${power.id} — ${power.source}`, () => {
    const { P_W, m_kg } = power.inputs;
    const { expected } = power;
    const run = trace((t) => Math.sqrt((2 * P_W * t) / m_kg), 14, 0.001);
    // v ~ √t has no finite slope at 0, so trapezoids lose 2e-5 of the way; times at speed are not touched by that.
    expectClose(speedCrossingS(run, 100 / 3.6), expected.t_0_100, { rel: 1e-7 });
    const [from, to] = [80, 120].map((kmh) => speedCrossingS(run, kmh / 3.6) ?? Number.NaN);
    expectClose(to - from, expected.t_80_120, { rel: 1e-6 });
    expectClose(traceAt(run, to, "wayM") - traceAt(run, from, "wayM"), expected.s_80_120, { rel: 1e-6 });
    expectClose(traceAt(run, expected.t_0_100, "wayM"), expected.s_0_100, { rel: 5e-5 });
    expectClose(wayCrossingS(run, 402.336), expected.quarter_t, { rel: 1e-5 });
    expectClose(traceAt(run, expected.quarter_t, "speedMps"), expected.quarter_v, { rel: 1e-6 });
    expectClose(kineticPowerW(m_kg, 80 / 3.6, 120 / 3.6, expected.t_80_120), P_W, { rel: 1e-12 });
  });
  const tanh = checkValue("acc.tanh");
  it(`${tanh.id} — ${tanh.source}`, () => {
    const { vt, tau } = tanh.expected;
    const run = trace((t) => vt * Math.tanh(t / tau), 16, 0.005);
    expectClose(wayCrossingS(run, 402.336), tanh.expected.quarter_t, { rel: 1e-7 });
    expectClose(traceAt(run, tanh.expected.quarter_t, "speedMps"), tanh.expected.quarter_v, { rel: 1e-7 });
    expectClose(speedCrossingS(run, 100 / 3.6), tanh.expected.t_0_100, { rel: 1e-7 });
  });
});

describe("crossings", () => {
  const crossing = checkValue("acc.crossing");
  it(`${crossing.id} — ${crossing.source}`, () => {
    const { t, v_kmh, V } = crossing.inputs;
    const run = motionTrace(Float64Array.from(t as number[]), Float64Array.from(v_kmh as number[]));
    expectClose(speedCrossingS(run, V), crossing.expected.linear, crossing.tolerance);
    expectClose(cubicCrossingS(t, v_kmh, V), crossing.expected.cubic, crossing.tolerance);
  });
  it("only a crossing that stays above for 0.2 s counts", () => {
    const timeS = Float64Array.from({ length: 21 }, (_, i) => i / 10);
    const speed = Float64Array.from(timeS, (x) => 10 * x);
    speed[6] = 12;
    const run = motionTrace(timeS, speed);
    expectClose(speedCrossingS(run, 10), 1, { abs: 1e-12 });
    expect(speedCrossingS(run, 30)).toBeNull();
    expect(speedCrossingS(run, 10, 1.5)).toBeNull();
  });
  it("beyond the trace there is no time", () => {
    const run = trace((t) => 4 * t, 5, 0.1);
    expect(wayCrossingS(run, 60)).toBeNull();
    expect(trapSpeedMps(run, 60)).toBeNull();
  });
  it("uncertainty of a crossing is σ/a (0.05 m/s at 3 and 1 m/s²: 17 and 50 ms)", () => {
    expectClose(crossingUncertaintyS(0.05, 3), 0.0167, { abs: 1e-4 });
    expectClose(crossingUncertaintyS(0.05, 1), 0.05, { abs: 1e-12 });
  });
  for (const value of checkValues("acc.slope.")) {
    it(`${value.id} — ${value.source}`, () => {
      const grade = value.inputs.slope_percent / 100;
      expectClose(gradeAccelerationMps2(grade), value.expected.da, value.tolerance);
      const effect = (sign: number) => gradeTimeEffectS(80 / 3.6, 120 / 3.6, 3, sign * grade);
      expectClose(effect(1), value.expected.dt_80_120_at_3ms2_uphill_loss, value.tolerance);
      expectClose(-effect(-1), value.expected.dt_80_120_at_3ms2_downhill_gain, value.tolerance);
    });
  }
  const mean = checkValue("trade.mean_power_roll_on");
  it(`${mean.id} — ${mean.source}`, () => {
    const { mass_kg, from_kmh, to_kmh, time_s } = mean.inputs;
    expectClose(
      kineticPowerW(mass_kg, from_kmh / 3.6, to_kmh / 3.6, time_s) / 1000,
      mean.expected.mean_kw,
      mean.tolerance,
    );
  });
});
