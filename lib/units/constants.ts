/**
 * Exact conversion constants. "exact" = true by definition, no rounding: international yard and pound agreement of
 * 1959 (foot, pound, mile), BIPM SI brochure 9th edition (degree, minute, bar as used with the SI, litre),
 * CGPM 1901 (standard gravity), 10th CGPM 1954 (standard atmosphere).
 */

/** Standard gravity, m/s²: 3rd CGPM 1901, exact. */
export const STANDARD_GRAVITY_MPS2 = 9.80665;
/** International foot, m: exact (1959). */
export const FOOT_M = 0.3048;
/** International inch, m: exact (1959). */
export const INCH_M = 0.0254;
/** International mile, m: exact (1959), 5280 ft. */
export const MILE_M = 1609.344;
/** Nautical mile, m: exact (First International Extraordinary Hydrographic Conference 1929). */
const NAUTICAL_MILE_M = 1852;
/** Avoirdupois pound, kg: exact (1959). */
export const POUND_KG = 0.45359237;

/** 1 km/h in m/s: exact, 1000/3600. */
export const KMH_MPS = 1 / 3.6;
/** 1 mile per hour in m/s: exact, 1609.344/3600. */
export const MPH_MPS = MILE_M / 3600;
/** 1 knot in m/s: exact, 1852/3600. */
export const KNOT_MPS = NAUTICAL_MILE_M / 3600;
/** 1 foot per second in m/s: exact. */
export const FPS_MPS = FOOT_M;

/** 1 pound-force in N: exact, lb × standard gravity. */
export const POUND_FORCE_N = POUND_KG * STANDARD_GRAVITY_MPS2;
/** 1 pound-force per square inch in kPa: from exact definitions. */
export const PSI_KPA = POUND_FORCE_N / (INCH_M * INCH_M) / 1000;
/** 1 standard atmosphere in kPa: exact (10th CGPM 1954). */
export const ATMOSPHERE_KPA = 101.325;
/** 1 technical atmosphere (kgf/cm²) in kPa: exact. */
export const TECHNICAL_ATMOSPHERE_KPA = 98.0665;
/** 1 conventional inch of mercury in kPa: NIST SP 811 (2008) appendix B.8, as rounded there. */
export const INHG_KPA = 3.386389;
/** 1 conventional millimetre of mercury in kPa: NIST SP 811 (2008) appendix B.8, as rounded there. */
export const MMHG_KPA = 0.1333224;

/** 1 mechanical horsepower in W: exact, 550 ft·lbf/s. */
export const HORSEPOWER_W = 550 * FOOT_M * POUND_FORCE_N;
/** 1 metric horsepower (PS) in W: exact, 75 kgf·m/s. */
export const METRIC_HORSEPOWER_W = 75 * STANDARD_GRAVITY_MPS2;
/** 1 pound-force foot in N·m: exact. */
export const POUND_FOOT_NM = POUND_FORCE_N * FOOT_M;

/** 0 °C in K: exact. */
export const ZERO_CELSIUS_K = 273.15;
/** 1 revolution per minute in rad/s: exact. */
export const RPM_RADPS = Math.PI / 30;
/** 1 radian in degrees: exact. */
export const RADIAN_DEG = 180 / Math.PI;
