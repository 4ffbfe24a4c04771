import type { ReactNode } from "react";

export interface ProgressProps {
  label: ReactNode;
  /** 0 to `max`; absent: under way, end unknown. */
  value?: number;
  max?: number;
  /** At the right, e.g. "42 % · 1.2 MB/s · 8 s left". */
  detail?: ReactNode;
}

/** How far something is. The bar is the platform's own element, so it needs neither script nor style attributes. */
export function Progress({ label, value, max = 1, detail }: ProgressProps) {
  return (
    <label className="flex flex-col gap-1 text-15">
      <span className="flex flex-wrap justify-between gap-x-3">
        <span>{label}</span>
        {detail && <span className="tabular text-13 text-ink2">{detail}</span>}
      </span>
      <progress value={value} max={max} className="progress-bar" />
    </label>
  );
}
