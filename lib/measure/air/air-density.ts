import { dryPressureKpa, vapourPressureKpa } from "@/lib/measure/air/vapour-pressure";
import { FOOT_M, STANDARD_GRAVITY_MPS2, ZERO_CELSIUS_K } from "@/lib/units/constants";

/** Specific gas constants, J/(kg·K): public code for air data; dry air and water vapour. */
const R_DRY = 287.058;
const R_VAPOUR = 461.495;
/** Molar masses, kg/mol: dry air with 400 µmol/mol carbon dioxide (CIPM-2007), water. */
const MOLAR_AIR = 28.96546e-3;
const MOLAR_VAPOUR = 18.01528e-3;
/** Constants of the standard atmosphere: sea level K, lapse K/m, gas constant J/(kg·K). ISO 2533 (from memory). */
const ISA_SEA_LEVEL_K = 288.15;
const ISA_LAPSE_KPM = 0.0065;
const ISA_R = 287.05287;

/**
 * Density of moist air in kg/m³ as the sum of two ideal gases. `pressurePa` absolute, humidity 0 to 1.
 * Within 0.05 % of CIPM-2007 over the range in which roads are driven.
 */
export function airDensityKgm3(pressurePa: number, tempC: number, relativeHumidity: number): number {
  const tempK = tempC + ZERO_CELSIUS_K;
  const vapourPa = 1000 * vapourPressureKpa(tempC, relativeHumidity);
  const dryPa = 1000 * dryPressureKpa(pressurePa / 1000, tempC, relativeHumidity);
  return dryPa / (R_DRY * tempK) + vapourPa / (R_VAPOUR * tempK);
}

/** Moist air after CIPM-2007. */
export interface CipmAir {
  densityKgm3: number;
  /** Mole fraction of water vapour. */
  vapourFraction: number;
  compressibility: number;
}

/**
 * CIPM-2007 density of moist air (Picard et al., Metrologia 45 (2008) 149, doi 10.1088/0026-1394/45/2/004),
 * 400 µmol/mol carbon dioxide. Stated for 600 to 1100 hPa and 15 to 27 °C. The reference for airDensityKgm3.
 */
export function cipmAir(pressurePa: number, tempC: number, relativeHumidity: number): CipmAir {
  const t = tempC;
  const T = t + ZERO_CELSIUS_K;
  const saturationPa = Math.exp(1.2378847e-5 * T * T - 1.9121316e-2 * T + 33.93711047 - 6.3431645e3 / T);
  const enhancement = 1.00062 + 3.14e-8 * pressurePa + 5.6e-7 * t * t;
  const x = (relativeHumidity * enhancement * saturationPa) / pressurePa;
  const virial =
    1.58123e-6 -
    2.9331e-8 * t +
    1.1043e-10 * t * t +
    (5.707e-6 - 2.051e-8 * t) * x +
    (1.9898e-4 - 2.376e-6 * t) * x * x;
  const perT = pressurePa / T;
  const z = 1 - perT * virial + perT * perT * (1.83e-11 - 0.765e-8 * x * x);
  const densityKgm3 =
    ((pressurePa * MOLAR_AIR) / (z * 8.314472 * T)) * (1 - x * (1 - MOLAR_VAPOUR / MOLAR_AIR));
  return { densityKgm3, vapourFraction: x, compressibility: z };
}

/** International Standard Atmosphere at a geopotential altitude up to 11 km. Source: ISO 2533 constants (from memory). */
export function standardAtmosphere(altitudeM: number): {
  tempK: number;
  pressurePa: number;
  densityKgm3: number;
} {
  const tempK = ISA_SEA_LEVEL_K - ISA_LAPSE_KPM * altitudeM;
  const pressurePa = 101_325 * (tempK / ISA_SEA_LEVEL_K) ** (STANDARD_GRAVITY_MPS2 / (ISA_R * ISA_LAPSE_KPM));
  return { tempK, pressurePa, densityKgm3: pressurePa / (ISA_R * tempK) };
}

/** Altitude in m at which the standard atmosphere has this density. Context only, never a correction. */
export function densityAltitudeM(densityKgm3: number): number {
  const exponent = 1 / (STANDARD_GRAVITY_MPS2 / (ISA_R * ISA_LAPSE_KPM) - 1);
  return (ISA_SEA_LEVEL_K / ISA_LAPSE_KPM) * (1 - (densityKgm3 / 1.225) ** exponent);
}

/**
 * Density altitude in m after the US National Weather Service note (inHg of 33.86389 hPa as it states).
 * Pressure in hPa at the station, dew point in °C. Context only.
 */
export function nwsDensityAltitudeM(
  pressureHpa: number,
  tempC: number,
  dewPoint: number,
): { altitudeM: number; vapourHpa: number; virtualK: number } {
  const vapourHpa = 6.11 * 10 ** ((7.5 * dewPoint) / (237.7 + dewPoint));
  const virtualK = (tempC + ZERO_CELSIUS_K) / (1 - (vapourHpa / pressureHpa) * (1 - 0.622));
  const rankine = 1.8 * (virtualK - ZERO_CELSIUS_K) + 32 + 459.69;
  const feet = 145_366 * (1 - ((17.326 * (pressureHpa / 33.86389)) / rankine) ** 0.235);
  return { altitudeM: feet * FOOT_M, vapourHpa, virtualK };
}
