import type { DescriptionModule } from "@/lib/calibration/a2l/types";
import { formatAddress } from "@/lib/calibration/image/types";
import type { ImageMemory } from "@/lib/calibration/values/memory/image-memory";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import type { ImageReading } from "@/lib/calibration/values/types";

/** Longest identifying text compared; a longer one is damage. */
const LONGEST_EPK = 4096;

/**
 * Whether description and image belong together: each address that the description states must hold its EPK, character by character.
 * "none" where it states no text or no address.
 */
export function checkEpk(
  epk: DescriptionModule["epk"],
  memory: ImageMemory,
): { epk: ImageReading["epk"]; problem: string | null } {
  if (epk === null) return { epk: { state: "none", expected: null, found: null }, problem: null };
  const expected = epk.text.slice(0, LONGEST_EPK);
  let found: string | null = null;
  for (const address of epk.addresses) {
    try {
      const { view, offset } = memory.at(address, expected.length);
      const codes = Array.from({ length: expected.length }, (_, k) => view.getUint8(offset + k));
      const text = codes.map((code) => String.fromCharCode(code)).join("");
      found ??= shown(text);
      if (text === expected) continue;
      found = shown(text);
    } catch (error) {
      if (!(error instanceof NotReadable)) throw error;
    }
    return {
      epk: { state: "mismatch", expected, found },
      problem: `The description belongs to "${expected}", the image holds ${found === null ? "nothing" : `"${found}"`} at ${formatAddress(address)}. Check that both belong together.`,
    };
  }
  return {
    epk: { state: epk.addresses.length === 0 || expected === "" ? "none" : "match", expected, found },
    problem: null,
  };
}

/** Control characters as dots, so that foreign bytes can be shown. */
function shown(text: string): string {
  return Array.from(text, (character) =>
    character < " " || (character >= "\u007f" && character < "\u00a0") ? "·" : character,
  ).join("");
}
