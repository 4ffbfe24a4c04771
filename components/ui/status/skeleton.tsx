import { cn } from "@/lib/cn";

/** Holds the place of something that is being loaded; give it the size of what comes. Pair with a `role="status"` text once a page. */
export function Skeleton({ className }: { className?: string }) {
  return <div aria-hidden className={cn("animate-pulse rounded bg-sunk", className)} />;
}

/** Lines of text to come. */
export function SkeletonText({ lines = 3 }: { lines?: 1 | 2 | 3 | 4 | 5 }) {
  const widths = ["w-full", "w-11/12", "w-full", "w-10/12", "w-8/12"];
  return (
    <div aria-hidden className="flex flex-col gap-2">
      {widths.slice(0, lines).map((width, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a fixed list without identity
        <Skeleton key={index} className={cn("h-4", index === lines - 1 ? "w-7/12" : width)} />
      ))}
    </div>
  );
}
