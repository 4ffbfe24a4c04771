import { describe, expect, it } from "vitest";
import { boostOvershoot, injectorDutyPct, lambdaFromAirFuel } from "@/lib/measure/engine/engine-channels";
import { gradeForceN, roadLoadFromKmh, roadLoadN } from "@/lib/measure/road/road-load";
import type { CampaignVehicle } from "@/lib/measure/types";
import {
  circumferenceAtSpeed,
  crankPowerW,
  drivelineFigures,
  effectiveMassKg,
  engineSpeedRpm,
  readTyreMarking,
  roadSpeedMps,
  rollingCircumference,
  rpmPerMps,
  shaftPowerW,
  shaftTorqueNm,
  wheelPowerW,
} from "@/lib/measure/vehicle/vehicle";
import {
  HORSEPOWER_W,
  METRIC_HORSEPOWER_W,
  POUND_FOOT_NM,
  STANDARD_GRAVITY_MPS2,
} from "@/lib/units/constants";
import { checkValue, checkValues } from "../../support/check-values";
import { expectClose } from "../../support/expect-close";

const HATCH: CampaignVehicle = {
  label: "compact hatch",
  engine: "spark ignition",
  aspiration: "turbo",
  drive: "FWD",
  mass_kg: 1486,
  tyre: "225/40 R18",
  gear_ratios: [3.62, 2.11, 1.44, 1.09, 0.88, 0.73],
  final_drive: 3.75,
  redline_rpm: 6600,
};

describe("units of power and torque", () => {
  const units = checkValue("pow.units");
  it(`${units.id} — ${units.source}`, () => {
    expectClose(HORSEPOWER_W, units.expected.hp_W, units.tolerance);
    expectClose(METRIC_HORSEPOWER_W, units.expected.PS_W, units.tolerance);
    expectClose(POUND_FOOT_NM, units.expected.lbft_Nm, units.tolerance);
    expectClose(METRIC_HORSEPOWER_W / HORSEPOWER_W, units.expected.PS_per_hp, units.tolerance);
  });
  const crossings = checkValue("pow.crossings");
  it(`${crossings.id} — ${crossings.source}`, () => {
    const kgfm = STANDARD_GRAVITY_MPS2;
    for (const [name, powerW, torqueNm] of [
      ["kW_Nm", 1000, 1],
      ["PS_Nm", METRIC_HORSEPOWER_W, 1],
      ["hp_Nm", HORSEPOWER_W, 1],
      ["hp_lbft", HORSEPOWER_W, POUND_FOOT_NM],
      ["PS_lbft", METRIC_HORSEPOWER_W, POUND_FOOT_NM],
      ["PS_kgfm", METRIC_HORSEPOWER_W, kgfm],
    ] as const) {
      const crossing = crossings.expected[name];
      expectClose(shaftPowerW(torqueNm, crossing), powerW, crossings.tolerance);
      expectClose(shaftTorqueNm(powerW, crossing), torqueNm, crossings.tolerance);
    }
  });
  const trade = checkValue("trade.torque_power");
  it(`${trade.id} — ${trade.source}`, () => {
    trade.inputs.torque_nm.forEach((torque: number, i: number) => {
      expectClose(
        shaftPowerW(torque, trade.inputs.rpm[i]) / 1000,
        trade.expected.power_kw[i],
        trade.tolerance,
      );
    });
  });
});

describe("tyre, ratio and engine speed", () => {
  const tyreValue = checkValue("pow.tyre.205_55R16");
  it(`${tyreValue.id} — ${tyreValue.source}`, () => {
    const tyre = readTyreMarking(tyreValue.inputs.marking);
    const { expected, tolerance } = tyreValue;
    expectClose(1000 * (tyre?.outerDiameterM ?? 0), expected.OD_mm, tolerance);
    expectClose(1000 * Math.PI * (tyre?.outerDiameterM ?? 0), expected.pi_OD_mm, tolerance);
    expectClose(1000 * (tyre?.circumferenceM ?? 0), expected.CR_mm, tolerance);
    expectClose((1000 * (tyre?.circumferenceM ?? 0)) / (2 * Math.PI), expected.r_dyn_mm, tolerance);
    expectClose(
      1000 * circumferenceAtSpeed(tyre?.circumferenceM ?? 0, 180 / 3.6),
      expected.CR_180kmh_mm,
      tolerance,
    );
  });
  it.each(["225/40 R18", "225/40R18 92Y", "P225/40 ZR18", "225/40 r 18"])(
    "reads the marking %s",
    (marking) => {
      expectClose(readTyreMarking(marking)?.outerDiameterM, 0.6372, { abs: 1e-12 });
    },
  );
  it.each(["", "big ones", "18 inch", "225-40-18"])("does not guess at %j", (marking) => {
    expect(readTyreMarking(marking)).toBeNull();
  });
  it("a bias tyre has the smaller factor 2.99 (ETRTO)", () => {
    expectClose(readTyreMarking("185/80-14")?.circumferenceM, 2.99 * (2 * 0.185 * 0.8 + 14 * 0.0254), {
      rel: 1e-12,
    });
  });
  const rpm = checkValue("pow.rpm");
  it(`${rpm.id} — ${rpm.source}`, () => {
    const ratio = rpm.inputs.ig * rpm.inputs.if;
    expectClose(
      engineSpeedRpm(rpm.inputs.v_kmh / 3.6, ratio, rpm.inputs.CR_m),
      rpm.expected.rpm,
      rpm.tolerance,
    );
    expectClose(3.6 * roadSpeedMps(6000, ratio, rpm.inputs.CR_m), rpm.expected.v_at_6000, rpm.tolerance);
  });
  const trade = checkValue("trade.speed_at_rpm");
  it(`${trade.id} — ${trade.source}`, () => {
    const { gear, rpm0, speed0_kmh } = trade.inputs;
    const vehicle = { ...HATCH, speed_at_rpm: { gear, rpm: rpm0, speed_kmh: speed0_kmh } };
    trade.inputs.rpm.forEach((n: number, i: number) => {
      expectClose(
        (3.6 * n) / (rpmPerMps(vehicle, gear)?.value ?? 0),
        trade.expected.speed_kmh[i],
        trade.tolerance,
      );
    });
  });
  it("a speed read off wins over the tyre marking and carries over to other gears by the ratio", () => {
    const read = { ...HATCH, speed_at_rpm: { gear: 3, rpm: 3000, speed_kmh: 64.6 } };
    const third = rpmPerMps(read, 3)?.value ?? 0;
    expectClose(third, 3000 / (64.6 / 3.6), { rel: 1e-12 });
    expectClose(rpmPerMps(read, 4)?.value, (third * 1.09) / 1.44, { rel: 1e-12 });
    // By hand: 64.6 km/h = 17.9444 m/s, 50 turns/s of the engine over 1.44 × 3.75 = 9.2593 turns/s of the wheel.
    expectClose(rollingCircumference(read)?.value, 1.938, { abs: 1e-12 });
    expect(rpmPerMps(HATCH, 3)?.source).toBe("tyre marking");
    expect(rpmPerMps({ ...HATCH, tyre: null }, 3)).toBeNull();
    expect(rpmPerMps(read, null)).toBeNull();
  });
});

describe("effective mass and power balance", () => {
  for (const value of checkValues("pow.meff.")) {
    it(`${value.id} — ${value.source}`, () => {
      const { m, Jw_total, Je, ig, r_m } = value.inputs;
      const got = effectiveMassKg(m, Jw_total, Je, ig * value.inputs.if, r_m);
      expectClose(got.totalKg, value.expected.m_eff, value.tolerance);
      expectClose(got.wheelsKg, value.expected.wheel_part, value.tolerance);
      expectClose(got.engineKg, value.expected.engine_part, value.tolerance);
    });
  }
  const balance = checkValue("pow.balance");
  it(`${balance.id} — ${balance.source}`, () => {
    const { m, Jw, Je, ig, r_m, v_kmh, a, f0, f1, f2, grade, eta } = balance.inputs;
    const { expected, tolerance } = balance;
    const v = v_kmh / 3.6;
    const ratio = ig * balance.inputs.if;
    const mass = effectiveMassKg(m, Jw, Je, ratio, r_m);
    const road = roadLoadN(roadLoadFromKmh(f0, f1, f2), v);
    const slope = gradeForceN(m, grade);
    expectClose(road, expected.F_road_N, tolerance);
    expectClose(slope, expected.F_grade_N, tolerance);
    const wheelW = wheelPowerW(m + mass.wheelsKg, a, road + slope, v);
    expectClose(wheelW, expected.P_wheel_W, tolerance);
    const crankW = crankPowerW(wheelW, eta, mass.engineKg, a, v);
    expectClose(crankW, expected.P_crank_W, tolerance);
    const rpm = engineSpeedRpm(v, ratio, 2 * Math.PI * r_m);
    expectClose(rpm, expected.rpm, tolerance);
    expectClose(shaftTorqueNm(crankW, rpm), expected.T_crank_Nm, tolerance);
  });
  it("stated figures win over defaults; defaults say what they are", () => {
    const typed = drivelineFigures(HATCH);
    expect(typed.wheelInertia.source).toContain("no source");
    expect(typed.engineInertia.uncertainty / typed.engineInertia.value).toBeCloseTo(0.35, 12);
    const known = drivelineFigures({
      ...HATCH,
      wheel_inertia_kgm2: 4.3,
      engine_inertia_kgm2: 0.175,
      mesh_efficiency: 0.955,
    });
    expect([known.wheelInertia.value, known.engineInertia.value, known.meshEfficiency.value]).toEqual([
      4.3, 0.175, 0.955,
    ]);
    expect(known.meshEfficiency.source).toBe("vehicle sheet");
  });
});

describe("engine channels (identities)", () => {
  const duty = checkValue("eng.duty");
  it(`${duty.id} — ${duty.source}`, () => {
    expectClose(
      injectorDutyPct(duty.inputs.PW_ms, duty.inputs.rpm),
      duty.expected.duty_percent,
      duty.tolerance,
    );
  });
  const lambda = checkValue("eng.lambda");
  it(`${lambda.id} — ${lambda.source}`, () => {
    expectClose(
      lambdaFromAirFuel(lambda.inputs.AFR, lambda.inputs.AFRst),
      lambda.expected.lambda,
      lambda.tolerance,
    );
  });
  const boost = checkValue("eng.boost");
  it(`${boost.id} — ${boost.source}`, () => {
    const got = boostOvershoot(boost.inputs.peak_gauge_bar, boost.inputs.target_gauge_bar, 1);
    expectClose(got.overshoot, boost.expected.overshoot_bar, boost.tolerance);
    expectClose(got.pctOfGauge, boost.expected.overshoot_percent_of_gauge, boost.tolerance);
    expectClose(got.pctOfAbsolute, boost.expected.overshoot_percent_of_abs_at_1p0bar, boost.tolerance);
  });
});
