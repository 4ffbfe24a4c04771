"use client";

import { useMemo, useState } from "react";
import { HeatTable } from "@/components/charts/heat/heat-table";
import { axisHead, changeGrid, pointAt } from "@/components/features/change-sets/detail/change-grid";
import { heatView, type ShownSide } from "@/components/features/change-sets/detail/heat-view";
import { rememberInAddress } from "@/components/features/change-sets/detail/remember-in-address";
import { LIMIT_MARKS } from "@/components/features/change-sets/words/change-words";
import { valueText } from "@/components/features/change-sets/words/figure-text";
import { Button } from "@/components/ui/action/button";
import { SegmentedControl } from "@/components/ui/action/segmented-control";
import { counted } from "@/components/ui/data/number-text";
import { Select } from "@/components/ui/form/select";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import type { MapCoverage } from "@/lib/calibration/coverage/types";
import { AXIS_NAMES } from "@/lib/calibration/values/cells";

export interface MapChangeProps {
  change: CharacteristicChange;
  coverage: MapCoverage | null;
  /** What of a giant table is not drawn, in words. */
  leftOut: string | null;
  /** What a link asked for. */
  initial: { side: ShownSide; plane: readonly number[] | null };
}

const SIDES: readonly { value: ShownSide; label: string }[] = [
  { value: "difference", label: "Difference" },
  { value: "before", label: "Before" },
  { value: "after", label: "After" },
];

/** A changed table of two or more axes as a heat table; with more than two, one plane at a time. */
export function MapChange({ change, coverage, leftOut, initial }: MapChangeProps) {
  const grid = useMemo(() => changeGrid(change), [change]);
  const [side, setSide] = useState<ShownSide>(initial.side);
  const [plane, setPlane] = useState<readonly number[]>(initial.plane ?? largestPlane(change));
  const [withVisits, setWithVisits] = useState(false);
  if (!grid) return null;
  const possible = SIDES.filter(
    ({ value }) =>
      (value === "difference" && grid.isComparable) ||
      (value === "before" && change.before) ||
      (value === "after" && change.after),
  );
  const shown = possible.some(({ value }) => value === side) ? side : (possible.at(-1)?.value ?? "after");
  const fits = coverage && coverage.dims.join() === grid.shape.dims.join() ? coverage : null;
  const view = heatView(change, grid, { side: shown, plane, coverage: fits, withVisits });
  return (
    <div className="flex flex-col gap-3">
      <div className="no-print flex flex-wrap items-end gap-3">
        {possible.length > 1 && (
          <SegmentedControl
            legend="Numbers in the cells"
            options={possible}
            value={shown}
            onChange={(value) => {
              setSide(value);
              rememberInAddress({ show: value });
            }}
          />
        )}
        {fits && (
          <Button aria-pressed={withVisits} onClick={() => setWithVisits(!withVisits)}>
            Time and visits
          </Button>
        )}
        <PlaneChooser
          change={change}
          plane={plane}
          onPlane={(value) => {
            setPlane(value);
            rememberInAddress({ plane: value.join("-") });
          }}
        />
      </div>
      <HeatTable caption={caption(change, shown)} x={view.x} y={view.y} cells={view.cells} />
      {leftOut && <p className="text-13 text-ink2">{leftOut}</p>}
      <Legend
        change={change}
        isComparable={grid.isComparable}
        hasNever={Boolean(fits?.changedNeverVisited.length)}
      />
    </div>
  );
}

function caption({ name, unit }: CharacteristicChange, side: ShownSide): string {
  const what = { difference: "after − before", before: "before", after: "after" }[side];
  return `${name}, ${what}${unit ? `, in ${unit}` : ""}`;
}

/** The plane with the most changed cells: what is opened first. */
function largestPlane(change: CharacteristicChange): number[] {
  const counts = new Map<string, number>();
  for (const { index } of change.changes) {
    const key = index.slice(2).join("-");
    counts.set(key, (counts.get(key) ?? 0) + 1);
  }
  const [most] = [...counts].sort((p, q) => q[1] - p[1]);
  if (most) return most[0] === "" ? [] : most[0].split("-").map(Number);
  return ((change.after ?? change.before)?.dims ?? []).slice(2).map(() => 0);
}

interface PlaneChooserProps {
  change: CharacteristicChange;
  plane: readonly number[];
  onPlane: (plane: number[]) => void;
}

/** One list a further axis; each plane says how many of its cells changed. */
function PlaneChooser({ change, plane, onPlane }: PlaneChooserProps) {
  const side = change.after ?? change.before;
  if (!side || plane.length === 0) return null;
  return plane.map((at, further) => {
    const axis = further + 2;
    // A matrix may be written with a last dimension of one: there is nothing to choose.
    if (side.dims[axis] === 1) return null;
    const described = side.axes[axis];
    const changedAt = (index: number) =>
      change.changes.filter(
        (cell) =>
          cell.index[axis] === index &&
          plane.every((other, i) => i === further || cell.index[i + 2] === other),
      ).length;
    return (
      <Select
        key={AXIS_NAMES[axis]}
        label={axisHead(side, axis)}
        value={String(at)}
        onChange={(event) =>
          onPlane(plane.map((other, i) => (i === further ? Number(event.target.value) : other)))
        }
        options={Array.from({ length: side.dims[axis] ?? 1 }, (_, index) => ({
          value: String(index),
          label: `${valueText(pointAt(described, index), described?.decimals ?? 0)}: ${counted(changedAt(index), "cell")} changed`,
        }))}
        fieldClassName="min-w-52"
      />
    );
  });
}

function Legend({
  change,
  isComparable,
  hasNever,
}: {
  change: CharacteristicChange;
  isComparable: boolean;
  hasNever: boolean;
}) {
  const states = new Set(change.changes.map((cell) => cell.limit));
  const marks = (["below", "above", "extended"] as const).flatMap((state) => {
    const mark = states.has(state) && LIMIT_MARKS[state];
    return mark ? [`${mark.glyph} ${mark.words}.`] : [];
  });
  return (
    <p className="max-w-prose text-13 text-ink2">
      {isComparable
        ? "After − before. Amber: before is higher; plum: after is higher; plain: unchanged."
        : "The two sides can't be compared cell by cell."}{" "}
      {hasNever && "A cut corner: changed, and no run visited it. "}
      {marks.join(" ")}
    </p>
  );
}
