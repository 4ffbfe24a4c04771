import type { Campaign } from "@/lib/measure/types";
import { randomStream } from "@/lib/signal/random";
import { SIMULATED_CARS } from "./simulated-cars";

/** Standard deviations of what a tester types wrong, and the limits of his weather readings. */
export interface TypingErrors {
  massKg: number;
  circumference: number;
  inertia: number;
  efficiency: number;
  weather: { tempC: number; pressureHpa: number; rhPct: number };
}

const USUAL_ERRORS: TypingErrors = {
  massKg: 15,
  circumference: 0.005,
  inertia: 0.1,
  efficiency: 0.01,
  weather: { tempC: 1, pressureHpa: 7, rhPct: 5 },
};

/**
 * The campaign as a tester types it: each figure of the vehicle drawn from a normal distribution about the truth of the simulated
 * car, with that distribution's deviation stated beside it; weather readings off by one draw for the whole day, evenly within
 * their limits.
 */
export function typedWrong(
  campaign: Campaign,
  car: keyof typeof SIMULATED_CARS,
  seed: number,
  errors: TypingErrors = USUAL_ERRORS,
): Campaign {
  const random = randomStream(seed, 95);
  const truth = SIMULATED_CARS[car].car;
  const drawn = (value: number, deviation: number) => value + deviation * random.nextNormal();
  const within = (limit: number) => limit * (2 * random.nextUniform() - 1);
  const circumferenceM = 2 * Math.PI * truth.radiusM;
  const [engine, wheel] = [truth.engineInertiaKgm2, truth.wheelInertiaKgm2];
  const vehicle: Campaign["vehicle"] = {
    ...campaign.vehicle,
    mass_kg: drawn(truth.massKg, errors.massKg),
    mass_uncertainty_kg: errors.massKg,
    speed_at_rpm: null,
    rolling_circumference_m: drawn(circumferenceM, errors.circumference * circumferenceM),
    rolling_circumference_uncertainty_m: errors.circumference * circumferenceM,
    engine_inertia_kgm2: drawn(engine, errors.inertia * engine),
    engine_inertia_uncertainty_kgm2: errors.inertia * engine,
    wheel_inertia_kgm2: drawn(wheel, errors.inertia * wheel),
    wheel_inertia_uncertainty_kgm2: errors.inertia * wheel,
    mesh_efficiency: drawn(truth.efficiency, errors.efficiency),
    mesh_efficiency_uncertainty: errors.efficiency,
  };
  const { tempC, pressureHpa, rhPct } = errors.weather;
  const off = { temp_c: within(tempC), pressure_hpa: within(pressureHpa), rh_pct: within(rhPct) };
  return {
    ...campaign,
    vehicle,
    runs: campaign.runs.map((run) => ({
      ...run,
      weather: run.weather && {
        temp_c: run.weather.temp_c + off.temp_c,
        pressure_hpa: run.weather.pressure_hpa + off.pressure_hpa,
        rh_pct: run.weather.rh_pct + off.rh_pct,
      },
    })),
  };
}
