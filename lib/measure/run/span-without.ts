import type { Span } from "@/lib/measure/types";

/** The parts of a span that lie outside the others, in order of time. */
export function spanWithout(span: Span, others: readonly Span[]): Span[] {
  return others.reduce<Span[]>(
    (parts, other) =>
      parts
        .flatMap(({ from_s, to_s }) => [
          { from_s, to_s: Math.min(to_s, other.from_s) },
          { from_s: Math.max(from_s, other.to_s), to_s },
        ])
        .filter((part) => part.to_s > part.from_s),
    [span],
  );
}
