import type { ReactNode } from "react";
import { cn } from "@/lib/cn";

export type HeadingLevel = 2 | 3 | 4;

export interface SectionHeadingProps {
  children: ReactNode;
  /** Default 2. The size follows the level: 20, 17, 15. */
  level?: HeadingLevel;
  /** Anchor for links into the page. */
  id?: string;
  description?: ReactNode;
  actions?: ReactNode;
  className?: string;
}

const SIZE: Record<HeadingLevel, string> = { 2: "text-20", 3: "text-17", 4: "text-15" };

/** Heading of a part of a page, with an optional line below and buttons at the right. */
export function SectionHeading({
  children,
  level = 2,
  id,
  description,
  actions,
  className,
}: SectionHeadingProps) {
  const Heading = `h${level}` as const;
  return (
    <div className={cn("flex flex-wrap items-end justify-between gap-x-4 gap-y-2", className)}>
      <div className="min-w-0">
        <Heading id={id} className={SIZE[level]}>
          {children}
        </Heading>
        {description && <p className="mt-0.5 max-w-prose text-15 text-ink2">{description}</p>}
      </div>
      {actions && <div className="no-print flex flex-wrap gap-2">{actions}</div>}
    </div>
  );
}
