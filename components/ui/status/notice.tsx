import { Info, TriangleAlert } from "lucide-react";
import type { ReactNode } from "react";
import { cn } from "@/lib/cn";

export interface NoticeProps {
  /** `plain`: good to know. `caution`: read before going on. `problem`: something was refused or failed. */
  tone?: "plain" | "caution" | "problem";
  title?: ReactNode;
  children?: ReactNode;
  actions?: ReactNode;
  /** Announced when it appears after an action. */
  live?: boolean;
  className?: string;
}

const EDGE = { plain: "before:bg-edge", caution: "before:bg-thin", problem: "before:bg-unmet" } as const;
const ICON = { plain: "text-ink2", caution: "text-thin", problem: "text-unmet" } as const;

/** A few sentences that stand out from the page without shouting. */
export function Notice({ tone = "plain", title, children, actions, live, className }: NoticeProps) {
  return (
    <div
      role={live ? (tone === "problem" ? "alert" : "status") : undefined}
      className={cn(
        "keep-together relative flex gap-3 rounded border border-line bg-surface py-3 pr-4 pl-4",
        "before:absolute before:-inset-y-px before:-left-px before:w-[3px]",
        EDGE[tone],
        className,
      )}
    >
      <span aria-hidden className={cn("mt-0.5 shrink-0", ICON[tone])}>
        {tone === "plain" && <Info size={18} />}
        {tone === "caution" && <TriangleAlert size={18} />}
        {tone === "problem" && <OctagonCross />}
      </span>
      <div className="flex min-w-0 flex-1 flex-col gap-1 text-15">
        {title && <p className="font-semibold">{title}</p>}
        {children && <div className="max-w-prose">{children}</div>}
        {actions && <div className="no-print mt-2 flex flex-wrap gap-2">{actions}</div>}
      </div>
    </div>
  );
}

function OctagonCross() {
  return (
    <svg aria-hidden="true" viewBox="0 0 20 20" className="size-[18px]">
      <path fill="currentColor" d="M6.27 1h7.46L19 6.27v7.46L13.73 19H6.27L1 13.73V6.27z" />
      <path className="stroke-surface" strokeWidth="2.4" d="m6.6 6.6 6.8 6.8m0-6.8-6.8 6.8" />
    </svg>
  );
}
