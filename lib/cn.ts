import { type ClassValue, clsx } from "clsx";
import { extendTailwindMerge } from "tailwind-merge";

// Our type scale has numeric names; without this `text-13` would be taken for a colour and drop `text-ink2`.
const merge = extendTailwindMerge({
  extend: { theme: { text: ["13", "15", "17", "20", "26", "34"], font: ["head", "sans", "num"] } },
});

/** Joins class names, dropping falsy ones; of two utilities that set the same property the later wins. */
export function cn(...classes: ClassValue[]): string {
  return merge(clsx(classes));
}
