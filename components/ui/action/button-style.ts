import { cn } from "@/lib/cn";

export type ButtonLook = "filled" | "outlined" | "quiet";
export type ButtonSize = "normal" | "roadside" | "compact";

const LOOK: Record<ButtonLook, string> = {
  filled:
    "border-action bg-action text-on-action hover:border-action-pressed hover:bg-action-pressed active:bg-action-pressed",
  outlined: "border-edge bg-surface text-ink hover:border-ink active:bg-sunk",
  quiet: "border-transparent bg-transparent text-action hover:bg-sunk active:bg-sunk",
};

// `normal` follows --control: 44 px at a desk, 56 px inside .roadside and in Daylight.
const SIZE: Record<ButtonSize, string> = {
  normal: "min-h-control px-4",
  roadside: "min-h-roadside px-5 text-17",
  compact: "min-h-9 px-3 text-13",
};

const BLOCKED =
  "cursor-not-allowed border-line bg-sunk text-ink2 hover:border-line hover:bg-sunk active:bg-sunk";

/** Class names shared by buttons and by links that look like buttons. */
export function buttonStyle(
  look: ButtonLook,
  size: ButtonSize,
  blocked: boolean,
  className?: string,
): string {
  return cn(
    "inline-flex select-none items-center justify-center gap-2 rounded border py-2 text-center font-semibold text-15 leading-tight no-underline transition-colors duration-100",
    "aria-pressed:border-action aria-pressed:shadow-[inset_0_-3px_0_var(--action)]",
    "disabled:cursor-not-allowed disabled:border-line disabled:bg-sunk disabled:text-ink2",
    LOOK[look],
    SIZE[size],
    blocked && BLOCKED,
    className,
  );
}
