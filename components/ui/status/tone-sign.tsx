import { Info, TriangleAlert } from "lucide-react";
import { cn } from "@/lib/cn";

/** `plain`: good to know. `caution`: read before going on. `problem`: something was refused or failed. */
export type Tone = "plain" | "caution" | "problem";

const COLOUR: Record<Tone, string> = { plain: "text-ink2", caution: "text-thin", problem: "text-unmet" };

/** The sign in front of a sentence of that tone; shapes differ, so that colour is not needed. */
export function ToneSign({ tone }: { tone: Tone }) {
  return (
    <span aria-hidden className={cn("mt-0.5 shrink-0", COLOUR[tone])}>
      {tone === "plain" && <Info size={18} />}
      {tone === "caution" && <TriangleAlert size={18} />}
      {tone === "problem" && <OctagonCross />}
    </span>
  );
}

function OctagonCross() {
  return (
    <svg aria-hidden="true" viewBox="0 0 20 20" className="size-[18px]">
      <path fill="currentColor" d="M6.27 1h7.46L19 6.27v7.46L13.73 19H6.27L1 13.73V6.27z" />
      <path className="stroke-surface" strokeWidth="2.4" d="m6.6 6.6 6.8 6.8m0-6.8-6.8 6.8" />
    </svg>
  );
}
