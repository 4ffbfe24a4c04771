import type { Pair } from "@/lib/calibration/changes/pair";
import type { ByteRange } from "@/lib/calibration/values/types";

/**
 * Words of which descriptions give out single bits: a changed word is explained only where all bits that differ lie in masks of
 * changed values. A value of several cells with a mask explains its words whole.
 */
export function createMaskedWords() {
  const words = new Map<string, { bytes: readonly ByteRange[]; changed: bigint; described: bigint }>();
  return {
    /** Takes a changed pair; false where it is no single masked value at one place, and so explains its bytes by itself. */
    take({ before, after }: Pair): boolean {
      if (!before?.bits || !after?.bits || before.address !== after.address) return false;
      const masks = BigInt(before.bits.mask) | BigInt(after.bits.mask);
      const key = `${before.address} ${before.bytes[0]?.length ?? 0}`;
      const word = words.get(key) ?? {
        bytes: after.bytes,
        changed: BigInt(before.bits.word) ^ BigInt(after.bits.word),
        described: 0n,
      };
      word.described |= masks;
      words.set(key, word);
      return true;
    },
    /** Bytes of the words that are explained. */
    explained: (): ByteRange[] =>
      [...words.values()].flatMap(({ bytes, changed, described }) =>
        (changed & ~described) === 0n ? bytes : [],
      ),
  };
}
