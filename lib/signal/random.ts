/** A seeded stream of random numbers. Same seed and stream: same numbers on every machine. */
export interface RandomStream {
  /** Next 32-bit unsigned integer. */
  nextUint32(): number;
  /** Uniform in [0, 1) with 32 bits of resolution. */
  nextUniform(): number;
  /** Standard normal (polar Box-Muller). */
  nextNormal(): number;
  /** Unbiased integer in [0, bound). */
  nextBelow(bound: number): number;
}

/**
 * PCG32 (XSH RR 64/32): 64-bit congruential state, permuted 32-bit output, `seed` = initial state, `stream` = sequence.
 * Non-negative integers below 2^53. Source: O'Neill 2014, HMC-CS-2014-0905; reference outputs of its demo are tested.
 */
export function randomStream(seed: number, stream = 54): RandomStream {
  // 64-bit words as [high, low] pairs of unsigned 32-bit numbers.
  let high = 0;
  let low = 0;
  const streamHigh = Math.floor(stream / 0x100000000) >>> 0;
  const incrementLow = ((stream << 1) | 1) >>> 0;
  const incrementHigh = ((streamHigh << 1) | (stream >>> 31)) >>> 0;

  const step = () => {
    // state · 6364136223846793005 + increment; the multiplier is 0x5851F42D 4C957F2D.
    const productLow = multiplyLow(low, 0x4c957f2d);
    const carryProduct = multiplyHigh(low, 0x4c957f2d);
    const productHigh = (carryProduct + Math.imul(low, 0x5851f42d) + Math.imul(high, 0x4c957f2d)) >>> 0;
    const sum = productLow + incrementLow;
    low = sum >>> 0;
    high = (productHigh + incrementHigh + (sum > 0xffffffff ? 1 : 0)) >>> 0;
  };
  const nextUint32 = () => {
    const oldHigh = high;
    const oldLow = low;
    step();
    // ((old >> 18) ^ old) >> 27, truncated to 32 bits, rotated by the top five bits.
    const mixedHigh = (oldHigh ^ (oldHigh >>> 18)) >>> 0;
    const mixedLow = (oldLow ^ ((oldLow >>> 18) | (oldHigh << 14))) >>> 0;
    const shifted = ((mixedLow >>> 27) | (mixedHigh << 5)) >>> 0;
    const rotation = oldHigh >>> 27;
    return ((shifted >>> rotation) | (shifted << (-rotation & 31))) >>> 0;
  };

  step();
  const seedLow = low + (seed >>> 0);
  low = seedLow >>> 0;
  high = (high + (Math.floor(seed / 0x100000000) >>> 0) + (seedLow > 0xffffffff ? 1 : 0)) >>> 0;
  step();

  let spare: number | null = null;
  const nextUniform = () => nextUint32() / 0x100000000;
  const nextNormal = () => {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    for (;;) {
      const u = 2 * nextUniform() - 1;
      const v = 2 * nextUniform() - 1;
      const s = u * u + v * v;
      if (s <= 0 || s >= 1) continue;
      const factor = Math.sqrt((-2 * Math.log(s)) / s);
      spare = v * factor;
      return u * factor;
    }
  };
  const nextBelow = (bound: number) => {
    const limit = 0x100000000 - (0x100000000 % bound);
    for (;;) {
      const value = nextUint32();
      if (value < limit) return value % bound;
    }
  };
  return { nextUint32, nextUniform, nextNormal, nextBelow };
}

function multiplyLow(a: number, b: number): number {
  return Math.imul(a, b) >>> 0;
}

function multiplyHigh(a: number, b: number): number {
  const aHigh = a >>> 16;
  const aLow = a & 0xffff;
  const bHigh = b >>> 16;
  const bLow = b & 0xffff;
  const low = aLow * bLow;
  const middle = aHigh * bLow + Math.floor(low / 0x10000);
  const rest = aLow * bHigh + (middle % 0x10000);
  return aHigh * bHigh + Math.floor(middle / 0x10000) + Math.floor(rest / 0x10000);
}

/** Shuffles `items` in place (Fisher-Yates) with the stream's own numbers. */
export function shuffle(items: Int32Array, random: RandomStream): void {
  for (let i = items.length - 1; i > 0; i--) {
    const j = random.nextBelow(i + 1);
    const held = items[i];
    items[i] = items[j];
    items[j] = held;
  }
}
