import { describe, expect, it } from "vitest";
import { brakedSpans } from "@/lib/measure/judge/braking";
import { randomStream } from "@/lib/signal/random";

/** A free roll −a = 0.15 + 2.7e-4 v² (closed form for v(t)) with noise, and `brakeMps2` more between two times. */
function roll({ rateHz = 50, noiseMps = 0.01, brakeMps2 = 0, fromS = 0, toS = 0, hill = 0, stepMps = 0 }) {
  const random = randomStream(5);
  const timeS = Float64Array.from({ length: 60 * rateHz }, (_, i) => i / rateHz);
  let v = 38;
  const speedMps = timeS.map((t) => {
    // A hill of 300 m wavelength: the slope of the road changes smoothly.
    const braking = t >= fromS && t < toS ? brakeMps2 : 0;
    v -= (0.15 + 2.7e-4 * v * v + braking + hill * Math.sin((2 * Math.PI * t) / 14)) / rateHz;
    const read = v + noiseMps * random.nextNormal();
    return stepMps > 0 ? Math.round(read / stepMps) * stepMps : read;
  });
  return brakedSpans(timeS, speedMps, { from_s: 0, to_s: timeS[timeS.length - 1] });
}

describe("Braking in a coast-down (truth: the braking that the test put in)", () => {
  it.each([
    ["at 50 Hz", {}],
    ["at 10 Hz with the noise of a GPS", { rateHz: 10, noiseMps: 0.03 }],
    ["in steps of 1 km/h", { rateHz: 20, stepMps: 1 / 3.6 }],
    ["over hills of ± 0.15 m/s²", { hill: 0.15 }],
  ])("finds none where none was, %s", (_, how) => expect(roll(how)).toEqual([]));

  it.each([0.5, 1, 1.7])("finds %s m/s² for 2 s, whole and not far beyond", (brakeMps2) => {
    for (const how of [{}, { rateHz: 10, noiseMps: 0.03 }, { hill: 0.1 }]) {
      const found = roll({ ...how, brakeMps2, fromS: 20, toS: 22 });
      expect(found).toHaveLength(1);
      expect(found[0].from_s).toBeLessThanOrEqual(20);
      expect(found[0].from_s).toBeGreaterThan(18);
      expect(found[0].to_s).toBeGreaterThanOrEqual(22);
      expect(found[0].to_s).toBeLessThan(24);
    }
  });

  it("finds braking that goes on to the end, and braking over half of the coast-down", () => {
    const end = roll({ brakeMps2: 0.8, fromS: 40, toS: 60 });
    expect(end).toHaveLength(1);
    expect(end[0].to_s).toBeCloseTo(59.98, 1);
    const half = roll({ brakeMps2: 0.4, fromS: 10, toS: 38 });
    expect(half).toHaveLength(1);
    expect(half[0].from_s).toBeLessThan(10);
    expect(half[0].to_s).toBeGreaterThan(38);
  });

  it("tells nothing of a span that is too short", () => {
    const t = Float64Array.from({ length: 20 }, (_, i) => i / 10);
    expect(
      brakedSpans(
        t,
        t.map((x) => 20 - 3 * x),
        { from_s: 0, to_s: 2 },
      ),
    ).toEqual([]);
  });
});
