import { scaleLinear } from "@visx/scale";
import type { LinearScale } from "@/components/charts/frame/axes";
import { extentOf, indexSpan, type Range } from "@/components/charts/frame/series";
import type { StackData, StackPanel } from "@/components/charts/stack/stack-types";

const LEFT = 52;
const SPAN_ROW = 22;
const TITLE_ROW = 24;
const PANEL_GAP = 14;
const AXIS_ROW = 50;

export interface PanelBox {
  panel: StackPanel;
  top: number;
  bottom: number;
  y: LinearScale;
}

export interface StackLayout {
  width: number;
  height: number;
  left: number;
  right: number;
  /** Top of the first panel's plot and bottom of the last one's. */
  top: number;
  bottom: number;
  x: LinearScale;
  boxes: PanelBox[];
  first: number;
  last: number;
  zoomed: boolean;
}

/** Panels one under the other on one x scale. */
export function stackLayout(data: StackData, range: Range | null, width: number): StackLayout {
  const labelled = data.panels.some((panel) => panel.lines.length > 1);
  const right = Math.max(LEFT + 120, width - (labelled ? 84 : 20));
  const all = { first: 0, last: Math.max(0, data.x.length - 1) };
  const span = (range && indexSpan(data.x, range)) ?? all;
  const panelHeight = data.panelHeight ?? 92;

  let at = data.spans?.length ? SPAN_ROW : 0;
  const boxes = data.panels.map((panel) => {
    const top = at + TITLE_ROW;
    const bottom = top + panelHeight;
    at = bottom + PANEL_GAP;
    return { panel, top, bottom, y: panelScale(panel, span.first, span.last, top, bottom) };
  });
  const bottom = boxes.at(-1)?.bottom ?? at;

  return {
    width,
    height: bottom + AXIS_ROW,
    left: LEFT,
    right,
    top: boxes[0]?.top ?? 0,
    bottom,
    x: scaleLinear<number>({
      domain: [data.x[span.first] ?? 0, data.x[span.last] ?? 1],
      range: [LEFT, right],
    }),
    boxes,
    ...span,
    zoomed: span.first !== all.first || span.last !== all.last,
  };
}

function panelScale(
  panel: StackPanel,
  first: number,
  last: number,
  top: number,
  bottom: number,
): LinearScale {
  const series = panel.lines.flatMap((line) => [line.values, line.low ?? [], line.high ?? []]);
  const [low, high] = extentOf(series, first, last) ?? [0, 1];
  const flat = high - low < 1e-9 ? Math.max(Math.abs(high) * 0.1, 1) : 0;
  const domain = panel.fromZero ? [Math.min(0, low), high + flat] : [low - flat, high + flat];
  return scaleLinear<number>({ domain, range: [bottom, top], nice: 4 });
}
