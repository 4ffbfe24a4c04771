import type { CdfAxis, CdfInstance, CdfValue } from "@/lib/calibration/cdf/types";
import { isWritable } from "@/lib/calibration/cdf/write-cdfx";
import type { ChangeSet, CharacteristicChange } from "@/lib/calibration/changes/types";
import type {
  ImageReading,
  PhysicalValue,
  ReadAxis,
  ReadCharacteristic,
} from "@/lib/calibration/values/types";

/** Instances for a values file, and what could not be put there, with why. */
export interface CdfSelection {
  instances: CdfInstance[];
  leftOut: { name: string; reason: string }[];
}

type Source = Pick<
  ReadCharacteristic,
  "name" | "text" | "type" | "unit" | "dims" | "axes" | "values" | "characters" | "functions"
>;

/** Every characteristic and shared axis of a reading. */
export function cdfOfReading(reading: ImageReading): CdfSelection {
  const selection = select(reading.characteristics);
  return {
    ...selection,
    leftOut: [...selection.leftOut, ...reading.notRead.map(({ name, reason }) => ({ name, reason }))],
  };
}

/**
 * What a change set changes, on one side of it, with the shared axes that the changed curves and maps rest on. What that side does not
 * have is left out.
 */
export function cdfOfChanges(changes: ChangeSet, side: "before" | "after"): CdfSelection {
  const absent: CdfSelection["leftOut"] = [];
  const sources = changes.characteristics.flatMap((change): Source[] => {
    const content = change[side];
    if (content) return [{ ...change, ...content }];
    absent.push({ name: change.name, reason: `it is not there ${side} the change` });
    return [];
  });
  const { instances, leftOut } = select([...sources, ...sharedAxes(sources, changes.characteristics)]);
  return { instances, leftOut: [...absent, ...leftOut] };
}

/** Shared axes that are named and did not change themselves; of rescale axes and curves the points do not tell the values. */
function sharedAxes(sources: readonly Source[], changed: readonly CharacteristicChange[]): Source[] {
  const known = new Set(changed.map(({ name }) => name));
  return sources
    .flatMap(({ axes }) => axes)
    .flatMap((axis): Source[] => {
      const { kind, reference, unit, points } = axis;
      if (kind !== "COM_AXIS" || reference === null || known.has(reference)) return [];
      known.add(reference);
      const common = { text: "", unit, dims: [points.length], axes: [], characters: null, functions: [] };
      return [{ ...common, name: reference, type: "AXIS_PTS", values: points }];
    });
}

function select(sources: readonly Source[]): CdfSelection {
  const selection: CdfSelection = { instances: [], leftOut: [] };
  for (const source of sources) {
    const instance = instanceOf(source);
    const reason = unfit(instance);
    if (reason === null) selection.instances.push(instance);
    else selection.leftOut.push({ name: source.name, reason });
  }
  return selection;
}

function instanceOf({
  name,
  text,
  type,
  unit,
  dims,
  axes,
  values,
  characters,
  functions,
}: Source): CdfInstance {
  const common = { name, text, unit, functions, axes: axes.map(axisOf) };
  if (type === "ASCII") return { ...common, category: type, dims: [], values: [characters ?? ""] };
  const category = type !== "AXIS_PTS" ? type : dims.length > 1 ? "RES_AXIS" : "COM_AXIS";
  return { ...common, category, dims, values };
}

function axisOf({ kind, reference, unit, points }: ReadAxis): CdfAxis {
  return { category: kind, reference, unit, values: reference === null ? points : [] };
}

/** Why an instance can't stand in a values file: a value without a physical meaning, or a text that XML can't carry. */
function unfit({ name, text, unit, functions, values, axes }: CdfInstance): string | null {
  const all = [values, ...axes.map((axis) => axis.values)];
  if (all.some((list) => list.some((value) => !isPhysical(value))))
    return "a value has no physical meaning, and a values file holds physical values only";
  const texts = [
    name,
    text,
    unit,
    ...functions,
    ...axes.flatMap((axis) => [axis.unit, axis.reference ?? ""]),
  ];
  const words = all.flatMap((list) => list.filter((value) => typeof value === "string"));
  return [...texts, ...words].every(isWritable) ? null : "a text holds characters that XML can't carry";
}

const isPhysical = (value: PhysicalValue | CdfValue) =>
  typeof value === "string" || (value !== null && Number.isFinite(value));
