import { describe, expect, it } from "vitest";
import { randomStream, shuffle } from "@/lib/signal/random";

describe("PCG32", () => {
  it("gives the outputs of the generator's published demo (seed 42, stream 54)", () => {
    const random = randomStream(42, 54);
    const got = Array.from({ length: 6 }, () => random.nextUint32());
    expect(got).toEqual([0xa15c02b7, 0x7b47f409, 0xba1d3330, 0x83d2f293, 0xbfa4784b, 0xcbed606e]);
  });

  it("agrees with 64-bit integer arithmetic for a seed above 2^32", () => {
    const mask = (1n << 64n) - 1n;
    const seed = 2 ** 45 + 123_456_789;
    const increment = (7n << 1n) | 1n;
    let state = 0n;
    const step = () => {
      state = (state * 6364136223846793005n + increment) & mask;
    };
    step();
    state = (state + BigInt(seed)) & mask;
    step();
    const random = randomStream(seed, 7);
    for (let i = 0; i < 1000; i++) {
      const shifted = Number((((state >> 18n) ^ state) >> 27n) & 0xffffffffn);
      const rotation = Number(state >> 59n);
      step();
      expect(random.nextUint32()).toBe(((shifted >>> rotation) | (shifted << (-rotation & 31))) >>> 0);
    }
  });

  it("draws normals with mean 0, variance 1 and fourth moment 3 (limits: 5 standard errors)", () => {
    const random = randomStream(3);
    const n = 40_000;
    let m1 = 0;
    let m2 = 0;
    let m4 = 0;
    for (let i = 0; i < n; i++) {
      const z = random.nextNormal();
      m1 += z / n;
      m2 += (z * z) / n;
      m4 += z ** 4 / n;
    }
    expect(Math.abs(m1)).toBeLessThan(5 / Math.sqrt(n));
    expect(Math.abs(m2 - 1)).toBeLessThan(5 * Math.sqrt(2 / n));
    expect(Math.abs(m4 - 3)).toBeLessThan(5 * Math.sqrt(96 / n));
  });

  it("shuffles every permutation of three equally often (limits: 5 standard errors)", () => {
    const random = randomStream(9);
    const counts = new Map<string, number>();
    for (let i = 0; i < 12_000; i++) {
      const items = Int32Array.of(0, 1, 2);
      shuffle(items, random);
      counts.set(items.join(""), (counts.get(items.join("")) ?? 0) + 1);
    }
    expect(counts.size).toBe(6);
    for (const count of counts.values()) expect(Math.abs(count - 2000)).toBeLessThan(5 * Math.sqrt(2000));
  });
});
