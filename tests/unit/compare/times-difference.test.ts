import { describe, expect, it } from "vitest";
import { type TimedRun, timesDifference } from "@/lib/compare/times/times-difference";
import { randomStream } from "@/lib/signal/random";
import { expectClose } from "../../support/expect-close";

const SETTINGS = { a: "A", b: "B", level: 0.95 };

function run(changes: Partial<TimedRun> & { seconds: number }, order: number): TimedRun {
  const { seconds, ...rest } = changes;
  return {
    ...{ id: `r${order}`, kind: "sprint", side: "A", leg: "out", order, roadDay: null },
    timesS: { "0-100": seconds },
    uncertaintiesS: { "0-100": 0.005 },
    fallEffectsS: {},
    fallUncertaintiesS: {},
    ...rest,
  };
}

describe("Difference of times", () => {
  it("is that of the leg means, whatever the fall does to each leg (closed form)", () => {
    // Side A out 6.9 and 6.7 back, B 0.2 s less, A twice out: the plain mean of A would be 6.833, the leg means' 6.8.
    const runs = [
      ["A", "out", 6.9],
      ["B", "out", 6.7],
      ["B", "back", 6.5],
      ["A", "back", 6.7],
      ["A", "out", 6.9],
    ].map(([side, leg, seconds], k) =>
      run({ side: String(side), leg: leg === "out" ? "out" : "back", seconds: Number(seconds) }, k + 1),
    );
    const got = timesDifference(runs, SETTINGS).times["0-100"];
    expectClose(got.a_s, 6.8, { abs: 1e-9 });
    expectClose(got.b_s, 6.6, { abs: 1e-9 });
    expectClose(got.difference_s, -0.2, { abs: 1e-9 });
    expect(got).toMatchObject({ n_a: 3, n_b: 2, legs_a: { out: 2, back: 1 }, legs_b: { out: 1, back: 1 } });
    // Nothing scatters, so what is left of a side's own ± are its instruments: twice 0.005 s.
    expectClose(got.a_half_width_s, 0.01, { abs: 1e-6 });
  });

  it("holds the true difference in about 95 % (300 campaigns of 4 + 4 with leg, drift and scatter)", () => {
    let inside = 0;
    for (let seed = 1; seed <= 300; seed++) {
      const random = randomStream(seed, 3);
      const runs = [..."ABBABAAB"].map((side, k) =>
        run(
          {
            side,
            leg: k % 2 === 0 ? "out" : "back",
            seconds:
              6.5 +
              (side === "B" ? -0.1 : 0) +
              (k % 2 === 0 ? 0.05 : -0.05) +
              0.005 * k +
              0.03 * random.nextNormal(),
          },
          k + 1,
        ),
      );
      const { difference_s, half_width_s } = timesDifference(runs, SETTINGS).times["0-100"];
      if (Math.abs(difference_s + 0.1) <= (half_width_s ?? 0)) inside++;
    }
    // Binomial with p 0.95 and n 300: 274 to 295 hold with 99.9 %.
    expect(inside).toBeGreaterThanOrEqual(272);
    expect(inside).toBeLessThanOrEqual(296);
  });

  it("keeps a roll-on of a pull and a sprint's apart", () => {
    const both = (side: string, kind: "pull" | "sprint", seconds: number, order: number) =>
      run({ side, kind, seconds, timesS: { "80-120": seconds } }, order);
    const { times } = timesDifference(
      [
        both("A", "pull", 4, 1),
        both("B", "pull", 3.9, 2),
        both("A", "sprint", 3.7, 3),
        both("B", "sprint", 3.5, 4),
      ],
      SETTINGS,
    );
    expectClose(times["80-120"].difference_s, -0.1, { abs: 1e-9 });
    expect(times["80-120"].kind).toBe("pull");
    expectClose(times["80-120 in a sprint"].difference_s, -0.2, { abs: 1e-9 });
    expect(times["80-120"].half_width_s).toBeNull();
  });

  const oneLeg = (falls: Partial<TimedRun>) =>
    timesDifference(
      [6.8, 6.6, 6.6, 6.8].map((seconds, k) => run({ side: "ABBA"[k], seconds, ...falls }, k + 1)),
      SETTINGS,
    );

  it("on one leg: warns, and the fall's effect and its uncertainty widen each side's ± (by hand)", () => {
    const { times, warnings } = oneLeg({
      fallEffectsS: { "0-100": -0.06 },
      fallUncertaintiesS: { "0-100": 0.02 },
    });
    expect(warnings.map((warning) => warning.code)).toEqual(["sprints_one_leg", "sprints_one_leg"]);
    expect(warnings[0].message).toContain("the fall's effect and its uncertainty are in its ±");
    // Nothing scatters: twice 0.005 s of instruments, 0.06 s of fall and twice 0.02 s of its uncertainty, √(0.0001 + 0.0036 + 0.0016).
    expectClose(times["0-100"].a_half_width_s, Math.sqrt(0.0053), { abs: 1e-6 });
    expectClose(times["0-100"].b_half_width_s, Math.sqrt(0.0053), { abs: 1e-6 });
    expectClose(times["0-100"].difference_s, -0.2, { abs: 1e-9 });
  });

  it("on one leg with a fall that is level by a poor altitude: the uncertainty alone widens it", () => {
    const { times } = oneLeg({ fallEffectsS: { "0-100": 0 }, fallUncertaintiesS: { "0-100": 0.05 } });
    expectClose(times["0-100"].a_half_width_s, Math.hypot(0.01, 0.1), { abs: 1e-6 });
  });

  it("on one leg without a known fall: states no ± of a side's own time, and does not say that the fall is in it", () => {
    for (const falls of [{}, { fallEffectsS: { "0-100": -0.06 } }]) {
      const { times, warnings } = oneLeg(falls);
      expect(times["0-100"]).toMatchObject({ a_half_width_s: null, b_half_width_s: null });
      expect(times["0-100"].half_width_s).not.toBeNull();
      expect(warnings[0].message).toContain("is not known, so no ± of the side's own is stated there");
      expect(warnings[0].message).not.toContain("in its ±");
    }
  });

  it("claims nothing when the side goes hand in hand with the leg", () => {
    const runs = [6.8, 6.6, 6.8, 6.6, 6.81, 6.61].map((seconds, k) =>
      run({ side: k % 2 ? "B" : "A", leg: k % 2 ? "back" : "out", seconds }, k + 1),
    );
    expect(timesDifference(runs, SETTINGS).times["0-100"].half_width_s).toBeNull();
  });
});
