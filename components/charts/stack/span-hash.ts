import type { Range } from "@/components/charts/frame/series";

/** The part of an address that zooms the chart called `anchor` to a span, e.g. "#traces:3.1,3.62". */
export function spanHash(anchor: string, from: number, to: number): `#${string}` {
  return `#${anchor}:${from.toFixed(2)},${to.toFixed(2)}`;
}

/** The span that an address asks the chart `anchor` for, escaped or not; null when it asks nothing of it. */
export function readSpanHash(anchor: string, hash: string): Range | null {
  const match = /^#([\w-]+)(?::|%3a)(-?[\d.]+)(?:,|%2c)(-?[\d.]+)$/i.exec(hash);
  const [from, to] = [Number(match?.[2]), Number(match?.[3])];
  return match?.[1] === anchor && to >= from ? { from, to } : null;
}

/** A span with as much again to each side and at least a second, kept on the axis `xs`: what it looks like in its surroundings. */
export function withSurroundings({ from, to }: Range, xs: readonly number[]): Range {
  const margin = Math.max(1, to - from);
  return {
    from: Math.max(xs[0] ?? from, from - margin),
    to: Math.min(xs.at(-1) ?? to, to + margin),
  };
}
