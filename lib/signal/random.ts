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
  // 64-bit words as unsigned halves, low first. A typed array keeps them out of the heap: plain variables would be boxed.
  const state = new Uint32Array(2);
  const incrementLow = ((stream << 1) | 1) >>> 0;
  const incrementHigh = ((Math.floor(stream / 0x100000000) << 1) | (stream >>> 31)) >>> 0;

  const add = (low: number, high: number) => {
    const sum = (state[0] + low) >>> 0;
    state[1] = (state[1] + high + (sum < low ? 1 : 0)) | 0;
    state[0] = sum;
  };
  const step = () => {
    // state · 6364136223846793005 + increment; the multiplier is 0x5851F42D 4C957F2D.
    const low = state[0];
    const high = (Math.imul(low, 0x5851f42d) + Math.imul(state[1], 0x4c957f2d)) | 0;
    state[1] = (multiplyHigh(low, 0x4c957f2d) + high) | 0;
    state[0] = Math.imul(low, 0x4c957f2d);
    add(incrementLow, incrementHigh);
  };
  const nextUint32 = () => {
    const oldLow = state[0];
    const oldHigh = state[1];
    step();
    // ((old >> 18) ^ old) >> 27, truncated to 32 bits, rotated by the top five bits.
    const mixedHigh = oldHigh ^ (oldHigh >>> 18);
    const mixedLow = oldLow ^ ((oldLow >>> 18) | (oldHigh << 14));
    const shifted = (mixedLow >>> 27) | (mixedHigh << 5);
    const rotation = oldHigh >>> 27;
    return ((shifted >>> rotation) | (shifted << (-rotation & 31))) >>> 0;
  };

  step();
  add(seed >>> 0, Math.floor(seed / 0x100000000) >>> 0);
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
    const whole = bound >>> 0;
    for (;;) {
      const value = nextUint32();
      // Values from the last whole multiple of the bound on are drawn again; only the topmost ones need the look.
      if (value < 0x100000000 - whole || value < 0x100000000 - (0x100000000 % whole)) return value % whole;
    }
  };
  return { nextUint32, nextUniform, nextNormal, nextBelow };
}

/** Upper 32 bits of the product of two unsigned 32-bit numbers, by halves that fit. */
function multiplyHigh(a: number, b: number): number {
  const aHigh = a >>> 16;
  const aLow = a & 0xffff;
  const bHigh = b >>> 16;
  const bLow = b & 0xffff;
  const middle = ((Math.imul(aHigh, bLow) >>> 0) + (Math.imul(aLow, bLow) >>> 16)) >>> 0;
  const lower = ((Math.imul(aLow, bHigh) >>> 0) + (middle & 0xffff)) >>> 0;
  return (Math.imul(aHigh, bHigh) + (middle >>> 16) + (lower >>> 16)) >>> 0;
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
