/** Injector duty in %: pulse width in ms, one injection a four-stroke cycle (cycle time 120 000/rpm ms). */
export function injectorDutyPct(pulseMs: number, rpm: number): number {
  return (pulseMs * rpm) / 1200;
}

/** Lambda from an air-fuel ratio and its stoichiometric value, which depends on the fuel. */
export function lambdaFromAirFuel(airFuelRatio: number, stoichiometric: number): number {
  return airFuelRatio / stoichiometric;
}

/** Boost above its target, both gauge; any one pressure unit. */
export interface BoostOvershoot {
  overshoot: number;
  pctOfGauge: number;
  pctOfAbsolute: number;
}

/** Overshoot of a gauge boost pressure above its target, in the unit given and in % of both references. */
export function boostOvershoot(peakGauge: number, targetGauge: number, ambient: number): BoostOvershoot {
  const overshoot = peakGauge - targetGauge;
  return {
    overshoot,
    pctOfGauge: (100 * overshoot) / targetGauge,
    pctOfAbsolute: (100 * overshoot) / (targetGauge + ambient),
  };
}
