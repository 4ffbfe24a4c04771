import { describe, expect, it } from "vitest";
import { fallResult } from "@/lib/measure/sprint/net-fall";
import { measureSprint } from "@/lib/measure/sprint/sprint";
import { randomStream } from "@/lib/signal/random";
import { KMH_MPS } from "@/lib/units/constants";
import {
  drawnSprint,
  type SprintScenario,
  type SprintTruth,
  simulateSprint,
} from "../../support/simulated-sprints";

const ROLLOUT_M = 0.3048;
const RUNS = 12;
/** Some seconds of computing where the machine has other work too. */
const PATIENCE_MS = 60_000;

/** True times of a simulated sprint by name. */
function truthOf({ toSpeedS, toWayS }: SprintTruth): Record<string, number> {
  const [v50, v60, v80, v100, v120] = [50, 60, 80, 100, 120].map((kmh) => toSpeedS(kmh * KMH_MPS));
  const rest: Record<string, number> = { "0-50": v50, "0-100": v100, "402.336 m": toWayS(402.336) };
  const rollout = toWayS(ROLLOUT_M);
  const ivm = Object.entries(rest).map(([name, s]) => [`${name} ivm`, s - rollout]);
  return { ...rest, ...Object.fromEntries(ivm), "60-100": v100 - v60, "80-120": v120 - v80 };
}

/** How many figures of fresh simulated sprints lie inside ± (twice the standard uncertainty), and the largest misses. */
function study(fixed: Partial<SprintScenario>, firstSeed: number) {
  const found = { inside: 0, of: 0, rest: 0, other: 0 };
  const count = (miss: number, uncertainty: number) => {
    found.of++;
    if (Math.abs(miss) <= 2 * uncertainty) found.inside++;
  };
  for (let k = 0; k < RUNS; k++) {
    const seed = firstSeed + k;
    const { table, truth } = simulateSprint(drawnSprint(randomStream(seed, 5), fixed), seed);
    const { result } = measureSprint(table);
    for (const [name, expected] of Object.entries(truthOf(truth))) {
      const miss = result.times_s[name] - expected;
      count(miss, result.times_uncertainty_s[name]);
      const group = /^0-\d+$|m$/.test(name) && !name.endsWith("ivm") ? "rest" : "other";
      found[group] = Math.max(found[group], Math.abs(miss));
    }
    const name = "402.336 m";
    const trap = 20.1168 / (truth.toWayS(402.336) - truth.toWayS(402.336 - 20.1168)) / KMH_MPS;
    count(
      result.speed_at_kmh[name] - truth.speedAtWayMps(402.336) / KMH_MPS,
      result.speed_uncertainty_kmh[name],
    );
    count(result.trap_kmh[name] - trap, result.trap_uncertainty_kmh[name]);
  }
  return found;
}

describe("fresh simulated sprints: other cars, starts, shifts, slopes and scale errors (tests/support/simulated-sprints.ts)", () => {
  // Figures of one run share their errors, so the bound is that of the runs: binomial, n 12, p 0.95, 9 of 12 or more hold
  // with 99.8 %. The same over 100 runs a kind gave 89 to 100 % for each kind of figure.
  it.each<[string, Partial<SprintScenario>, number, number]>([
    ["wheel at 50 Hz, GPS, accelerometer", {}, 0.06, 0.04],
    ["wheel at 10 Hz, GPS, accelerometer", { rateHz: 10 }, 0.08, 0.05],
    ["GPS at 10 Hz with accelerometer", { wheel: false }, 0.07, 0.05],
    ["GPS at 10 Hz alone", { wheel: false, accelerometer: false, rateHz: 10 }, 0.16, 0.06],
    ["wheel in steps of 1 km/h", { wheelStepKmh: 1 }, 0.07, 0.06],
  ])(
    "%s: about nineteen in twenty times and speeds lie inside ±",
    { timeout: PATIENCE_MS },
    (_name, fixed, restS, otherS) => {
      const { inside, of, rest, other } = study(fixed, 7000);
      expect(of).toBe(10 * RUNS);
      expect(inside / of).toBeGreaterThanOrEqual(9 / 12);
      expect(rest).toBeLessThan(restS);
      expect(other).toBeLessThan(otherS);
    },
  );

  it("the net fall and its effect on a time lie inside ± (truth: the same sprint on level road)", {
    timeout: PATIENCE_MS,
  }, () => {
    let inside = 0;
    let of = 0;
    for (let seed = 8000; seed < 8000 + RUNS; seed++) {
      const scenario = drawnSprint(randomStream(seed, 5));
      const { table, truth } = simulateSprint(scenario, seed);
      const level = truthOf(simulateSprint({ ...scenario, slope: 0 }, seed).truth);
      const { fall, sensitivityS } = measureSprint(table);
      const { fall_effect_s, fall_effect_uncertainty_s } = fallResult(fall, sensitivityS);
      expect(Math.abs((fall?.pct ?? 99) + 100 * scenario.slope)).toBeLessThan(
        4 * (fall?.uncertaintyPct ?? 0),
      );
      for (const [name, driven] of Object.entries(truthOf(truth))) {
        of++;
        const miss = (fall_effect_s?.[name] ?? Number.NaN) - (driven - level[name]);
        if (Math.abs(miss) <= 2 * (fall_effect_uncertainty_s?.[name] ?? 0)) inside++;
      }
    }
    expect(of).toBe(8 * RUNS);
    expect(inside / of).toBeGreaterThanOrEqual(9 / 12);
  });
});
