import { z } from "zod";
import { readTypedNumber } from "@/lib/format/typed-number";

interface Limits {
  min: number;
  max: number;
  /** Printed in the sentence of a refusal. */
  unit?: string;
  integer?: boolean;
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
