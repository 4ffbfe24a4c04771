import { cn } from "@/lib/cn";

/** Our mark: two hooked strokes, one running out to the right, one coming back to the left, interlocked without touching. */
function Mark({ className }: { className?: string }) {
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 32 32"
      fill="none"
      strokeWidth="3.8"
      className={cn("size-8", className)}
    >
      <path className="stroke-side-a" d="M2 7H19a6 6 0 0 1 0 12H13" />
      <path className="stroke-side-b" d="M30 25H13a6 6 0 0 1 0-12H19" />
    </svg>
  );
}

/** Mark and name. */
export function Wordmark() {
  return (
    <span className="inline-flex items-center gap-2.5">
      <Mark className="size-7" />
      <span className="font-bold font-head text-20 tracking-tight">Twinpass</span>
    </span>
  );
}
