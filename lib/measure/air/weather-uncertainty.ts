import { airDensityKgm3 } from "@/lib/measure/air/air-density";
import { type FactorVehicle, weatherFactor } from "@/lib/measure/air/atmosphere";
import type { FactorId, RunWeather } from "@/lib/measure/types";

/**
 * Limits of error of the typed readings. Temperature and pressure: instruments of SAE J1263 as quoted publicly; relative
 * humidity: common practice, no source. Taken as evenly likely within, so the standard uncertainty is the limit over √3
 * (JCGM 100:2008, 4.3.7).
 */
export const READING_LIMITS = { tempC: 1, pressureHpa: 7, humidityPct: 5 } as const;
/** Density when nobody read the weather: 5 K or 15 hPa over a day [common practice, no source]. */
const UNREAD_DENSITY = 0.017;

const STANDARD: Readonly<Record<keyof RunWeather, number>> = {
  temp_c: READING_LIMITS.tempC / Math.sqrt(3),
  pressure_hpa: READING_LIMITS.pressureHpa / Math.sqrt(3),
  rh_pct: READING_LIMITS.humidityPct / Math.sqrt(3),
};

/** Relative standard uncertainty of the air density from those of the readings. */
export function densityUncertainty(weather: RunWeather | null | undefined): number {
  if (!weather) return UNREAD_DENSITY;
  return spread(weather, ({ temp_c, pressure_hpa, rh_pct }) =>
    airDensityKgm3(100 * pressure_hpa, temp_c, rh_pct / 100),
  );
}

/**
 * Relative standard uncertainty of a weather factor from those of the readings; vapour goes through the humidity. It says how
 * well the formula's value is known, not how well the formula describes this engine. 0 where there is no factor.
 */
export function factorUncertainty(
  id: FactorId | "none",
  weather: RunWeather | null | undefined,
  vehicle: FactorVehicle,
): number {
  if (id === "none" || !weather) return 0;
  return spread(weather, (reading) => weatherFactor(id, reading, vehicle).value ?? 1);
}

/** Root sum of squares of the relative changes of `quantity` by one standard uncertainty of each reading (central differences). */
function spread(weather: RunWeather, quantity: (reading: RunWeather) => number): number {
  const changes = (["temp_c", "pressure_hpa", "rh_pct"] as const).map((name) => {
    const step = STANDARD[name];
    const up = quantity({ ...weather, [name]: weather[name] + step });
    const down = quantity({ ...weather, [name]: weather[name] - step });
    return (up - down) / 2;
  });
  return Math.hypot(...changes) / quantity(weather);
}
