import { ZERO_CELSIUS_K } from "@/lib/units/constants";

/** Forms of the saturation vapour pressure over water; the id is stored with every corrected figure. */
export const VAPOUR_FORMS = ["magnus", "buck81", "buck96", "if97", "cfr1065"] as const;
export type VapourForm = (typeof VAPOUR_FORMS)[number];

/** IAPWS R7-97 (IF97), region 4, table 34: n1 to n10 (from memory, checked with its three verification values). */
const IF97 = [
  0.11670521452767e4, -0.72421316703206e6, -0.17073846940092e2, 0.1202082470247e5, -0.32325550322333e7,
  0.1491510861353e2, -0.48232657361591e4, 0.40511340542057e6, -0.23855557567849, 0.65017534844798e3,
];

/** IAPWS-IF97 region 4: saturation pressure in kPa at 273.15 to 647.096 K. Source: IAPWS R7-97(2012), eq. 30. */
export function if97SaturationKpa(tempK: number): number {
  const [n1, n2, n3, n4, n5, n6, n7, n8, n9, n10] = IF97;
  const theta = tempK + n9 / (tempK - n10);
  const a = theta * theta + n1 * theta + n2;
  const b = n3 * theta * theta + n4 * theta + n5;
  const c = n6 * theta * theta + n7 * theta + n8;
  return 1000 * ((2 * c) / (-b + Math.sqrt(b * b - 4 * a * c))) ** 4;
}

/** 40 CFR 1065.645, equation 1065.645-1: saturation pressure in kPa over water at 0 to 100 °C, temperature in K. */
export function cfr1065SaturationKpa(tempK: number): number {
  const ratio = 273.16 / tempK;
  const log10 =
    10.79574 * (1 - ratio) -
    5.028 * Math.log10(1 / ratio) +
    1.50475e-4 * (1 - 10 ** (-8.2969 * (1 / ratio - 1))) +
    0.42873e-3 * (10 ** (4.76955 * (1 - ratio)) - 1) -
    0.2138602;
  return 10 ** log10;
}

/**
 * Saturation vapour pressure over water in kPa at `tempC` (°C).
 * magnus: WMO-No. 8 (CIMO guide) coefficients, -45 to 60 °C (from memory); buck81: Buck, J. Appl. Met. 20 (1981);
 * buck96: Buck's 1996 revision (both from memory); if97, cfr1065: see above. Worst spread 5 to 40 °C: 0.3 %.
 */
export function saturationVapourKpa(tempC: number, form: VapourForm = "magnus"): number {
  switch (form) {
    case "magnus":
      return 0.6112 * Math.exp((17.62 * tempC) / (243.12 + tempC));
    case "buck81":
      return 0.61121 * Math.exp((17.502 * tempC) / (240.97 + tempC));
    case "buck96":
      return 0.61121 * Math.exp((18.678 - tempC / 234.5) * (tempC / (257.14 + tempC)));
    case "if97":
      return if97SaturationKpa(tempC + ZERO_CELSIUS_K);
    case "cfr1065":
      return cfr1065SaturationKpa(tempC + ZERO_CELSIUS_K);
  }
}

/** Vapour pressure in kPa at a relative humidity of 0 to 1. */
export function vapourPressureKpa(
  tempC: number,
  relativeHumidity: number,
  form: VapourForm = "magnus",
): number {
  return relativeHumidity * saturationVapourKpa(tempC, form);
}

/** Dry pressure in kPa: station pressure less vapour pressure. `pressureKpa` is absolute, at the car, never sea-level reduced. */
export function dryPressureKpa(
  pressureKpa: number,
  tempC: number,
  relativeHumidity: number,
  form: VapourForm = "magnus",
): number {
  return pressureKpa - vapourPressureKpa(tempC, relativeHumidity, form);
}

/** Dew point in °C from temperature and relative humidity (0 to 1, exclusive of 0), the Magnus form solved for temperature. */
export function dewPointC(tempC: number, relativeHumidity: number): number {
  const gamma = Math.log(relativeHumidity) + (17.62 * tempC) / (243.12 + tempC);
  return (243.12 * gamma) / (17.62 - gamma);
}
