import type { ReactNode } from "react";
import { cn } from "@/lib/cn";

export interface TagProps {
  children: ReactNode;
  /** `strong` has an ink border, for the one that counts. */
  tone?: "plain" | "strong" | "action";
  className?: string;
}

const TONE = {
  plain: "border-edge text-ink2",
  strong: "border-ink text-ink font-semibold",
  action: "border-action text-action font-semibold",
} as const;

/** A short outlined label in the numeral face: a number, a code, a state. */
export function Tag({ children, tone = "plain", className }: TagProps) {
  return (
    <span
      className={cn(
        "tabular inline-flex items-center whitespace-nowrap rounded border bg-surface px-1.5 py-0.5 text-13 leading-none",
        TONE[tone],
        className,
      )}
    >
      {children}
    </span>
  );
}
