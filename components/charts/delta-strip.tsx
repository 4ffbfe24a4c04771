import { Area, LinePath } from "@visx/shape";
import type { Series } from "@/components/charts/frame/series";
import type { VerdictRegion } from "@/components/charts/overlay/overlay-types";
import { numberText } from "@/components/ui/data/number-text";

export interface DeltaStripProps {
  rpm: readonly number[];
  deltaPct: Series;
  lowPct: Series;
  highPct: Series;
  regions: readonly VerdictRegion[];
}

const WIDTH = 160;
const HEIGHT = 40;

/** B − A in the size of a line of text, for lists: band, difference, zero, and bars where the band leaves zero. */
export function DeltaStrip({ rpm, deltaPct, lowPct, highPct, regions }: DeltaStripProps) {
  const from = rpm[0] ?? 0;
  const to = rpm.at(-1) ?? 1;
  const size = (series: Series) => Math.max(0, ...series.map((value) => Math.abs(value ?? 0)));
  const limit = Math.max(1, 1.3 * size(deltaPct));
  const x = (value: number) => 1 + ((value - from) / (to - from || 1)) * (WIDTH - 2);
  const y = (value: number) =>
    HEIGHT / 2 - (Math.max(-limit, Math.min(limit, value)) / limit) * (HEIGHT / 2 - 3);
  const indices = rpm.map((_, index) => index);
  return (
    <svg
      role="img"
      aria-label={describeStrip(regions)}
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      width={WIDTH}
      height={HEIGHT}
      className="inline-block align-middle"
    >
      <Area<number>
        data={indices}
        x={(i) => x(rpm[i] ?? 0)}
        y0={(i) => y(lowPct[i] ?? 0)}
        y1={(i) => y(highPct[i] ?? 0)}
        defined={(i) => typeof lowPct[i] === "number" && typeof highPct[i] === "number"}
        fillOpacity="0.13"
        className="fill-delta"
      />
      <line x1="0" x2={WIDTH} y1={HEIGHT / 2} y2={HEIGHT / 2} className="stroke-ink" />
      {regions.map((region) => (
        <rect
          key={region.fromRpm}
          x={x(region.fromRpm)}
          y={region.verdict === "gain" ? HEIGHT / 2 - 4 : HEIGHT / 2}
          width={Math.max(3, x(region.toRpm) - x(region.fromRpm))}
          height="4"
          className="fill-ink"
        />
      ))}
      <LinePath<number>
        data={indices}
        x={(i) => x(rpm[i] ?? 0)}
        y={(i) => y(deltaPct[i] ?? 0)}
        defined={(i) => typeof deltaPct[i] === "number"}
        fill="none"
        className="series-delta"
      />
    </svg>
  );
}

/** The verdict in a few words, losses first: "A higher 5 300 to 5 900; B higher 2 800 to 3 900 per minute". */
function describeStrip(regions: readonly VerdictRegion[]): string {
  if (regions.length === 0) return "No difference outside the band";
  const words = [...regions]
    .sort((a, b) => Number(a.verdict === "gain") - Number(b.verdict === "gain") || a.fromRpm - b.fromRpm)
    .map(
      ({ verdict, fromRpm, toRpm }) =>
        `${verdict === "gain" ? "B" : "A"} higher ${numberText(fromRpm)} to ${numberText(toRpm)}`,
    );
  return `${words.join("; ")} per minute`;
}
