import { describe, expect, it } from "vitest";
import { findAnomalies } from "@/lib/measure/engine/curve-anomalies";
import { randomStream } from "@/lib/signal/random";

const RPM = Array.from({ length: 97 }, (_, k) => 1700 + 50 * k);
const hill = (x: number, at: number, width: number) => Math.exp(-0.5 * ((x - at) / (width / 2.355)) ** 2);

/**
 * Six runs of a side: a smooth engine, 0.5 % level scatter, 0.2 % noise that is smooth over 150 1/min, and a shape on top.
 * The truth of every case is the shape.
 */
function runs(seed: number, shape: (rpm: number, run: number) => number, count = 6) {
  const random = randomStream(seed, 3);
  return Array.from({ length: count }, (_, run) => {
    const level = 1 + 0.005 * random.nextNormal();
    const nodes = Array.from({ length: 40 }, () => 0.002 * random.nextNormal());
    return RPM.map((rpm) => {
      const place = (rpm - 1700) / 150;
      const low = Math.floor(place);
      const noise = nodes[low] + (place - low) * (nodes[low + 1] - nodes[low]);
      return 320 * (1 - ((rpm - 3800) / 6000) ** 2) * level * (1 + noise + shape(rpm, run));
    });
  });
}

const clean = (seed: number) => runs(seed, () => 0);
const find = (b: ReturnType<typeof runs>, seed = 99) => findAnomalies(RPM, { A: clean(seed), B: b }, 0.95);

describe("Spikes and ripple on a side's mean curve", () => {
  it.each([3000, 4500, 6000])(
    "finds a spike of 3 % over 200 1/min at %d, with side, place and size",
    (at) => {
      const found = find(runs(7, (rpm) => 0.03 * hill(rpm, at, 200)));
      expect(found.A.anomalies).toEqual([]);
      expect(found.B.anomalies).toHaveLength(1);
      const [spike] = found.B.anomalies;
      expect(spike.code).toBe("spike");
      expect(spike.from_rpm).toBeLessThanOrEqual(at);
      expect(spike.to_rpm).toBeGreaterThanOrEqual(at);
      expect(spike.size_pct).toBeGreaterThan(2);
      expect(spike.size_pct).toBeLessThan(3.6);
      expect(Math.abs(spike.size_pct)).toBeGreaterThan(spike.limit_pct);
      expect(spike.runs).toEqual({ showing: 6, of: 6 });
    },
  );

  it("finds a dip as well, and signs it", () => {
    const [dip] = find(runs(8, (rpm) => -0.03 * hill(rpm, 5200, 200))).B.anomalies;
    expect(dip.size_pct).toBeLessThan(-2);
  });

  it("does not mark what only one run of six shows", () => {
    const found = find(runs(9, (rpm, run) => (run === 2 ? 0.03 * hill(rpm, 4500, 200) : 0)));
    expect(found.B.anomalies).toEqual([]);
  });

  it("calls a wave that turns several times a ripple", () => {
    const wave = (rpm: number) =>
      rpm > 3900 && rpm < 5400 ? 0.03 * Math.sin((2 * Math.PI * (rpm - 3900)) / 500) : 0;
    const { anomalies } = find(runs(10, wave)).B;
    expect(anomalies.map(({ code }) => code)).toContain("ripple");
  });

  it("takes a new torque level for what it is", () => {
    const step = (rpm: number) => 0.06 * (0.5 + 0.5 * Math.tanh((rpm - 3500) / 60));
    expect(find(runs(11, step)).B.anomalies).toEqual([]);
  });

  it("marks at most 2 of 80 clean sides (marks are set at 99 %)", () => {
    let marked = 0;
    for (let seed = 100; seed < 140; seed++) {
      const found = findAnomalies(RPM, { A: clean(seed), B: clean(1000 + seed) }, 0.95);
      marked += Number(found.A.anomalies.length > 0) + Number(found.B.anomalies.length > 0);
    }
    expect(marked).toBeLessThanOrEqual(2);
  });

  it("judges no side of two runs, nor the spool-up, nor the last 200 1/min", () => {
    const found = findAnomalies(RPM, { A: clean(1), B: clean(2).slice(0, 2) }, 0.95);
    expect(found.B).toEqual({ smoothness: null, anomalies: [] });
    const judged = RPM.filter((_, k) => found.A.smoothness?.deviation_pct[k] !== null);
    expect(judged[0]).toBe(2500);
    expect(judged.at(-1)).toBe(6300);
  });
});
