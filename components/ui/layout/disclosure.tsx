import { ChevronRight } from "lucide-react";
import type { ComponentProps, ReactNode } from "react";
import { cn } from "@/lib/cn";

export interface DisclosureProps extends Omit<ComponentProps<"details">, "title"> {
  summary: ReactNode;
  /** Small text at the right of the summary, e.g. a count. */
  aside?: ReactNode;
}

/** More on demand; opens without script and is found by the browser's search where that is supported. */
export function Disclosure({ summary, aside, className, children, ...rest }: DisclosureProps) {
  return (
    <details {...rest} className={cn("group/disclosure", className)}>
      <summary className="flex min-h-control list-none items-center gap-2 rounded font-semibold text-15 hover:text-action [&::-webkit-details-marker]:hidden">
        <ChevronRight
          aria-hidden
          size={18}
          className="shrink-0 text-ink2 transition-transform duration-100 group-open/disclosure:rotate-90"
        />
        <span className="min-w-0">{summary}</span>
        {aside && <span className="ml-auto font-normal text-13 text-ink2">{aside}</span>}
      </summary>
      <div className="pt-1 pb-2">{children}</div>
    </details>
  );
}
