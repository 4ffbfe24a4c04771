import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";
import { cn } from "@/lib/cn";

export interface QuantityProps {
  value: number | null;
  unit: string;
  /** Half-width of the interval, same unit. Sets the digits shown unless `decimals` is given. */
  halfWidth?: number | null;
  decimals?: number;
  /** Says "± not stated" where no half-width is known, so that no value stands bare. */
  orNotStated?: boolean;
  /** A difference: prints "+" too. */
  signed?: boolean;
  /** Number of runs behind the value; printed as "n 6". */
  n?: number;
  className?: string;
}

/** A value that never loses its unit, its ± or its n on the way, and never breaks across lines. */
export function Quantity({
  value,
  unit,
  halfWidth,
  decimals,
  orNotStated,
  signed,
  n,
  className,
}: QuantityProps) {
  const digits = decimals ?? decimalsForHalfWidth(halfWidth, 1);
  const hasHalfWidth = halfWidth !== null && halfWidth !== undefined && value !== null;
  return (
    <span className={cn("tabular whitespace-nowrap", className)}>
      {numberText(value, { decimals: digits, signed })}
      {hasHalfWidth && (
        <span className="text-ink2">
          {" ± "}
          {numberText(halfWidth, { decimals: digits })}
        </span>
      )}
      {unit && <span className="text-ink2">{`\u202f${unit}`}</span>}
      {orNotStated && !hasHalfWidth && value !== null && (
        <span className="text-13 text-ink2">{" (± not stated)"}</span>
      )}
      {n !== undefined && <span className="text-ink2">{` · n\u202f${n}`}</span>}
    </span>
  );
}
