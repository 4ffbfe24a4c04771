import { readDescription } from "@/lib/calibration/a2l/read-description";
import { DESCRIPTION_REFUSALS, type Description } from "@/lib/calibration/a2l/types";
import { FileRefusedError } from "@/lib/errors";

/** What is wrong with a description that was read; null when nothing is. */
function faultOf(description: Description, bytes: Uint8Array): string | null {
  if (description.modules.length === 0) return "no module";
  if (description.notes.length > 1001 || description.notRead.length > 1000) return "too much is listed";
  for (const { message } of description.notes)
    if (message.length > 400) return "a note of too many characters";
  for (const module of description.modules) {
    for (const [key, { name, address, axes, line }] of module.characteristics) {
      if (key !== name) return `${key} is kept as ${name}`;
      if (!Number.isSafeInteger(address) || address < 0) return `address ${address}`;
      if (!(line >= 1 && line <= bytes.length + 1)) return `line ${line}`;
      for (const { fixedRaw } of axes)
        if (fixedRaw && !fixedRaw.every(Number.isFinite))
          return `${name} has a fixed axis that is not finite`;
    }
    for (const { components } of module.layouts.values())
      if (components.some(({ position }, i) => i > 0 && position < components[i - 1].position))
        return "components out of order";
  }
  return null;
}

/** Reads bytes as a description that may include itself and another. `read` or the code of the refusal; a fault is thrown. */
export function judgeDescription(bytes: Uint8Array, other: Uint8Array): string {
  let description: Description;
  try {
    description = readDescription([
      { name: "main.a2l", bytes },
      { name: "part.a2l", bytes: other },
    ]);
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    if (!(DESCRIPTION_REFUSALS as readonly string[]).includes(error.code))
      throw new Error(`refused with unlisted code ${error.code}`);
    if (error.message.length > 1000) throw new Error(`refused in ${error.message.length} characters`);
    return error.code;
  }
  const fault = faultOf(description, bytes);
  if (fault) throw new Error(fault);
  return "read";
}
