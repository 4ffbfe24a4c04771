import { z } from "zod";

interface Limits {
  min: number;
  max: number;
  /** Printed in the sentence of a refusal. */
  unit?: string;
  integer?: boolean;
}

const SPACES = /[\s\u00a0\u202f]/g;
const PLAIN = /^[+-]?\d+(\.\d+)?$/;

/** A typed number: point or comma as decimal mark, spaces between thousands, U+2212 or a hyphen as minus. NaN when it is none. */
export function readTypedNumber(text: string): number {
  const bare = text.replace(SPACES, "").replace("\u2212", "-");
  const pointed = /^[^.,]*,[^.,]*$/.test(bare) ? bare.replace(",", ".") : bare;
  return PLAIN.test(pointed) ? Number(pointed) : Number.NaN;
}

function check(limits: Limits, value: number): string | null {
  const unit = limits.unit ? ` ${limits.unit}` : "";
  if (!Number.isFinite(value))
    return "Write a number, e.g. 12.5. No thousands separators other than a space.";
  if (limits.integer && !Number.isInteger(value)) return "Write a whole number.";
  if (value < limits.min || value > limits.max)
    return `Must lie between ${limits.min} and ${limits.max}${unit}.`;
  return null;
}

const typed = z.union([z.string(), z.number()]);

/** A number of a form, given as text or as a number. Output: a number inside its limits. */
export function requiredNumber(limits: Limits) {
  return typed.transform((raw, context): number => {
    const empty = typeof raw === "string" && raw.trim() === "";
    const value = typeof raw === "string" ? readTypedNumber(raw) : raw;
    const problem = empty ? "Is missing." : check(limits, value);
    if (problem) context.addIssue({ code: "custom", message: problem });
    return value;
  });
}

/** As requiredNumber, but an empty text or null gives null: not known. */
export function optionalNumber(limits: Limits) {
  return typed.nullable().transform((raw, context): number | null => {
    if (raw === null || (typeof raw === "string" && raw.trim() === "")) return null;
    const value = typeof raw === "string" ? readTypedNumber(raw) : raw;
    const problem = check(limits, value);
    if (problem) context.addIssue({ code: "custom", message: problem });
    return value;
  });
}
