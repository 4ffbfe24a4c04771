import type { ReactNode } from "react";
import { cn } from "@/lib/cn";

export interface DescriptionListProps {
  items: readonly { term: ReactNode; description: ReactNode }[];
  /** `rows`: term left, description right. `stacked`: term above, in as many columns as fit. */
  layout?: "rows" | "stacked";
  className?: string;
}

/** Terms and what they are: vehicle sheet, conditions, metadata. */
export function DescriptionList({ items, layout = "rows", className }: DescriptionListProps) {
  if (layout === "stacked") {
    return (
      <dl className={cn("grid grid-cols-[repeat(auto-fill,minmax(9rem,1fr))] gap-x-6 gap-y-3", className)}>
        {items.map((item, index) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: fixed order, terms may be nodes
          <div key={index}>
            <dt className="text-13 text-ink2">{item.term}</dt>
            <dd className="text-15">{item.description}</dd>
          </div>
        ))}
      </dl>
    );
  }
  return (
    <dl className={cn("text-15", className)}>
      {items.map((item, index) => (
        <div
          // biome-ignore lint/suspicious/noArrayIndexKey: fixed order, terms may be nodes
          key={index}
          className="grid grid-cols-[minmax(5rem,2fr)_minmax(0,3fr)] gap-x-4 border-line border-t py-2 first:border-t-0 first:pt-0 last:pb-0"
        >
          <dt className="text-ink2">{item.term}</dt>
          <dd className="min-w-0 break-words">{item.description}</dd>
        </div>
      ))}
    </dl>
  );
}
