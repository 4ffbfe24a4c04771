import { CharacteristicCurve } from "@/components/charts/characteristic/characteristic-curve";
import { axisDigits, axisName, type ChangeGrid } from "@/components/features/change-sets/detail/change-grid";
import { curveView } from "@/components/features/change-sets/detail/curve-view";
import { PointTable } from "@/components/features/change-sets/detail/point-table";
import { spreadText } from "@/components/features/change-sets/words/change-words";
import { counted, numberText } from "@/components/ui/data/number-text";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import type { MapCoverage } from "@/lib/calibration/coverage/types";

export interface CurveChangeProps {
  change: CharacteristicChange;
  grid: ChangeGrid;
  coverage: MapCoverage | null;
  labels: { before: string; after: string };
}

/** What the drawing shows, in words. */
function describeCurve(change: CharacteristicChange, digits: number): string {
  if (change.kind !== "changed") return `${change.name} is known to one side only.`;
  const spread = spreadText(change, digits);
  const cells = `${numberText(change.changed)} of ${counted(change.cells, "point")} changed`;
  return spread ? `${cells}, by ${spread}.` : `${cells}.`;
}

/** A changed curve: both sides overlaid, the difference below, the values behind. Texts are listed instead. */
export function CurveChange({ change, grid, coverage, labels }: CurveChangeProps) {
  const table = <PointTable change={change} grid={grid} coverage={coverage} />;
  const view = curveView(change.before, change.after);
  if (!view) return table;
  const axis = grid.shape.axes[0];
  const notes = [
    ...(view.byPlace
      ? ["Axis points neither rise nor fall throughout: drawn over the places of the points."]
      : []),
    ...(change.axisChanged || change.shapeChanged
      ? ["Points moved. B − A compares the curves read straight between their points, held beyond the ends."]
      : []),
  ];
  return (
    <CharacteristicCurve
      title={change.text || change.name}
      unit={change.unit}
      decimals={grid.digits}
      axis={
        view.byPlace
          ? { name: "place", unit: "", decimals: 0 }
          : {
              name: axisName(grid.shape, 0),
              unit: axis?.unit ?? "",
              decimals: axisDigits(axis, change.before?.axes[0]),
            }
      }
      a={view.a}
      b={view.b}
      labelA={labels.before}
      labelB={labels.after}
      summary={describeCurve(change, grid.digits)}
      notes={notes}
      table={table}
    />
  );
}
