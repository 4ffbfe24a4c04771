import { type ReactNode, useId } from "react";
import { type HeadingLevel, SectionHeading } from "@/components/ui/layout/section-heading";
import { cn } from "@/lib/cn";

export interface CardProps {
  title?: ReactNode;
  level?: HeadingLevel;
  description?: ReactNode;
  actions?: ReactNode;
  /** `sheet`: white with a hairline. `well`: sunk ground, for a place where something is decided or dropped. */
  tone?: "sheet" | "well";
  /** The chosen one of several: plum left edge. */
  selected?: boolean;
  /** Without padding, for a table that runs to the edge. */
  flush?: boolean;
  id?: string;
  className?: string;
  children: ReactNode;
}

/** A sheet. With a title it is a named region. */
export function Card({
  title,
  level = 2,
  description,
  actions,
  tone = "sheet",
  selected,
  flush,
  id,
  className,
  children,
}: CardProps) {
  const headingId = useId();
  const Box = title ? "section" : "div";
  return (
    <Box
      id={id}
      data-sheet
      aria-labelledby={title ? headingId : undefined}
      className={cn(
        "relative min-w-0 rounded border border-line",
        tone === "sheet" ? "bg-surface" : "bg-sunk",
        selected && "before:absolute before:-inset-y-px before:-left-px before:w-[3px] before:bg-action",
        !flush && "p-4 md:p-5",
        className,
      )}
    >
      {title && (
        <SectionHeading
          id={headingId}
          level={level}
          description={description}
          actions={actions}
          className={cn("mb-3", flush && "px-4 pt-4 md:px-5")}
        >
          {title}
        </SectionHeading>
      )}
      {children}
    </Box>
  );
}
