import { KMH_MPS } from "@/lib/units/constants";

/** Speed step in m/s of a wheel sensor that counts pulses within a gate: CR/(N Tg). */
export function countingStepMps(circumferenceM: number, pulsesPerTurn: number, gateS: number): number {
  return circumferenceM / (pulsesPerTurn * gateS);
}

/** Root-mean-square error in m/s that writing a speed in steps of `stepKmh` leaves: step/√12. */
export function stepDeviationMps(stepKmh: number): number {
  return (stepKmh * KMH_MPS) / Math.sqrt(12);
}

/** Standard deviation of a slope over N equally spaced samples with white noise: σ/Δt √(12/(N(N²−1))). */
export function slopeDeviation(deviation: number, stepS: number, samples: number): number {
  return (deviation / stepS) * Math.sqrt(12 / (samples * (samples * samples - 1)));
}

/** Standard deviation in W of a power from motion: m v σ(a). */
export function powerDeviationW(massKg: number, speedMps: number, accelDeviationMps2: number): number {
  return massKg * speedMps * accelDeviationMps2;
}

/** Slip under drive: (wheel − road)/wheel, both in m/s. */
export function driveSlip(wheelMps: number, roadMps: number): number {
  return (wheelMps - roadMps) / wheelMps;
}
