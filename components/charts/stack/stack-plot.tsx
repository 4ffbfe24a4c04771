import { Area, LinePath } from "@visx/shape";
import { memo } from "react";
import { BaseAxis, fittingTicks, type LinearScale, ValueAxis } from "@/components/charts/frame/axes";
import { FillDefs, type FillIds } from "@/components/charts/frame/fills";
import { shiftLabels } from "@/components/charts/frame/label-shift";
import { thinIndices } from "@/components/charts/frame/thin";
import type { PanelBox, StackLayout } from "@/components/charts/stack/stack-layout";
import type { StackData, StackLine, StackMask } from "@/components/charts/stack/stack-types";

const LINE_CLASS: Record<StackLine["kind"], string> = {
  a: "series-a overprint",
  b: "series-b",
  one: "series-one",
};

export interface StackPlotProps {
  data: StackData;
  layout: StackLayout;
  fills: FillIds;
  clipId: string;
}

/** Everything that stays still while the cursor moves. */
export const StackPlot = memo(function StackPlot({ data, layout, fills, clipId }: StackPlotProps) {
  const { x, left, right, boxes, bottom, top } = layout;
  // Occasions and engine speeds are whole: no tick stands between two of them.
  const baseTicks = fittingTicks(x, right - left, 96).filter(
    (tick) => data.axis.decimals > 0 || Number.isInteger(tick),
  );
  const within = (value: number) => Math.min(right, Math.max(left, x(value)));
  const visible = <T extends { from: number; to: number }>(spans: readonly T[] = []) =>
    spans.filter((span) => within(span.to) > within(span.from));
  return (
    <>
      <FillDefs ids={fills} />
      {visible(data.spans).map((span) => (
        <g key={`${span.label}${span.from}`}>
          <rect
            x={within(span.from)}
            y={top - 20}
            width={within(span.to) - within(span.from)}
            height={bottom - top + 20}
            fillOpacity="0.06"
            className="fill-ink"
          />
          <line x1={within(span.from)} x2={within(span.from)} y1={4} y2={bottom} className="stroke-edge" />
          <text x={within(span.from) + 5} y={15} className="chart-label">
            {span.label}
          </text>
        </g>
      ))}
      {boxes.map((box, index) => (
        <Panel key={box.panel.id} data={data} layout={layout} box={box} clip={`${clipId}${index}`} />
      ))}
      {visible(data.masks).map((mask) => (
        <Mask
          key={`${mask.kind}${mask.why}${mask.from}`}
          mask={mask}
          x={within(mask.from)}
          width={Math.max(2, within(mask.to) - within(mask.from))}
          layout={layout}
          fills={fills}
        />
      ))}
      <BaseAxis scale={x} top={bottom} ticks={baseTicks} title={data.axis.title} right={right} />
    </>
  );
});

interface MaskProps {
  mask: StackMask;
  x: number;
  width: number;
  layout: StackLayout;
  fills: FillIds;
}

/** Height of the strip that marks what was only warned of, px: it covers no curve. */
const NOTED_HEIGHT = 6;

function Mask({ mask, x, width, layout: { boxes, top, bottom }, fills }: MaskProps) {
  if (mask.kind === "masked") {
    return (
      <rect x={x} y={top} width={width} height={bottom - top} fill={`url(#${fills.masked})`}>
        <title>{`left out: ${mask.why}`}</title>
      </rect>
    );
  }
  return (
    <g>
      <title>{`warned: ${mask.why}`}</title>
      {boxes.map((box) => (
        <rect
          key={box.panel.id}
          x={x}
          y={box.top - 3}
          width={width}
          height={NOTED_HEIGHT}
          fill={`url(#${fills.noted})`}
        />
      ))}
    </g>
  );
}

interface PanelProps {
  data: StackData;
  layout: StackLayout;
  box: PanelBox;
  clip: string;
}

function Panel({ data, layout, box, clip }: PanelProps) {
  const { x, left, right, first, last } = layout;
  const { panel, top, bottom, y } = box;
  const xs = data.x.slice(first, last + 1);
  const columns = Math.max(1, Math.round(right - left));
  const drawn = panel.lines.map((line) => ({
    line,
    indices: thinIndices(xs, line.values.slice(first, last + 1), columns).map((i) => i + first),
  }));
  const several = panel.lines.length > 1;
  const ends = panel.lines.map((line) => y(lastValue(line, last) ?? 0));
  const labelYs = shiftLabels(ends, 18, top, bottom);

  return (
    <>
      <clipPath id={clip}>
        <rect x={left} y={top - 4} width={right - left} height={bottom - top + 8} />
      </clipPath>
      <text x={left} y={top - 8} className="chart-title">
        {panel.label}
        {panel.unit && `, ${panel.unit}`}
      </text>
      <ValueAxis scale={y} left={left} right={right} ticks={fittingTicks(y, bottom - top, 34)} />
      <g clipPath={`url(#${clip})`}>
        {drawn.map(({ line, indices }) => (
          <g key={`${line.kind}${line.label ?? ""}`}>
            {line.low && line.high && <LineBand line={line} indices={indices} xs={data.x} x={x} y={y} />}
            <LinePath<number>
              data={indices}
              x={(i) => x(data.x[i] ?? 0)}
              y={(i) => y(line.values[i] ?? 0)}
              defined={(i) => typeof line.values[i] === "number"}
              fill="none"
              strokeLinejoin="round"
              className={LINE_CLASS[line.kind]}
            />
          </g>
        ))}
      </g>
      {several &&
        panel.lines.map((line, i) => (
          <text key={line.label} x={right + 12} y={labelYs[i]} dy="0.35em" className="chart-label">
            {line.label}
          </text>
        ))}
    </>
  );
}

interface LineBandProps {
  line: StackLine;
  indices: readonly number[];
  xs: readonly number[];
  x: LinearScale;
  y: LinearScale;
}

function LineBand({ line, indices, xs, x, y }: LineBandProps) {
  return (
    <Area<number>
      data={[...indices]}
      x={(i) => x(xs[i] ?? 0)}
      y0={(i) => y(line.low?.[i] ?? 0)}
      y1={(i) => y(line.high?.[i] ?? 0)}
      defined={(i) => typeof line.low?.[i] === "number" && typeof line.high?.[i] === "number"}
      fillOpacity="0.12"
      className="fill-delta"
    />
  );
}

function lastValue(line: StackLine, last: number): number | null {
  for (let i = last; i >= 0; i -= 1) {
    const value = line.values[i];
    if (typeof value === "number") return value;
  }
  return null;
}
