import { numberText } from "@/components/ui/data/number-text";
import { Card } from "@/components/ui/layout/card";
import { MOST_TWINS } from "@/lib/compare/plan/order-card";
import type { PlanView } from "@/lib/services/plans/schema";

const pct = (value: number) => `${numberText(value, { decimals: value < 10 ? 2 : 1 })} %`;

const twinsText = (twins: number) => (twins === 1 ? "1 twin a side" : `${twins} twins a side`);

/** One line of the answer with what the uncertainty of the scatter makes of it. */
function Needed({ what, twins, between }: { what: string; twins: number | null; between: string | null }) {
  return (
    <p>
      <strong className="text-17">
        {twins === null ? `More than ${twinsText(MOST_TWINS)}` : twinsText(twins)}
      </strong>{" "}
      {what}
      {between && <span className="text-ink2"> ({between})</span>}.
    </p>
  );
}

function betweenText(fewest: number | null, most: number | null): string {
  const low = fewest ?? MOST_TWINS + 1;
  if (most === null) return `at least ${low}: the scatter itself is known no better`;
  return low === most
    ? `${low} at either end of what the scatter can be`
    : `${low} to ${most}: the scatter itself is known no better`;
}

/** How many twins a side show the wanted difference, and what that rests on. */
export function PlanAnswer({
  view,
}: {
  view: Pick<PlanView, "query" | "basis" | "days" | "needed" | "neededBetween">;
}) {
  const { query, basis, days, needed, neededBetween: between } = view;
  const { range, point, places, smoothingPct } = basis;
  const unknown = range.df === null || point.df === null;
  return (
    <Card title={`To show ${pct(query.wantedPct)}`}>
      <div className="flex max-w-prose flex-col gap-2 text-15">
        <Needed
          what="as the mean over a range of about 1,000 per minute"
          twins={needed.range}
          between={between && betweenText(between.fewest.range, between.most.range)}
        />
        <Needed
          what="at one engine speed, by the band that holds the whole curve"
          twins={needed.curve}
          between={between && betweenText(between.fewest.curve, between.most.curve)}
        />
        <p>
          Each with a chance of 80 % when the difference is truly that large; a smaller number of twins can
          still show it by luck. Twins are complete (out and back) on one image before the image changes.
        </p>
        {unknown ? (
          <p className="text-thin">
            This programme has no road day with a result yet, so the scatter between runs is assumed:{" "}
            {pct(range.sdPct)} over a range, {pct(point.sdPct)} at one engine speed (common practice, no
            source). Drive a null test or a first comparison, then plan again.
          </p>
        ) : (
          <p className="text-ink2">
            Rests on the scatter between runs of {days === 1 ? "1 road day" : `${days} road days`}: standard
            deviation {pct(range.sdPct)} over a range ({range.df} degrees of freedom), {pct(point.sdPct)} at
            one engine speed ({point.df}). The band is as wide as {numberText(places.count, { decimals: 1 })}{" "}
            independent tests,{" "}
            {places.comparisons === 0
              ? "assumed from simulated campaigns"
              : `as in ${places.comparisons === 1 ? "1 past comparison" : `${places.comparisons} past comparisons`} (median)`}
            {smoothingPct === null
              ? "; what it allows for smoothing is not known from a past comparison and not counted"
              : `; ${pct(smoothingPct)} are added at one engine speed for what smoothing may round off`}
            .
          </p>
        )}
      </div>
    </Card>
  );
}
