import type { ReactNode } from "react";
import { cn } from "@/lib/cn";

export interface StripValue {
  term: ReactNode;
  value: string;
  unit?: string;
  /** Small second line, e.g. the number of runs. */
  note?: string;
  /** Marker in front of the term, so that the strip explains the curves. */
  marker?: "a" | "b";
  emphasis?: boolean;
}

/** The values under the cursor, docked above the chart where they cover nothing. Its height never changes. */
export function ValueStrip({ values }: { values: readonly StripValue[] }) {
  return (
    <dl className="grid grid-cols-2 gap-x-6 gap-y-2 border-line border-y py-2 sm:flex sm:flex-wrap">
      {values.map((entry, index) => (
        <div
          // biome-ignore lint/suspicious/noArrayIndexKey: fixed order, terms may be nodes
          key={index}
          className={cn("min-w-20", index === 0 && "sm:min-w-28")}
        >
          <dt className="flex items-center gap-1.5 text-13 text-ink2 sm:whitespace-nowrap">
            {entry.marker && <SideMarker side={entry.marker} />}
            {entry.term}
          </dt>
          <dd className={cn("tabular whitespace-nowrap text-17", entry.emphasis && "font-semibold")}>
            {entry.value}
            {entry.unit && <span className="text-13 text-ink2">{`\u202f${entry.unit}`}</span>}
          </dd>
          {entry.note && <dd className="text-13 text-ink2 sm:whitespace-nowrap">{entry.note}</dd>}
        </div>
      ))}
    </dl>
  );
}

/** Line sample with its marker: A dashed and round, B solid and square. */
function SideMarker({ side }: { side: "a" | "b" }) {
  return (
    <svg aria-hidden="true" viewBox="0 0 26 12" className="h-3 w-6.5 shrink-0">
      {side === "a" ? (
        <>
          <path d="M0 6H26" className="series-a" />
          <circle cx="13" cy="6" r="3.5" className="marker-a" />
        </>
      ) : (
        <>
          <path d="M0 6H26" className="series-b" />
          <rect x="9.5" y="2.5" width="7" height="7" className="marker-b" />
        </>
      )}
    </svg>
  );
}
