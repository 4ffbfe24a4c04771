import type { ReactNode } from "react";
import { numberText } from "@/components/ui/data/number-text";
import { Card } from "@/components/ui/layout/card";
import { repeatabilityLimit } from "@/lib/compare/band/two-means";
import { type NullTestOutcome, nullTestOutcome } from "@/lib/compare/null-test";
import type { CampaignResult, RepeatabilityResult } from "@/lib/measure/types";

export interface NullTestCardProps {
  result: Pick<CampaignResult, "delta" | "repeatability" | "sides">;
  /** How the image is called, e.g. "R14". */
  image: string;
  /** Stands under the outcome, e.g. a link to the comparison. */
  more?: ReactNode;
}

const pct = (value: number, decimals = 2) => `${numberText(value, { decimals })} %`;

/** The scatter in words, with what two single pulls may differ by. */
function scatterSentence({ runs, df, sd_point_pct: sd }: RepeatabilityResult): string | null {
  if (sd === null || df < 1) return null;
  return `Between runs the torque at one engine speed scatters by ${pct(sd)} (standard deviation, n ${runs}, ${df} degrees of freedom), so two single pulls that differ by less than ${pct(repeatabilityLimit(sd, df))} show no change.`;
}

const TITLE: Record<NullTestOutcome["verdict"], string> = {
  "claims nothing": "Null test: claims nothing, as it must",
  "claims something": "Null test: the method fails here today",
  "too little": "Null test: too little to tell",
};

/** Where to look when one image differs from itself; common practice, no source. */
const TO_CHECK = [
  "Was every run driven on the letter and leg that the card says, twins complete before the letter changed?",
  "Did wind, tyre temperature, fuel level or oil temperature move in steps instead of drifting slowly?",
  "Does one run stand out? Look at its findings and trace; don't set it aside for its result alone.",
  "Was the image really the same, and did the control unit relearn after a write?",
];

/** What came of one image driven against itself. */
export function NullTestCard({ result, image, more }: NullTestCardProps) {
  const { verdict, regions, halfWidthPct } = nullTestOutcome(result.delta);
  const scatter = result.repeatability?.[0] ? scatterSentence(result.repeatability[0]) : null;
  const n = `n ${result.sides.A?.n ?? 0} and ${result.sides.B?.n ?? 0}`;
  return (
    <Card title={TITLE[verdict]} tone={verdict === "claims something" ? "well" : "sheet"}>
      <div className="flex max-w-prose flex-col gap-2 text-15">
        {verdict === "claims something" && (
          <>
            <p className="font-semibold">
              It claims{" "}
              {regions
                .map(
                  ({ verdict: claim, from_rpm, to_rpm }) =>
                    `a ${claim} at ${numberText(from_rpm)}–${numberText(to_rpm)} per minute`,
                )
                .join(" and ")}
              , though both sides are {image} ({n}). Don't rest a decision on what is driven this way until
              the cause is found.
            </p>
            <p>One null test in twenty does this by chance. Check, then drive it again:</p>
            <ul className="list-disc pl-5">
              {TO_CHECK.map((line) => (
                <li key={line}>{line}</li>
              ))}
            </ul>
          </>
        )}
        {verdict === "claims nothing" && halfWidthPct !== null && (
          <p>
            Both sides are {image}, and nowhere does the band exclude zero ({n}). The scatter of this method
            here is a band of ± {pct(halfWidthPct)} at a typical engine speed.
          </p>
        )}
        {verdict === "too little" && (
          <p>
            There is no band yet ({n} usable pulls), so nothing could have been claimed. Drive more twins.
          </p>
        )}
        {scatter && <p>{scatter}</p>}
        {more}
      </div>
    </Card>
  );
}
