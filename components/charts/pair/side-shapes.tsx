import { LinePath } from "@visx/shape";
import type { LinearScale } from "@/components/charts/frame/axes";
import type { Series } from "@/components/charts/frame/series";

export interface CurveLineProps {
  /** Places of the grid that are drawn. */
  indices: readonly number[];
  xs: readonly number[];
  values: Series;
  x: LinearScale;
  y: LinearScale;
  className: string;
}

/** One curve; a gap in the values is a gap in the line. */
export function CurveLine({ indices, xs, values, x, y, className }: CurveLineProps) {
  return (
    <LinePath<number>
      data={[...indices]}
      x={(i) => x(xs[i] ?? 0)}
      y={(i) => y(values[i] ?? 0)}
      defined={(i) => typeof values[i] === "number"}
      fill="none"
      strokeLinejoin="round"
      className={className}
    />
  );
}

/** Round for A, square for B: they tell the curves apart in grey and in glare too. */
export function SideMarker({ side, cx, cy }: { side: "a" | "b"; cx: number; cy: number }) {
  return side === "a" ? (
    <circle cx={cx} cy={cy} r="3.5" className="marker-a" />
  ) : (
    <rect x={cx - 3.2} y={cy - 3.2} width="6.4" height="6.4" className="marker-b" />
  );
}

export interface EndLabelProps {
  /** Right end of the plot, px. */
  x: number;
  /** Where the label stands, and where its curve ends, px. */
  y: number;
  from: number;
  text: string;
}

/** The name of a curve at its right end, with a hairline to it when the label had to move. */
export function EndLabel({ x, y, from, text }: EndLabelProps) {
  return (
    <>
      <path d={`M${x + 1} ${from}L${x + 9} ${y}`} fill="none" className="stroke-edge" />
      <text x={x + 12} y={y} dy="0.35em" className="chart-label">
        {text}
      </text>
    </>
  );
}

export interface CursorMarksProps {
  /** Place on the x axis, and ends of the line, px. */
  at: number;
  top: number;
  bottom: number;
  a: number | null | undefined;
  b: number | null | undefined;
  delta: number | null | undefined;
  scales: { curves: LinearScale; delta: LinearScale };
}

/** Line through both panels with a marker on each curve that has a value there. */
export function CursorMarks({ at, top, bottom, a, b, delta, scales }: CursorMarksProps) {
  return (
    <g>
      <line x1={at} x2={at} y1={top} y2={bottom} className="stroke-ink" />
      {typeof a === "number" && <circle cx={at} cy={scales.curves(a)} r="5" className="marker-a" />}
      {typeof b === "number" && (
        <rect x={at - 4.5} y={scales.curves(b) - 4.5} width="9" height="9" className="marker-b" />
      )}
      {typeof delta === "number" && (
        <path
          d={`M${at} ${scales.delta(delta) - 5.5}l5.5 5.5l-5.5 5.5l-5.5 -5.5z`}
          strokeWidth="2"
          className="fill-surface stroke-delta"
        />
      )}
    </g>
  );
}
