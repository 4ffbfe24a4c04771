import { AxisBottom, AxisLeft } from "@visx/axis";
import type { scaleLinear } from "@visx/scale";
import { numberText } from "@/components/ui/data/number-text";

export type LinearScale = ReturnType<typeof scaleLinear<number>>;

/** Digits behind the point that tell neighbouring ticks apart. */
function tickDecimals(ticks: readonly number[]): number {
  const step = Math.abs((ticks[1] ?? 1) - (ticks[0] ?? 0));
  return step > 0 ? Math.max(0, -Math.floor(Math.log10(step) + 1e-9)) : 0;
}

export interface ValueAxisProps {
  scale: LinearScale;
  left: number;
  right: number;
  ticks: readonly number[];
  signed?: boolean;
  /** Ticks whose line is drawn by the panel itself, e.g. a heavy zero. */
  withoutLineAt?: number;
}

/** Ticks at the left with a hairline across the panel. The library's own text is not used: it needs `style` attributes. */
export function ValueAxis({ scale, left, right, ticks, signed, withoutLineAt }: ValueAxisProps) {
  const decimals = tickDecimals(ticks);
  return (
    <>
      {ticks
        .filter((tick) => tick !== withoutLineAt)
        .map((tick) => (
          <line key={tick} x1={left} x2={right} y1={scale(tick)} y2={scale(tick)} className="stroke-line" />
        ))}
      <AxisLeft
        scale={scale}
        left={left}
        tickValues={[...ticks]}
        tickFormat={(value) => numberText(Number(value), { decimals, signed })}
        hideAxisLine
        hideTicks
        tickLength={8}
        tickComponent={({ x, y, formattedValue }) => (
          <text x={x} y={y} dy="0.35em" textAnchor="end" className="chart-tick">
            {formattedValue}
          </text>
        )}
      />
    </>
  );
}

export interface BaseAxisProps {
  scale: LinearScale;
  top: number;
  ticks: readonly number[];
  /** Printed under the ticks, right-aligned with the plot: name and unit. */
  title: string;
  right: number;
}

/** Ticks and title under the lowest panel. */
export function BaseAxis({ scale, top, ticks, title, right }: BaseAxisProps) {
  const decimals = tickDecimals(ticks);
  return (
    <>
      <AxisBottom
        scale={scale}
        top={top}
        tickValues={[...ticks]}
        tickFormat={(value) => numberText(Number(value), { decimals })}
        axisLineClassName="stroke-edge"
        tickLength={5}
        tickLineProps={{ className: "stroke-edge" }}
        tickComponent={({ x, y, formattedValue }) => (
          <text x={x} y={y} dy="0.55em" textAnchor="middle" className="chart-tick">
            {formattedValue}
          </text>
        )}
      />
      <text x={right} y={top + 42} textAnchor="end" className="chart-title">
        {title}
      </text>
    </>
  );
}

/** Tick values at 1-2-5 steps, as many as fit at `spacing` px. */
export function fittingTicks(scale: LinearScale, lengthPx: number, spacing: number): number[] {
  return scale.ticks(Math.max(2, Math.floor(lengthPx / spacing)));
}
