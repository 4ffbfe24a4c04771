import { describe, expect, it } from "vitest";
import {
  airDensityKgm3,
  cipmAir,
  densityAltitudeM,
  nwsDensityAltitudeM,
  standardAtmosphere,
} from "@/lib/measure/air/air-density";
import {
  airFactor,
  chooseFactor,
  engineFactor,
  frictionFactor,
  fuelQuantityMgPerLCycle,
  weatherFactor,
} from "@/lib/measure/air/atmosphere";
import {
  cfr1065SaturationKpa,
  dewPointC,
  dryPressureKpa,
  if97SaturationKpa,
  saturationVapourKpa,
  VAPOUR_FORMS,
  vapourPressureKpa,
} from "@/lib/measure/air/vapour-pressure";
import type { FactorId } from "@/lib/measure/types";
import { FOOT_M } from "@/lib/units/constants";
import { checkValue, checkValues } from "../../support/check-values";
import { expectClose } from "../../support/expect-close";

const PETROL = { engine: "spark ignition", aspiration: "natural" } as const;
const DIESEL = { engine: "compression ignition", aspiration: "turbo", qc_mg_per_l_cycle: 60 } as const;

describe("saturation vapour pressure", () => {
  for (const value of ["atm.pws.if97.300K", "atm.pws.if97.500K"].map(checkValue)) {
    it(`${value.id} — ${value.source}`, () => {
      expectClose(if97SaturationKpa(value.inputs.T_K) / 1000, value.expected.p_MPa, value.tolerance);
    });
  }
  const triple = checkValue("atm.pws.triple.wexler");
  it(`${triple.id} — ${triple.source}`, () => {
    expectClose(1000 * if97SaturationKpa(triple.inputs.T_K), triple.expected.p_Pa, triple.tolerance);
  });
  const cfr = checkValue("atm.pws.cfr1065");
  it(`${cfr.id} — ${cfr.source}`, () => {
    expectClose(cfr1065SaturationKpa(cfr.inputs.T_K), cfr.expected.p_kPa, cfr.tolerance);
  });
  for (const celsius of [5, 15, 20, 25, 30, 35, 40]) {
    const value = checkValue(`atm.pws.${celsius}C`);
    it(`${value.id}, all forms — ${value.source}`, () => {
      for (const form of VAPOUR_FORMS) {
        expectClose(saturationVapourKpa(value.inputs.t_C, form), value.expected[form], value.tolerance);
      }
    });
  }
  const dew = checkValue("atm.dewpoint");
  it(`${dew.id} — ${dew.source}`, () => {
    expectClose(dewPointC(dew.inputs.t_C, dew.inputs.rh), dew.expected.Td_C, dew.tolerance);
    expectClose(saturationVapourKpa(dewPointC(32, 0.6)), vapourPressureKpa(32, 0.6), { rel: 1e-12 });
  });
});

describe("weather factors", () => {
  const names: [FactorId, string][] = [
    ["j1349_sqrt", "j1349_sqrt"],
    ["j1349_eta85", "j1349_eta85"],
    ["iso1585_si", "iso1585_si"],
    ["din70020", "din70020"],
    ["j607_std", "j607_std"],
    ["ci_na", "fa_ci_na"],
    ["ci_turbo_12", "fa_ci_turbo_1p2"],
    ["ci_turbo_15", "fa_ci_turbo_1p5"],
    ["ci_turbo_liquid", "fa_ci_turbo_liquid_0p7"],
  ];
  for (const value of ["ref", "warm", "mild", "isa", "high", "cold", "hot95"].map((name) =>
    checkValue(`atm.factor.${name}`),
  )) {
    it(`${value.id} — ${value.source}`, () => {
      const { B_kPa, t_C, rh } = value.inputs;
      const dryKpa = dryPressureKpa(B_kPa, t_C, rh);
      expectClose(vapourPressureKpa(t_C, rh), value.expected.pv_kPa, { abs: 1e-9 });
      expectClose(dryKpa, value.expected.pd_kPa, value.tolerance);
      for (const [id, key] of names)
        expectClose(airFactor(id, dryKpa, B_kPa, t_C), value.expected[key], value.tolerance);
      const cfa = airFactor("j1349_sqrt", dryKpa, B_kPa, t_C);
      expectClose(frictionFactor(cfa, 0.85), value.expected.j1349_eta85_exact, value.tolerance);
      const weather = { temp_c: t_C, pressure_hpa: 10 * B_kPa, rh_pct: 100 * rh };
      const flags = value.expected.flags;
      expect(weatherFactor("j1349_eta85", weather, PETROL).in_range).toBe(flags.j1349_eta85_in_0p93_1p07);
      expect(weatherFactor("iso1585_si", weather, PETROL).in_range).toBe(flags.iso1585_si_in_0p93_1p07);
    });
  }
  const friction = checkValue("atm.factor.friction");
  it(`${friction.id} — ${friction.source}`, () => {
    const { CFa, eta_m } = friction.inputs;
    expectClose(frictionFactor(CFa, eta_m), friction.expected.CF_exact, friction.tolerance);
    expectClose(1.18 * CFa - 0.18, friction.expected.CF_rounded_1p18, friction.tolerance);
  });
  for (const value of checkValues("atm.fm.")) {
    it(`${value.id} — ${value.source}`, () => {
      expectClose(
        engineFactor(value.inputs.qc_mg_per_l_cycle, "iso"),
        value.expected.fm_iso,
        value.tolerance,
      );
      expectClose(
        engineFactor(value.inputs.qc_mg_per_l_cycle, "r85"),
        value.expected.fm_r85,
        value.tolerance,
      );
    });
  }
  const alpha = checkValue("atm.alpha_c");
  it(`${alpha.id} — ${alpha.source}`, () => {
    const { F_g_s, D_l, N_rpm, r, B_kPa, t_C, rh } = alpha.inputs;
    const q = fuelQuantityMgPerLCycle(F_g_s, D_l, N_rpm);
    expectClose(q, alpha.expected.q, alpha.tolerance);
    expectClose(q / r, alpha.expected.qc, alpha.tolerance);
    expectClose(engineFactor(q / r), alpha.expected.fm, { rel: 1e-12 });
    const weather = { temp_c: t_C, pressure_hpa: 10 * B_kPa, rh_pct: 100 * rh };
    const vehicle = { ...DIESEL, qc_mg_per_l_cycle: q / r };
    expectClose(
      weatherFactor("ci_turbo_12", weather, vehicle).value,
      alpha.expected.alpha_exp1p2,
      alpha.tolerance,
    );
    expectClose(
      weatherFactor("ci_turbo_15", weather, vehicle).value,
      alpha.expected.alpha_exp1p5,
      alpha.tolerance,
    );
  });

  it("a factor without what it needs has no value and says why", () => {
    const weather = { temp_c: 20, pressure_hpa: 1000, rh_pct: 50 };
    expect(weatherFactor("ci_turbo_15", weather, { ...DIESEL, qc_mg_per_l_cycle: null })).toMatchObject({
      value: null,
      in_range: null,
    });
    expect(weatherFactor("j1349_eta85", null, PETROL).value).toBeNull();
    expect(weatherFactor("din70020", weather, PETROL).in_range).toBeNull();
    expect(weatherFactor("none", weather, PETROL)).toEqual({ value: null, in_range: null, why: null });
  });

  it("a value outside the permitted range is still given, and what lies outside is named", () => {
    const hot = weatherFactor("j1349_eta85", { temp_c: 38, pressure_hpa: 1000, rh_pct: 30 }, PETROL);
    expect(hot.value).toBeGreaterThan(1);
    expect(hot.in_range).toBe(false);
    expect(hot.why).toContain("temperature 38 °C");
  });
});

describe("which factor a vehicle gets (design rule: auto)", () => {
  it.each([
    ["spark ignition", "natural", null, "j1349_eta85"],
    ["spark ignition", "turbo", null, "none"],
    ["spark ignition", "supercharged", null, "none"],
    ["compression ignition", "natural", 50, "ci_na"],
    ["compression ignition", "supercharged", 50, "ci_na"],
    ["compression ignition", "turbo", 50, "ci_turbo_15"],
    ["compression ignition", "turbo", null, "none"],
  ] as const)("%s, %s, qc %s: %s", (engine, aspiration, qc, id) => {
    const chosen = chooseFactor("auto", { engine, aspiration, qc_mg_per_l_cycle: qc });
    expect(chosen.id).toBe(id);
    expect(chosen.why).not.toBe("");
    expect(chooseFactor("none", { engine, aspiration }).id).toBe("none");
    expect(chooseFactor("din70020", { engine, aspiration }).id).toBe("din70020");
  });
});

describe("air density and altitude", () => {
  for (const value of checkValues("atm.rho.")) {
    it(`${value.id} — ${value.source}`, () => {
      const { p_Pa, t_C, rh } = value.inputs;
      const air = cipmAir(p_Pa, t_C, rh);
      expectClose(air.densityKgm3, value.expected.cipm, value.tolerance);
      expectClose(air.vapourFraction, value.expected.xv, { rel: 1e-9, abs: 1e-15 });
      expectClose(air.compressibility, value.expected.Z, value.tolerance);
      expectClose(airDensityKgm3(p_Pa, t_C, rh), value.expected.simple, value.tolerance);
      expectClose(airDensityKgm3(p_Pa, t_C, rh), air.densityKgm3, { rel: 5e-4 });
    });
  }
  for (const value of checkValues("atm.isa.")) {
    it(`${value.id} — ${value.source}`, () => {
      const air = standardAtmosphere(value.inputs.h_m);
      expectClose(air.tempK, value.expected.T_K, value.tolerance);
      expectClose(air.pressurePa, value.expected.p_Pa, value.tolerance);
      expectClose(air.densityKgm3, value.expected.rho, value.tolerance);
    });
  }
  for (const value of ["atm.da.98500", "atm.da.85000"].map(checkValue)) {
    it(`${value.id} — ${value.source}`, () => {
      const { p_Pa, t_C, rh } = value.inputs;
      const altitudeM = densityAltitudeM(airDensityKgm3(p_Pa, t_C, rh));
      expectClose(altitudeM, value.expected.DA_m, value.tolerance);
      expectClose(altitudeM / FOOT_M, value.expected.DA_ft, value.tolerance);
    });
  }
  const nws = checkValue("atm.da.noaa");
  it(`${nws.id} — ${nws.source}`, () => {
    const got = nwsDensityAltitudeM(nws.inputs.P_hPa, nws.inputs.T_C, nws.inputs.Td_C);
    expectClose(got.vapourHpa, nws.expected.e_hPa, nws.tolerance);
    expectClose(got.virtualK, nws.expected.Tv_K, nws.tolerance);
    expectClose(got.altitudeM / FOOT_M, nws.expected.h_ft, nws.tolerance);
  });
});
