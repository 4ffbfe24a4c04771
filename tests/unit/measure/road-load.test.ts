import { describe, expect, it } from "vitest";
import {
  apparentAir,
  averageCoastPairs,
  coastTimeS,
  correctRoadLoad,
  defaultRotatingMassKg,
  gradeForceN,
  heavyEffectiveMassKg,
  intervalForceN,
  type RoadLoad,
  roadLoadFromKmh,
  roadLoadFromUs,
  roadLoadInWind,
  roadLoadN,
  twoWayWindResidualN,
} from "@/lib/measure/road/road-load";
import {
  countingStepMps,
  driveSlip,
  powerDeviationW,
  slopeDeviation,
  stepDeviationMps,
} from "@/lib/measure/speed/speed-sensor";
import { savitzkyGolayWeights } from "@/lib/signal/savitzky-golay";
import { HORSEPOWER_W, MPH_MPS, POUND_FORCE_N, POUND_KG, RADIAN_DEG } from "@/lib/units/constants";
import { checkValue, checkValues } from "../../support/check-values";
import { expectClose } from "../../support/expect-close";

describe("coast-down integral against published target times", () => {
  for (const value of checkValues("road.cfr86529.")) {
    it(`${value.id} — ${value.source}`, () => {
      const { m_kg, A_N, C_N_per_kmh2, v1, v2 } = value.inputs;
      const load = roadLoadFromKmh(A_N, 0, C_N_per_kmh2);
      const timeS = coastTimeS(load, m_kg, v1 / 3.6, v2 / 3.6);
      expectClose(roadLoadN(load, 65 / 3.6), value.expected.F65_N_published, {
        abs: value.tolerance.F65_abs,
      });
      expectClose(timeS, value.expected.t_s_published, { rel: value.tolerance.t_published_rel });
      expectClose(timeS, value.expected.t_s_exact_integral, { rel: value.tolerance.t_exact_rel });
    });
  }
  const times = checkValue("road.coast.times");
  it(`${times.id} — ${times.source}`, () => {
    const load = roadLoadFromKmh(times.inputs.f0, times.inputs.f1, times.inputs.f2);
    for (const [span, expected] of Object.entries(times.expected.t_s as Record<string, number>)) {
      const [from, to] = span.split("-").map((kmh) => Number(kmh) / 3.6);
      expectClose(coastTimeS(load, times.inputs.m_e_kg, from, to), expected, times.tolerance);
    }
    const t = coastTimeS(load, times.inputs.m_e_kg, 100 / 3.6, 90 / 3.6);
    expectClose(
      intervalForceN(times.inputs.m_e_kg, 10 / 3.6, t),
      times.expected.F_interval_100_90_N,
      times.tolerance,
    );
    expectClose(roadLoadN(load, 95 / 3.6), times.expected.F_mid_95_N, times.tolerance);
  });

  /** Composite Simpson rule: an integrator that shares nothing with the closed forms. */
  const simpson = (load: RoadLoad, massKg: number, from: number, to: number) => {
    const n = 2000;
    const h = (from - to) / n;
    let sum = 0;
    for (let i = 0; i <= n; i++)
      sum += (i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2) / roadLoadN(load, to + i * h);
    return (massKg * h * sum) / 3;
  };
  it.each([
    ["arctangent", { f0N: 120, f1NPerMps: 2.16, f2NPerMps2: 0.43 }],
    ["logarithm", { f0N: 60, f1NPerMps: 14, f2NPerMps2: 0.3 }],
    ["double root", { f0N: 100, f1NPerMps: 20, f2NPerMps2: 1 }],
    ["no square term", { f0N: 120, f1NPerMps: 5, f2NPerMps2: 0 }],
    ["constant force", { f0N: 300, f1NPerMps: 0, f2NPerMps2: 0 }],
    ["falling, then rising", { f0N: 200, f1NPerMps: -3, f2NPerMps2: 0.5 }],
  ])("every closed form equals numerical integration: %s", (_, load) => {
    expectClose(coastTimeS(load, 1500, 33, 8), simpson(load, 1500, 33, 8), { rel: 1e-9 });
  });
  it("a force that is not positive all the way gives no time", () => {
    expect(coastTimeS({ f0N: -200, f1NPerMps: 0, f2NPerMps2: 0.4 }, 1500, 30, 10)).toBeNaN();
    expect(coastTimeS({ f0N: 10, f1NPerMps: -3, f2NPerMps2: 0.2 }, 1500, 30, 2)).toBeNaN();
  });
});

describe("averaging and correction", () => {
  const harmonic = checkValue("road.harmonic");
  it(`${harmonic.id} — ${harmonic.source}`, () => {
    const got = averageCoastPairs(harmonic.inputs.forward_s, harmonic.inputs.reverse_s, harmonic.inputs.h);
    const { expected, tolerance } = harmonic;
    got.pairsS.forEach((t, i) => {
      expectClose(t, expected.pair_s[i], tolerance);
    });
    expectClose(got.outS, expected.ta, tolerance);
    expectClose(got.backS, expected.tb, tolerance);
    expectClose(got.timeS, expected.dt, tolerance);
    expectClose(got.deviationS, expected.sd, tolerance);
    expectClose(got.accuracy, expected.p, tolerance);
    expectClose(intervalForceN(1545.75, 10 / 3.6, got.timeS), expected["F_N_100_90_me_1545.75"], tolerance);
    const all = [...harmonic.inputs.forward_s, ...harmonic.inputs.reverse_s];
    expectClose(
      all.reduce((a: number, b: number) => a + b) / all.length,
      expected.arithmetic_mean_all,
      tolerance,
    );
  });
  const correction = checkValue("road.gtr15.correction");
  it(`${correction.id} — ${correction.source}`, () => {
    const { f0, f1, f2, T_C, P_kPa, vw_m_s, TM, m_av } = correction.inputs;
    const got = correctRoadLoad(roadLoadFromKmh(f0, f1, f2), {
      tempC: T_C,
      pressureKpa: P_kPa,
      windMps: vw_m_s,
      referenceMassKg: TM,
      drivenMassKg: m_av,
    });
    const { expected, tolerance } = correction;
    expectClose(got.f0N, expected.f0_star, tolerance);
    expectClose(got.f1NPerMps / 3.6, expected.f1_star, tolerance);
    expectClose(got.f2NPerMps2 / 12.96, expected.f2_star, tolerance);
    expectClose(roadLoadN(got, 80 / 3.6), expected.F_star_80, tolerance);
  });
  const rotating = checkValue("road.gtr15.mr");
  it(`${rotating.id} — ${rotating.source}`, () => {
    expectClose(defaultRotatingMassKg(rotating.inputs.MRO_kg), rotating.expected.m_r_kg, rotating.tolerance);
  });
  const heavy = checkValue("road.cfr1037528.me");
  it(`${heavy.id} — ${heavy.source}`, () => {
    const got = heavyEffectiveMassKg(heavy.inputs.M_kg, heavy.inputs.tyres);
    expectClose(got, heavy.expected.Me_kg_published, heavy.tolerance);
    expectClose(got, heavy.expected.exact, { rel: 1e-12 });
  });
});

describe("wind and slope", () => {
  const air = checkValue("road.cfr1037528.vair");
  const yaw = checkValue("road.cfr1037528.yaw");
  it(`${air.id}, ${yaw.id} — ${air.source}`, () => {
    const { w_mph, v_mph, phi_w_deg } = air.inputs;
    const got = apparentAir(w_mph * MPH_MPS, v_mph * MPH_MPS, phi_w_deg / RADIAN_DEG);
    expectClose(got.speedMps / MPH_MPS, air.expected.v_air_mph_published, air.tolerance);
    expectClose(got.speedMps / MPH_MPS, air.expected.v_air_exact, { rel: 1e-12 });
    expectClose(got.yawRad * RADIAN_DEG, yaw.expected.yaw_deg_published, yaw.tolerance);
    expectClose(got.yawRad * RADIAN_DEG, yaw.expected.exact, { rel: 1e-12 });
  });
  for (const value of ["wind.1", "wind.2", "wind.3", "wind.5"].map(checkValue)) {
    it(`${value.id} — ${value.source}`, () => {
      const { k, v_kmh, w_ms } = value.inputs;
      const v = v_kmh / 3.6;
      const drag: RoadLoad = { f0N: 0, f1NPerMps: 0, f2NPerMps2: k };
      const [head, tail] = [w_ms, -w_ms].map((wind) => roadLoadN(roadLoadInWind(drag, wind), v));
      const { expected, tolerance } = value;
      expectClose(head, expected.F_head, tolerance);
      expectClose(tail, expected.F_tail, tolerance);
      expectClose((head + tail) / 2, expected.mean, tolerance);
      expectClose(twoWayWindResidualN(k, w_ms), expected.residual_N, tolerance);
      expectClose(twoWayWindResidualN(k, w_ms) * v, expected.residual_W, tolerance);
      expectClose((head - roadLoadN(drag, v)) * v, expected.one_way_error_W, tolerance);
    });
  }
  for (const value of checkValues("wind.coast.")) {
    it(`${value.id} — ${value.source}`, () => {
      const { m_e, f0_N, f1_N_per_ms, k, w_ms, grade, m } = value.inputs;
      const load: RoadLoad = { f0N: f0_N, f1NPerMps: f1_N_per_ms, f2NPerMps2: k };
      const coast = (sign: number) => {
        const inWind = roadLoadInWind(load, sign * w_ms);
        // The record takes the slope force as m g i, which is 1.2e-5 above m g sin(atan i) at 0.5 %.
        const slopeN = gradeForceN(m, grade) * Math.sqrt(1 + grade * grade);
        return coastTimeS({ ...inWind, f0N: inWind.f0N + sign * slopeN }, m_e, 100 / 3.6, 90 / 3.6);
      };
      const { expected, tolerance } = value;
      expectClose(coast(1), expected.t_against, tolerance);
      expectClose(coast(-1), expected.t_with, tolerance);
      expectClose(averageCoastPairs([coast(1)], [coast(-1)], 1).timeS, expected.harmonic, tolerance);
      expectClose((coast(1) + coast(-1)) / 2, expected.arithmetic, tolerance);
      expectClose(coastTimeS(load, m_e, 100 / 3.6, 90 / 3.6), expected.true, tolerance);
    });
  }
  for (const value of checkValues("grade.")) {
    it(`${value.id} — ${value.source}`, () => {
      const force = gradeForceN(value.inputs.m, value.inputs.grade);
      expectClose(force, value.expected.F_N, value.tolerance);
      expectClose((force * value.inputs.v_kmh) / 3.6, value.expected.P_W, value.tolerance);
    });
  }
});

describe("speed sensors", () => {
  for (const value of checkValues("quant.count.")) {
    it(`${value.id} — ${value.source}`, () => {
      expectClose(
        countingStepMps(value.inputs.CR, value.inputs.N, value.inputs.Tg),
        value.expected.dv,
        value.tolerance,
      );
    });
  }
  for (const value of checkValues("quant.lsb.")) {
    it(`${value.id} — ${value.source}`, () => {
      const deviation = stepDeviationMps(value.inputs.lsb_kmh);
      expectClose(deviation, value.expected.rms_ms, value.tolerance);
      expectClose(slopeDeviation(deviation, 0.01, 9), value.expected.sd_a_9, value.tolerance);
      expectClose(slopeDeviation(deviation, 0.01, 41), value.expected.sd_a_41, value.tolerance);
    });
  }
  it("the noise gain of a slope is that of the Savitzky-Golay weights (sum of squares)", () => {
    for (const n of [5, 9, 21]) {
      const sumOfSquares = savitzkyGolayWeights(n, 2, 1).reduce((sum, w) => sum + w * w, 0);
      expectClose(slopeDeviation(1, 1, n), Math.sqrt(sumOfSquares), { rel: 1e-10 });
    }
  });
  const noise = checkValue("noise.power");
  it(`${noise.id} — ${noise.source}`, () => {
    const { m, v, sigma_v, dt, N } = noise.inputs;
    expectClose(
      powerDeviationW(m, v, slopeDeviation(sigma_v, dt, N)),
      noise.expected.sd_P_W,
      noise.tolerance,
    );
  });
  const slip = checkValue("slip.ratio");
  it(`${slip.id} — ${slip.source}`, () => {
    expectClose(driveSlip(slip.inputs.wheel_ms, slip.inputs.v_ms), slip.expected.slip, slip.tolerance);
  });
});

describe("published US coefficients", () => {
  const units = checkValue("road.epa.units");
  it(`${units.id} — ${units.source}`, () => {
    const one = roadLoadFromUs(1, 1, 1);
    const { expected, tolerance } = units;
    expectClose(one.f0N, expected.A_lbf_to_N, tolerance);
    expectClose(one.f1NPerMps, expected.B_to_N_per_ms, tolerance);
    expectClose(one.f1NPerMps / 3.6, expected.B_to_N_per_kmh, tolerance);
    expectClose(one.f2NPerMps2, expected.C_to_N_per_ms2, tolerance);
    expectClose(one.f2NPerMps2 / 12.96, expected.C_to_N_per_kmh2, tolerance);
  });
  for (const value of ["road.epa.sports_coupe_v12", "road.epa.suv_4x4"].map(checkValue)) {
    it(`${value.id} — ${value.source}`, () => {
      const load = roadLoadFromUs(value.inputs.A, value.inputs.B, value.inputs.C);
      const force = roadLoadN(load, 50 * MPH_MPS);
      const rest = { rel: value.tolerance.rest_rel };
      expectClose((force * 50 * MPH_MPS) / HORSEPOWER_W, value.expected.TRLHP_published, {
        abs: value.tolerance.TRLHP_published_abs,
      });
      expectClose((force * 50 * MPH_MPS) / HORSEPOWER_W, value.expected.TRLHP, rest);
      expectClose(force / POUND_FORCE_N, value.expected.F50_lbf, rest);
      expectClose(load.f0N, value.expected.f0_N, rest);
      expectClose(load.f1NPerMps / 3.6, value.expected.f1_N_kmh, rest);
      expectClose(load.f2NPerMps2 / 12.96, value.expected.f2_N_kmh2, rest);
      expectClose(value.inputs.ETW_lb * POUND_KG, value.expected.ETW_kg, rest);
    });
  }
});
