import { boundTable } from "@/components/features/change-sets/detail/bound-table";
import { changeGrid } from "@/components/features/change-sets/detail/change-grid";
import { CurveChange } from "@/components/features/change-sets/detail/curve-change";
import type { ShownSide } from "@/components/features/change-sets/detail/heat-view";
import { MapChange } from "@/components/features/change-sets/detail/map-change";
import { PointTable } from "@/components/features/change-sets/detail/point-table";
import { TextChange, ValueChange } from "@/components/features/change-sets/detail/value-change";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import type { MapCoverage } from "@/lib/calibration/coverage/types";

export interface ChangeFigureProps {
  change: CharacteristicChange;
  coverage: MapCoverage | null;
  labels: { before: string; after: string };
  view: { side: ShownSide; plane: readonly number[] | null };
}

/** A change as its kind is best seen: values, a text, curves overlaid, or a heat table. */
export function ChangeFigure({ change, coverage, labels, view }: ChangeFigureProps) {
  if (change.type === "ASCII") return <TextChange change={change} />;
  const grid = changeGrid(change);
  if (!grid) return null;
  const axes = Math.max(change.before?.dims.length ?? 0, change.after?.dims.length ?? 0);
  if (axes === 0) return <ValueChange change={change} />;
  if (axes === 1) {
    const parts = { change, grid, coverage };
    return change.type === "CURVE" ? <CurveChange {...parts} labels={labels} /> : <PointTable {...parts} />;
  }
  const bound = boundTable(change, coverage);
  const further = ((bound.change.after ?? bound.change.before)?.dims ?? []).slice(2);
  const fits =
    view.plane?.length === further.length && further.every((count, i) => (view.plane?.[i] ?? count) < count);
  return (
    <MapChange key={change.name} {...bound} initial={{ side: view.side, plane: fits ? view.plane : null }} />
  );
}
