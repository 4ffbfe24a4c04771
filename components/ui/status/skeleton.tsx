import { cn } from "@/lib/cn";

/** Holds the place of something that is being loaded; give it the size of what comes. Pair with a `role="status"` text once a page. */
export function Skeleton({ className }: { className?: string }) {
  return <div aria-hidden className={cn("animate-pulse rounded bg-sunk", className)} />;
}
