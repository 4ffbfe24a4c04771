import { axisDigits, axisHead, isMovedAxis } from "@/components/features/change-sets/detail/change-grid";
import { structureText } from "@/components/features/change-sets/words/change-words";
import { valueText } from "@/components/features/change-sets/words/figure-text";
import { numberText } from "@/components/ui/data/number-text";
import { Notice } from "@/components/ui/status/notice";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import type { ReadAxis } from "@/lib/calibration/values/types";

/** Points of an axis that are printed at most. */
const MOST_POINTS = 64;

function pointsText({ points, unit }: ReadAxis, digits: number): string {
  const shown = points.slice(0, MOST_POINTS).map((point) => valueText(point, digits));
  const rest = points.length > MOST_POINTS ? ` … ${numberText(points.length)} points` : "";
  return `${shown.join(", ")}${rest}${unit ? ` ${unit}` : ""}`;
}

/** Says in words that shape or axes changed, and prints each axis that did on both sides. Nothing where none did. */
export function AxisChange({ change }: { change: CharacteristicChange }) {
  const sentence = structureText(change);
  const { before, after } = change;
  if (!sentence || !before || !after) return null;
  const moved = after.axes.flatMap((axis, i) => {
    const old = before.axes[i];
    return old && !isMovedAxis(axis, old)
      ? []
      : [{ head: axisHead(after, i), digits: axisDigits(axis, old), old, axis }];
  });
  return (
    <Notice tone="caution" title={sentence}>
      {moved.length > 0 && (
        <dl className="mt-1 flex flex-col gap-3">
          {moved.map(({ head, digits, old, axis }) => (
            <div key={head}>
              <dt className="font-medium text-15">
                {head}
                {axis.reference && (
                  <span className="font-normal text-ink2"> (shared axis {axis.reference})</span>
                )}
              </dt>
              <dd className="tabular text-13">before: {old ? pointsText(old, digits) : "no such axis"}</dd>
              <dd className="tabular text-13">after: {pointsText(axis, digits)}</dd>
            </div>
          ))}
        </dl>
      )}
    </Notice>
  );
}
