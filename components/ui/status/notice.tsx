import type { ReactNode } from "react";
import { type Tone, ToneSign } from "@/components/ui/status/tone-sign";
import { cn } from "@/lib/cn";

export interface NoticeProps {
  tone?: Tone;
  title?: ReactNode;
  children?: ReactNode;
  actions?: ReactNode;
  /** Announced when it appears after an action. */
  live?: boolean;
  className?: string;
}

const EDGE = { plain: "before:bg-edge", caution: "before:bg-thin", problem: "before:bg-unmet" } as const;

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
      <ToneSign tone={tone} />
      <div className="flex min-w-0 flex-1 flex-col gap-1 text-15">
        {title && <p className="font-semibold">{title}</p>}
        {children && <div className="max-w-prose">{children}</div>}
        {actions && <div className="no-print mt-2 flex flex-wrap gap-2">{actions}</div>}
      </div>
    </div>
  );
}
