import { dryPressureKpa } from "@/lib/measure/air/vapour-pressure";
import type { CampaignVehicle, FactorChoice, FactorId, RunWeather } from "@/lib/measure/types";
import { INHG_KPA } from "@/lib/units/constants";

/** What decides which factor fits a vehicle. */
export type FactorVehicle = Pick<CampaignVehicle, "engine" | "aspiration" | "qc_mg_per_l_cycle">;

/** Version of the formulas below; stored with every corrected figure. */
export const FACTOR_VERSION = "1";

/** A factor's formula in words, its source mark and the range in which it may be used. */
export interface FactorRule {
  formula: string;
  source: string;
  /** null: the text states no range. */
  range: { factor: [number, number]; tempC: [number, number]; dryKpa: [number, number] } | null;
}

const SPARK_RANGE = { factor: [0.93, 1.07], tempC: [15, 35] } as const;
const DIESEL_RANGE = { factor: [0.9, 1.1], tempC: [10, 40], dryKpa: [80, 110] } as const;
const spark = (dryKpa: [number, number]): FactorRule["range"] => ({
  factor: [...SPARK_RANGE.factor],
  tempC: [...SPARK_RANGE.tempC],
  dryKpa,
});
const diesel = (): FactorRule["range"] => ({
  factor: [...DIESEL_RANGE.factor],
  tempC: [...DIESEL_RANGE.tempC],
  dryKpa: [...DIESEL_RANGE.dryKpa],
});

/** All factors. "As commonly published" = the paid text was not read; the product claims no conformity with it. */
export const FACTOR_RULES: Readonly<Record<FactorId, FactorRule>> = {
  j1349_eta85: {
    formula: "1.18 CFa − 0.18, CFa = (99 kPa/pd) ((t+273)/298)^0.5, mechanical efficiency 0.85 assumed",
    source: "J1349-style, formula as commonly published; range from memory",
    range: spark([90, 105]),
  },
  j1349_sqrt: {
    formula: "CFa = (99 kPa/pd) ((t+273)/298)^0.5",
    source: "older forms without a friction term, as commonly published; range from memory",
    range: spark([90, 105]),
  },
  iso1585_si: {
    formula: "(99 kPa/pd)^1.2 ((t+273)/298)^0.6",
    source: "ISO 1585 / UN R85 spark-ignition form, exponents as commonly published; range from memory",
    range: spark([80, 110]),
  },
  din70020: {
    formula: "(1013 hPa/p total) ((t+273)/293)^0.5",
    source: "DIN 70020, older car rating, as commonly published; no range stated",
    range: null,
  },
  j607_std: {
    formula: "(29.92 inHg/pd) ((460+tF)/520)^0.5",
    source: "J607 'STD', from memory; no range stated",
    range: null,
  },
  ci_na: {
    formula: "fa^fm, fa = (99 kPa/pd) ((t+273)/298)^0.7",
    source: "compression ignition, natural or mechanically charged, ISO limb of fm; exponents from memory",
    range: diesel(),
  },
  ci_turbo_12: {
    formula: "fa^fm, fa = (99 kPa/pd)^0.7 ((t+273)/298)^1.2",
    source: "compression ignition, turbo, exponent of the J1349 / ISO 1585 family (texts differ: 1.2 or 1.5)",
    range: diesel(),
  },
  ci_turbo_15: {
    formula: "fa^fm, fa = (99 kPa/pd)^0.7 ((t+273)/298)^1.5",
    source: "compression ignition, turbo, exponent of the UN R85 / R24 family (texts differ: 1.2 or 1.5)",
    range: diesel(),
  },
  ci_turbo_liquid: {
    formula: "fa^fm, fa = (99 kPa/pd)^0.7 ((t+273)/298)^0.7",
    source: "compression ignition, turbo with charge air to liquid cooler; exponent from memory",
    range: diesel(),
  },
};

/** Exponents of (99/pd) and (T/298) in the air factor fa of compression ignition engines. */
const DIESEL_EXPONENTS: Readonly<Partial<Record<FactorId, [number, number]>>> = {
  ci_na: [1, 0.7],
  ci_turbo_12: [0.7, 1.2],
  ci_turbo_15: [0.7, 1.5],
  ci_turbo_liquid: [0.7, 0.7],
};

/**
 * Spark-ignition factor, or the air factor fa of a compression ignition engine before its exponent fm.
 * `dryKpa` dry and `totalKpa` station pressure, `tempC` in °C. The power standards use t + 273, not + 273.15.
 */
export function airFactor(id: FactorId, dryKpa: number, totalKpa: number, tempC: number): number {
  const pressure = 99 / dryKpa;
  const temperature = (tempC + 273) / 298;
  const exponents = DIESEL_EXPONENTS[id];
  if (exponents) return pressure ** exponents[0] * temperature ** exponents[1];
  switch (id) {
    case "j1349_eta85":
      return 1.18 * pressure * Math.sqrt(temperature) - 0.18;
    case "iso1585_si":
      return pressure ** 1.2 * temperature ** 0.6;
    case "din70020":
      return (101.3 / totalKpa) * Math.sqrt((tempC + 273) / 293);
    case "j607_std":
      return ((29.92 * INHG_KPA) / dryKpa) * Math.sqrt((460 + 1.8 * tempC + 32) / 520);
    default:
      return pressure * Math.sqrt(temperature);
  }
}

/** Friction form (CFa − (1 − ηm))/ηm; with ηm 0.85 it is published rounded as 1.18 CFa − 0.18. */
export function frictionFactor(cfa: number, mechanicalEfficiency: number): number {
  return (cfa - (1 - mechanicalEfficiency)) / mechanicalEfficiency;
}

/**
 * Engine factor fm from the corrected fuel quantity qc = q/r in mg/(l·cycle): 0.036 qc − 1.14 between the limits.
 * `iso`: 37.2 to 65, else 0.2 / 1.2; `r85` (UN R85 Annex 5, 5.4.2.2): 40 to 65, else 0.3 / 1.2.
 */
export function engineFactor(qcMgPerLCycle: number, limb: "iso" | "r85" = "iso"): number {
  if (qcMgPerLCycle > 65) return 1.2;
  if (qcMgPerLCycle < (limb === "iso" ? 37.2 : 40)) return limb === "iso" ? 0.2 : 0.3;
  return 0.036 * qcMgPerLCycle - 1.14;
}

/** Fuel quantity q in mg/(l·cycle) of a four-stroke engine: fuel g/s, displacement l, engine speed 1/min. */
export function fuelQuantityMgPerLCycle(fuelGramPerS: number, displacementL: number, rpm: number): number {
  return (120_000 * fuelGramPerS) / (displacementL * rpm);
}

/** Which factor a choice means for a vehicle, and why. */
export function chooseFactor(
  choice: FactorChoice,
  vehicle: FactorVehicle,
): { id: FactorId | "none"; why: string } {
  if (choice === "none") return { id: "none", why: "No weather factor was asked for." };
  if (choice !== "auto")
    return { id: choice, why: `The factor was chosen by name: ${FACTOR_RULES[choice].formula}.` };
  if (vehicle.engine === "spark ignition") {
    if (vehicle.aspiration === "natural") {
      return {
        id: "j1349_eta85",
        why: "Naturally aspirated spark ignition: J1349-style correction, mechanical efficiency 0.85 assumed.",
      };
    }
    return {
      id: "none",
      why: "Boosted spark ignition: its control holds the manifold pressure and makes up for the weather, so a factor would over-correct.",
    };
  }
  if (vehicle.qc_mg_per_l_cycle == null) {
    return {
      id: "none",
      why: "Compression ignition without a known fuel quantity: the exponent of the factor is not known.",
    };
  }
  return vehicle.aspiration === "turbo"
    ? { id: "ci_turbo_15", why: "Turbocharged compression ignition with a known fuel quantity." }
    : { id: "ci_na", why: "Compression ignition without a turbocharger, with a known fuel quantity." };
}

/** Value of a factor in one weather; `in_range` null where the text states no range or there is no value. */
export interface WeatherFactor {
  value: number | null;
  in_range: boolean | null;
  /** Why there is no value, or what lies outside the permitted range; null when there is nothing to say. */
  why: string | null;
}

/**
 * Computes a factor (P corrected = factor × P observed, the same on torque) for the weather at the car.
 * Pressure is the absolute station pressure. Outside the permitted range the value is still given and told.
 */
export function weatherFactor(
  id: FactorId | "none",
  weather: RunWeather | null | undefined,
  vehicle: FactorVehicle,
): WeatherFactor {
  if (id === "none") return { value: null, in_range: null, why: null };
  if (!weather)
    return {
      value: null,
      in_range: null,
      why: "The weather of this run is not known, so no factor can be had.",
    };
  const totalKpa = weather.pressure_hpa / 10;
  const dryKpa = dryPressureKpa(totalKpa, weather.temp_c, weather.rh_pct / 100);
  let value = airFactor(id, dryKpa, totalKpa, weather.temp_c);
  if (DIESEL_EXPONENTS[id]) {
    if (vehicle.qc_mg_per_l_cycle == null) {
      return {
        value: null,
        in_range: null,
        why: "The corrected fuel quantity (qc) is not known, so the exponent fm can't be had.",
      };
    }
    value **= engineFactor(vehicle.qc_mg_per_l_cycle);
  }
  const { range } = FACTOR_RULES[id];
  if (range === null) return { value, in_range: null, why: "The formula states no permitted range." };
  const outside: string[] = [];
  const check = (name: string, x: number, [low, high]: [number, number], unit: string) => {
    if (x < low || x > high)
      outside.push(`${name} ${Number(x.toFixed(3))}${unit} (permitted ${low} to ${high})`);
  };
  check("factor", value, range.factor, "");
  check("temperature", weather.temp_c, range.tempC, " °C");
  check("dry pressure", dryKpa, range.dryKpa, " kPa");
  return {
    value,
    in_range: outside.length === 0,
    why: outside.length === 0 ? null : `Outside the permitted range: ${outside.join(", ")}.`,
  };
}
