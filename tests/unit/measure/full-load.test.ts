import { describe, expect, it } from "vitest";
import type { KnownChannel, LogTable } from "@/lib/logs/types";
import { runFullLoad } from "@/lib/measure/engine/full-load";
import { sideFullLoad } from "@/lib/measure/engine/side-full-load";

const PETROL = { engine: "spark ignition", aspiration: "turbo" } as const;
/** Tip-in at 2 s, lift at 12 s, engine speed 2000 + 500·(t − 2): every expected figure follows from these by hand. */
const PULL = { from_s: 2, to_s: 12 };
const GRID = {
  rpm: Array.from({ length: 95 }, (_, k) => 2200 + 50 * k),
  timeS: Array.from({ length: 95 }, (_, k): number | null => 2.4 + 0.1 * k),
};
const TIME = Float64Array.from({ length: 701 }, (_, i) => i / 50);

type Column = [KnownChannel | null, string, string, (t: number) => number];

function table(...columns: Column[]): LogTable {
  const channels = columns.map(([channel, column, unit, value]) => ({
    ...{ channel, column, unit, unitFound: unit, values: TIME.map(value) },
  }));
  return { timeS: TIME, channels } as unknown as LogTable;
}

const at = (load: ReturnType<typeof runFullLoad>, rpm: number) => load.rpm.indexOf(rpm);

describe("Engine channels of one pull", () => {
  it("averages over the time around each engine speed, and tells rise and time at load", () => {
    // 30 °C + 2 K/s: at 4000 1/min t = 6 s, 38 °C; before tip-in constant.
    const load = runFullLoad(
      table(["intake_temperature", "IAT", "°C", (t) => 30 + 2 * Math.max(0, t - 2)]),
      GRID,
      PULL,
      PETROL,
    );
    expect(load.load_s).toBe(10);
    const found = load.channels.intake_temperature;
    expect(found?.values[at(load, 4000)]).toBeCloseTo(38, 6);
    expect(found?.start).toBeCloseTo(30, 6);
    // Last half second: mean of 49 and 50.
    expect(found?.end).toBeCloseTo(49.5, 6);
    expect(found?.rise).toBeCloseTo(19.5, 6);
    // From 1 s after tip-in to the lift: 32 to 50.
    expect(found?.mean).toBeCloseTo(41, 6);
  });

  it("counts as highest what holds 0.3 s, where it holds, and not what the first second shows", () => {
    // A block of 4° from 7 to 7.5 s, one sample of 9° at 9 s, 6° in the first half second of load.
    const knock = (t: number) =>
      t >= 7 && t <= 7.5 ? 4 : Math.abs(t - 9) < 1e-9 ? 9 : t > 2 && t < 2.5 ? 6 : 0;
    const found = runFullLoad(table(["knock_retard", "Knock", "°", knock]), GRID, PULL, PETROL).channels
      .knock_retard;
    expect(found?.max.value).toBe(4);
    expect(found?.max.at_s).toBeGreaterThanOrEqual(7.1);
    expect(found?.max.at_s).toBeLessThanOrEqual(7.4);
    expect(found?.max.rpm).toBeCloseTo(2000 + 500 * ((found?.max.at_s ?? 0) - 2), 0);
  });

  it("reads no extreme in a span that is not full load: the lean spike of a lift is no finding", () => {
    const lift = { from_s: 6, to_s: 7 };
    const lambda = (t: number) => (t > lift.from_s && t < lift.to_s ? 1.9 : t > 9 && t < 9.5 ? 0.9 : 0.86);
    const boost = (t: number) => (t > lift.from_s && t < lift.to_s ? 260 : 200);
    const logged = table(["lambda", "Lambda", "1", lambda], ["manifold_pressure", "MAP", "kPa", boost]);
    const { channels, boost: found } = runFullLoad(logged, GRID, PULL, PETROL, [lift]);
    expect(channels.lambda?.max.value).toBeCloseTo(0.9, 6);
    expect(channels.lambda?.min.value).toBeCloseTo(0.86, 6);
    expect(found?.peak_kpa).toBe(200);
    expect(runFullLoad(logged, GRID, PULL, PETROL).channels.lambda?.max.value).toBeCloseTo(1.9, 6);
  });

  it("lists what is not recorded and never fills it in", () => {
    const load = runFullLoad(table(["lambda", "Lambda", "1", () => 0.86]), GRID, PULL, PETROL);
    expect(Object.keys(load.channels)).toEqual(["lambda"]);
    expect(load.not_recorded).toEqual([
      ...["knock_retard", "exhaust_temperature", "manifold_pressure"],
      ...["intake_temperature", "coolant_temperature", "injector_duty"],
    ]);
    expect(load.boost).toBeUndefined();
    const diesel = runFullLoad(table(), GRID, PULL, { ...PETROL, engine: "compression ignition" });
    expect(diesel.not_recorded).not.toContain("knock_retard");
  });

  it("leaves a masked stretch open", () => {
    const masked = {
      ...GRID,
      timeS: GRID.timeS.map((t, k) => (GRID.rpm[k] > 3600 && GRID.rpm[k] < 4400 ? null : t)),
    };
    const load = runFullLoad(table(["lambda", "Lambda", "1", () => 0.86]), masked, PULL, PETROL);
    expect(load.channels.lambda?.values[at(load, 4000)]).toBeNull();
    expect(load.channels.lambda?.values[at(load, 3000)]).toBeCloseTo(0.86, 9);
  });

  it("makes injector duty of a pulse width: 18 ms at 6000 1/min is 90 % (measurement.md 8)", () => {
    const load = runFullLoad(
      table(["engine_speed", "rpm", "1/min", () => 6000], [null, "Injector pulse width", "ms", () => 18]),
      GRID,
      PULL,
      PETROL,
    );
    expect(load.channels.injector_duty?.mean).toBeCloseTo(90, 9);
  });
});

describe("Boost overshoot", () => {
  /** Rises to 200 kPa with 0.3 s, shoots over by up to 12 kPa around 1.5 s after tip-in. */
  const boost = (t: number) => {
    const s = Math.max(0, t - 2);
    return 100 + 100 * (1 - Math.exp(-s / 0.3)) + 12 * Math.exp(-(((s - 1.5) / 0.5) ** 2));
  };

  it("is read over the plateau that follows, in the pressure's own reference", () => {
    const load = runFullLoad(table(["manifold_pressure", "MAP", "kPa", boost]), GRID, PULL, PETROL);
    expect(load.boost).toMatchObject({ channel: "manifold_pressure", reference: "plateau" });
    // Mean of the hill over 0.3 s: 12·√π/2·erf(0.3)/0.3 = 11.65; the rise still lacks 100·e⁻⁵ = 0.67 there; plateau 200.
    expect(load.boost?.overshoot_kpa).toBeGreaterThan(10.85);
    expect(load.boost?.overshoot_kpa).toBeLessThan(11.1);
    const gauge = runFullLoad(
      table(["manifold_pressure_gauge", "Boost", "kPa", (t) => boost(t) - 100]),
      GRID,
      PULL,
      PETROL,
    );
    expect(gauge.boost?.channel).toBe("manifold_pressure_gauge");
    expect(gauge.boost?.overshoot_kpa).toBeCloseTo(load.boost?.overshoot_kpa ?? 0, 6);
  });

  it("is held against a logged target, but never against one with another zero point", () => {
    const withTarget = (column: string, kpa: number) =>
      runFullLoad(
        table(["manifold_pressure", "MAP", "kPa", boost], [null, column, "kPa", () => kpa]),
        GRID,
        PULL,
        PETROL,
      ).boost;
    expect(withTarget("Boost target", 205)?.reference).toBe("target");
    expect(withTarget("Boost target", 205)?.overshoot_kpa).toBeCloseTo(5.98, 1);
    expect(withTarget("Boost target gauge", 205)?.reference).toBe("plateau");
    expect(withTarget("Boost target", 105)?.reference).toBe("plateau");
  });

  it("is not told of an engine without boost, nor when nothing settles", () => {
    const natural = { ...PETROL, aspiration: "natural" } as const;
    expect(
      runFullLoad(table(["manifold_pressure", "MAP", "kPa", boost]), GRID, PULL, natural).boost,
    ).toBeUndefined();
    const late = runFullLoad(
      table(["manifold_pressure", "MAP", "kPa", (t) => 100 + 10 * Math.max(0, t - 2)]),
      GRID,
      PULL,
      PETROL,
    ).boost;
    expect(late).toMatchObject({ overshoot_kpa: null, reference: null });
    expect(late?.why).toMatch(/too late/);
  });
});

describe("Engine channels of a side", () => {
  it("names the run of the worst value and counts the runs that carry a channel", () => {
    const load = (lambda: number) =>
      runFullLoad(table(["lambda", "Lambda", "1", () => lambda]), GRID, PULL, PETROL);
    const bare = runFullLoad(table(), GRID, PULL, PETROL);
    const side = sideFullLoad([
      { id: "r1", fullLoad: load(0.86) },
      { id: "r4", fullLoad: load(0.89) },
      { id: "r5", fullLoad: bare },
    ]);
    expect(side?.channels.lambda).toMatchObject({
      n: 2,
      max: { run: "r4" },
      min: { run: "r1" },
    });
    expect(side?.channels.lambda?.max.value).toBeCloseTo(0.89, 9);
    expect(side?.channels.lambda?.values[5]).toBeCloseTo(0.875, 9);
    expect(side?.not_recorded).toContain("knock_retard");
    expect(side?.not_recorded).not.toContain("lambda");
    expect(sideFullLoad([])).toBeNull();
  });
});
