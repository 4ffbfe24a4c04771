import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import { pointsIn, quantityOf, risingPoints } from "@/lib/calibration/coverage/axis-points";
import { changedCellFlags } from "@/lib/calibration/coverage/changed-cells";
import {
  atTimes,
  type SampleTimes,
  sampleTimes,
  tooLongStepS,
} from "@/lib/calibration/coverage/sample-times";
import type {
  AxisLink,
  Coverage,
  CoverageRun,
  MapCoverage,
  NotToldCode,
} from "@/lib/calibration/coverage/types";
import {
  type AxisPlace,
  type CellVisits,
  placeOnAxis,
  visitCells,
} from "@/lib/calibration/coverage/visit-cells";
import { cellCount } from "@/lib/calibration/values/cells";

/** Weighted seconds from which on a cell counts as visited (common practice, no source). */
const VISITED_S = 0.1;

const NO_STEP =
  "The samples of the usable runs lie more than 1 s apart: how long a cell was in use is not known.";

/** An axis that samples can be placed on. */
interface LinkedAxis {
  link: AxisLink;
  quantity: string;
  unit: string;
  points: Float64Array;
}

/** A changed table with what the runs add to it. */
interface OpenTable {
  name: string;
  dims: number[];
  changed: Uint8Array;
  axes: LinkedAxis[];
  collected: CellVisits;
  /** Runs that told something. */
  told: number;
  /** Why the last run that told nothing did not. */
  silent: { code: NotToldCode; reason: string } | null;
}

type NotTold = Coverage["notTold"][number];

/**
 * Where runs went on the tables that a change set changes. Each sample is worth half of the steps beside it (gaps are nobody's) and
 * is shared among the cells between which the control unit interpolates. Beyond an end the last cell is in use: those seconds count
 * for it, and apart. A cell is visited from 0.1 s on. A cell counts as changed when its value or one of its axis points differs,
 * and all of them where the table is new or has another shape. Between points of a rescale or curve axis the weight is shared
 * linearly. Pure; near O(runs × samples × tables).
 * @param links by input quantity, or `NAME/x` for an axis without one; other links are of no use
 */
export function coverageOf(
  changeSet: Pick<ChangeSet, "characteristics">,
  runs: readonly CoverageRun[],
  links: readonly AxisLink[],
): Coverage {
  const byQuantity = new Map(links.map((link) => [link.quantity, link]));
  const tables: OpenTable[] = [];
  const notTold: NotTold[] = [];
  for (const change of changeSet.characteristics) {
    const opened = openTable(change, byQuantity);
    if (opened && "axes" in opened) tables.push(opened);
    else if (opened) notTold.push(opened);
  }
  for (const run of runs) addRun(tables, run);
  const maps = tables.filter(({ told }) => told > 0).map(mapOf);
  for (const { name, changed, told, silent } of tables) {
    const why = silent ?? { code: "not_recorded" as const, reason: "There is no usable run." };
    if (told === 0) notTold.push({ name, changedCells: count(changed), ...why });
  }
  const inShare = notTold.filter(({ code }) => code !== "no_axes");
  const sum = (numbers: readonly number[]) => numbers.reduce((a, b) => a + b, 0);
  return {
    coverage: 1,
    runs: runs.map(({ id }) => id),
    maps,
    notTold,
    changedCells: sum([...maps, ...inShare].map(({ changedCells }) => changedCells)),
    changedVisited: sum(maps.map(({ changedVisited }) => changedVisited)),
  };
}

function count(flags: Uint8Array): number {
  return flags.reduce((total, flag) => total + flag, 0);
}

/** A table ready to collect, or why it can't be told; null where no cell is left that a run could visit. */
function openTable(
  change: CharacteristicChange,
  links: ReadonlyMap<string, AxisLink>,
): OpenTable | NotTold | null {
  const { name, after, kind, type } = change;
  if (kind === "removed") return null;
  const changed = changedCellFlags(change);
  const not = (code: NotToldCode, reason: string): NotTold => {
    // Where axis points moved and cells are not listed, any of them may hold at another place.
    const unlisted = change.axisChanged ? change.cells : change.changed;
    const cells = after && after.axes.length > 0 ? count(changed) : unlisted;
    return { name, changedCells: cells, code, reason };
  };
  if (!after) return not("not_listed", `${name} is not listed cell by cell: too many cells changed.`);
  if (type === "AXIS_PTS") return not("no_axes", `${name} is a shared axis; it counts in the tables on it.`);
  if (after.axes.length === 0) return not("no_axes", `${name} has no axes: whatever is driven uses it.`);
  const axes: LinkedAxis[] = [];
  for (const [place, axis] of after.axes.entries()) {
    const quantity = quantityOf(name, axis, place);
    const link = links.get(quantity);
    if (!link) return not("no_link", `No channel is linked to ${quantity}, an axis of ${name}.`);
    const points = risingPoints(axis);
    if (!points)
      return not(
        "axis_points",
        `The axis points of ${name} along ${quantity} do not rise from one to the next.`,
      );
    axes.push({ link, quantity, unit: axis.unit, points });
  }
  const cells = cellCount(after.dims);
  const collected = { seconds: new Float64Array(cells), visits: new Float64Array(cells), secondsOutside: 0 };
  return { name, dims: after.dims, changed, axes, collected, told: 0, silent: null };
}

/** Adds a run to every table that it tells; tables that share a channel or an axis share its samples. */
function addRun(tables: readonly OpenTable[], run: CoverageRun): void {
  const times = sampleTimes(run.timeS);
  if (!times.joined.includes(1)) {
    for (const table of tables) table.silent = { code: "not_recorded", reason: NO_STEP };
    return;
  }
  const samples = new Map<string, Float64Array>();
  const places = new Map<string, AxisPlace>();
  for (const table of tables) {
    const found: AxisPlace[] = [];
    for (const axis of table.axes) {
      const place = placeOf(axis, run, samples, places);
      if ("code" in place) {
        table.silent = place;
        break;
      }
      found.push(place);
    }
    if (found.length === table.axes.length) add(table, found, run.timeS, times);
  }
}

function add(table: OpenTable, places: AxisPlace[], timeS: Float64Array, times: SampleTimes): void {
  visitCells(table.collected, table.dims, places, timeS, times);
  table.told++;
}

function placeOf(
  { link, quantity, unit, points }: LinkedAxis,
  run: CoverageRun,
  samples: Map<string, Float64Array>,
  places: Map<string, AxisPlace>,
): AxisPlace | { code: NotToldCode; reason: string } {
  const channel = run.channels.get(link.channel);
  if (!channel)
    return { code: "not_recorded", reason: `No usable run recorded ${link.channel}, linked to ${quantity}.` };
  const inUnit = pointsIn(points, unit, link, channel.unit);
  if (!inUnit) {
    const words = (text: string) => (text.trim() === "" ? "no unit" : `the unit ${text}`);
    const reason = `${quantity} has ${words(unit)}, but ${link.channel} has ${words(channel.unit)}: one can't be converted into the other.`;
    return { code: "unit", reason };
  }
  const stepS = tooLongStepS(channel);
  if (stepS !== null) {
    const reason = `${link.channel}, linked to ${quantity}, is recorded every ${Number(stepS.toPrecision(2))} s only: what lies between is not known.`;
    return { code: "not_recorded", reason };
  }
  const key = `${link.channel}\n${inUnit.join()}`;
  const known = places.get(key);
  if (known) return known;
  const values = samples.get(link.channel) ?? atTimes(channel, run.timeS);
  samples.set(link.channel, values);
  const place = placeOnAxis(inUnit, values);
  places.set(key, place);
  return place;
}

function mapOf({ name, dims, changed, axes, collected }: OpenTable): MapCoverage {
  const { seconds, visits, secondsOutside } = collected;
  const never: number[] = [];
  for (let k = 0; k < changed.length; k++) if (changed[k] && seconds[k] < VISITED_S) never.push(k);
  const changedCells = count(changed);
  return {
    ...{ name, dims, secondsByCell: [...seconds], visitsByCell: [...visits], secondsOutside },
    ...{ changedCells, changedVisited: changedCells - never.length, changedNeverVisited: never },
    links: axes.map(({ link }) => link),
  };
}
