import { ChevronDown } from "lucide-react";
import type { ReactNode } from "react";
import { MenuBehaviour } from "@/components/ui/action/menu-behaviour";
import { cn } from "@/lib/cn";

export interface MenuProps {
  /** What the closed menu shows. */
  label: ReactNode;
  /** Name for assistive technology when `label` alone does not say it. */
  name?: string;
  /** Which edge of the label the panel keeps to; `fit`: the right one, but on a phone the width of the box around. */
  align?: "left" | "right" | "fit";
  /** With a border, to stand among buttons. */
  framed?: boolean;
  /** Links, buttons or small forms, one under the other. */
  children: ReactNode;
}

const PANEL = { left: "left-0", right: "right-0", fit: "inset-x-4 sm:right-0 sm:left-auto" } as const;

/** A small panel that opens under its label. Opens without script; Escape, a click outside, leaving by Tab or going somewhere close it. */
export function Menu({ label, name, align = "right", framed = false, children }: MenuProps) {
  return (
    <details className={cn("group", align === "fit" ? "sm:relative" : "relative")}>
      <summary
        aria-label={name}
        className={cn(
          "flex min-h-control list-none items-center gap-1 rounded px-2 text-15 hover:bg-sunk [&::-webkit-details-marker]:hidden",
          framed && "border border-edge bg-surface px-3 font-semibold hover:border-ink hover:bg-surface",
        )}
      >
        {label}
        <ChevronDown aria-hidden size={16} className="shrink-0 text-ink2 group-open:rotate-180" />
      </summary>
      <div
        className={cn(
          align === "fit" ? "sm:w-max" : "w-max",
          "absolute z-30 mt-1 flex min-w-48 max-w-[calc(100vw-2rem)] flex-col rounded border border-edge bg-surface p-1 text-15",
          PANEL[align],
        )}
      >
        {children}
      </div>
      <MenuBehaviour />
    </details>
  );
}

/** Class names for one entry of a menu, be it a link or a button. */
export const menuEntry =
  "flex min-h-control w-full items-center gap-2 rounded px-3 py-2 text-left text-15 text-ink no-underline hover:bg-sunk aria-[current]:font-semibold";
