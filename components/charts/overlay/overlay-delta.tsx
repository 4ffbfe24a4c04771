import { fittingTicks, ValueAxis } from "@/components/charts/frame/axes";
import { indexSpan } from "@/components/charts/frame/series";
import { BandArea, type OverlayPlotProps } from "@/components/charts/overlay/curve-shapes";
import { OVERLAY_BOX } from "@/components/charts/overlay/overlay-layout";
import { CurveLine } from "@/components/charts/pair/side-shapes";
import { numberText } from "@/components/ui/data/number-text";

/** The lower panel: B − A with its band, the zero line darkest, the proven stretches marked on it. */
export function OverlayDelta({ data, delta, layout, fills, clipId }: OverlayPlotProps) {
  const { x, delta: y, right, first, last } = layout;
  const { left, deltaTop, deltaBottom } = OVERLAY_BOX;
  const zero = y(0);
  const indices = Array.from({ length: last - first + 1 }, (_, i) => first + i);
  const hasBand = delta.low.some((value) => value !== null);
  const clip = `${clipId}delta`;
  const band = `${numberText(data.level * 100)} % band`;
  const held = layout.width < 480 ? "" : data.simultaneous ? " of the whole curve" : " of each point";
  const title = `B \u2212 A, ${delta.unit}${hasBand ? `, with the ${band}${held}` : ""}`;
  const worthwhile =
    delta.unit === "%" && data.worthwhilePct ? [data.worthwhilePct, -data.worthwhilePct] : [];

  return (
    <>
      <clipPath id={clip}>
        <rect x={left} y={deltaTop} width={right - left} height={deltaBottom - deltaTop} />
      </clipPath>
      <text x={left} y={deltaTop - 14} className="chart-title">
        {title}
      </text>
      <ValueAxis
        scale={y}
        left={left}
        right={right}
        ticks={fittingTicks(y, deltaBottom - deltaTop, 30)}
        signed
        withoutLineAt={0}
      />
      <g clipPath={`url(#${clip})`}>
        <BandArea indices={indices} xs={data.rpm} low={delta.low} high={delta.high} x={x} y={y} />
        {worthwhile.map((value) => (
          <line
            key={value}
            x1={left}
            x2={right}
            y1={y(value)}
            y2={y(value)}
            strokeDasharray="2 4"
            className="stroke-ink2"
          />
        ))}
        {data.regions.map((region) => {
          const span = indexSpan(data.rpm, { from: region.fromRpm, to: region.toRpm });
          const path = span && fillPath(data.rpm, delta.values, span.first, span.last, x, y);
          return (
            path && (
              <path
                key={region.fromRpm}
                d={path}
                fill={`url(#${region.verdict === "gain" ? fills.hatch : fills.dots})`}
                className="print-exact"
              />
            )
          );
        })}
      </g>
      <line x1={left} x2={right} y1={zero} y2={zero} strokeWidth="1.5" className="stroke-ink" />
      <g clipPath={`url(#${clip})`}>
        {data.regions.map((region) => {
          const from = x(region.fromRpm);
          const width = Math.max(4, x(region.toRpm) - from);
          const top = region.verdict === "gain" ? zero - 6 : zero;
          return <rect key={region.fromRpm} x={from} y={top} width={width} height="6" className="fill-ink" />;
        })}
        <CurveLine
          indices={indices}
          xs={data.rpm}
          values={delta.values}
          x={x}
          y={y}
          className="series-delta"
        />
      </g>
      <text x={right + 12} y={deltaTop + 14} className="chart-label">
        B higher
      </text>
      <text x={right + 12} y={deltaBottom - 6} className="chart-label">
        A higher
      </text>
    </>
  );
}

/** Outline between the difference and zero from grid point `first` to `last`; empty when all is gap. */
function fillPath(
  rpm: readonly number[],
  values: readonly (number | null)[],
  first: number,
  last: number,
  x: (value: number) => number,
  y: (value: number) => number,
): string {
  const points: string[] = [];
  for (let i = first; i <= last; i += 1) {
    const value = values[i];
    const at = rpm[i];
    if (value !== null && value !== undefined && at !== undefined) {
      points.push(`${round(x(at))} ${round(y(value))}`);
    }
  }
  const from = rpm[first];
  const to = rpm[last];
  if (points.length === 0 || from === undefined || to === undefined) return "";
  return `M${round(x(from))} ${round(y(0))}L${points.join("L")}L${round(x(to))} ${round(y(0))}Z`;
}

function round(value: number): number {
  return Math.round(value * 100) / 100;
}
