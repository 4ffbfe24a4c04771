import type { CdfAxis, CdfFile, CdfInstance, CdfValue } from "@/lib/calibration/cdf/types";
import { cellIndex } from "@/lib/calibration/coverage/changed-cells";
import type {
  ImageReading,
  PhysicalValue,
  ReadAxis,
  ReadCharacteristic,
} from "@/lib/calibration/values/types";

/** A place at which the image and the values file do not say the same. */
export interface CdfDifference {
  name: string;
  /** "x", "y" … for a point of an own axis, null for a cell. */
  axis: string | null;
  /** Cell by axis, from 0; [] for one value. */
  index: number[];
  image: PhysicalValue;
  file: CdfValue;
  /** File − image; null for texts. */
  difference: number | null;
}

export interface CdfComparison {
  /** Characteristics and shared axes that both have in the same shape. */
  compared: number;
  /** Those of them without a difference. */
  equal: number;
  /** The first differences, in the file's order; `differenceCount` tells how many there are. */
  differences: CdfDifference[];
  differenceCount: number;
  /** In both, but of another shape, so that no cell stands for another. */
  otherShape: { name: string; image: number[]; file: number[] }[];
  onlyInFile: string[];
  onlyInImage: string[];
}

const MOST_LISTED = 10_000;
/** Values without a raw step, and axis points: the digits that a values file carries are not always all of them. */
const RELATIVE = 1e-6;
/** Half a step is still the same raw value; the conversion itself rounds in its last bits. */
const HALF_STEP = 0.5 * (1 + 1e-9);
const AXIS_NAMES = ["x", "y", "z", "4", "5"];

/**
 * Compares an image with a values file by name: numbers that lie more than half a raw step apart, texts that are not the same. Without a
 * raw step (floats) and for points of own axes, apart means by more than a millionth. Shared axes are compared once, under their own name.
 */
export function compareWithCdf(reading: ImageReading, cdf: CdfFile): CdfComparison {
  const byName = new Map(reading.characteristics.map((read) => [read.name, read]));
  const inFile = new Set(cdf.instances.map(({ name }) => name));
  const result: CdfComparison = {
    compared: 0,
    equal: 0,
    differences: [],
    differenceCount: 0,
    otherShape: [],
    onlyInFile: cdf.instances.map(({ name }) => name).filter((name) => !byName.has(name)),
    onlyInImage: [...byName.keys()].filter((name) => !inFile.has(name)),
  };
  for (const instance of cdf.instances) {
    const read = byName.get(instance.name);
    if (read) compareOne(read, instance, result);
  }
  return result;
}

function compareOne(read: ReadCharacteristic, instance: CdfInstance, result: CdfComparison): void {
  const { name } = read;
  const values = read.type === "ASCII" ? [read.characters ?? ""] : read.values;
  const dims = read.type === "ASCII" ? [] : read.dims;
  if (!sameShape(dims, instance.dims) || values.length !== instance.values.length) {
    result.otherShape.push({ name, image: dims, file: instance.dims });
    return;
  }
  const before = result.differenceCount;
  const differ = (at: Pick<CdfDifference, "axis" | "index">, image: PhysicalValue, file: CdfValue) => {
    result.differenceCount++;
    if (result.differences.length >= MOST_LISTED) return;
    const bothNumbers = typeof image === "number" && typeof file === "number";
    result.differences.push({ name, ...at, image, file, difference: bothNumbers ? file - image : null });
  };
  values.forEach((value, cell) => {
    const file = instance.values[cell];
    if (!isSame(value, file, read.rawStep)) differ({ axis: null, index: cellIndex(cell, dims) }, value, file);
  });
  ownAxes(read.axes, instance.axes).forEach(({ axis, points, file }) => {
    points.forEach((point, k) => {
      if (!isSame(point, file[k], null)) differ({ axis, index: [k] }, point, file[k]);
    });
  });
  result.compared++;
  if (result.differenceCount === before) result.equal++;
}

/** Axes whose points stand in the file itself, as many as the image has. */
function ownAxes(axes: readonly ReadAxis[], given: readonly CdfAxis[]) {
  return axes.flatMap(({ points }, k) => {
    const file = given[k]?.values ?? [];
    return file.length === points.length ? [{ axis: AXIS_NAMES[k] ?? `${k + 1}`, points, file }] : [];
  });
}

function isSame(image: PhysicalValue, file: CdfValue, rawStep: number | null): boolean {
  if (typeof image !== "number" || typeof file !== "number") return image === file;
  const rounding = RELATIVE * Math.max(Math.abs(image), Math.abs(file));
  return Math.abs(image - file) <= (rawStep === null ? rounding : HALF_STEP * rawStep);
}

/** Dimensions of one at the end do not change a shape. */
function sameShape(a: readonly number[], b: readonly number[]): boolean {
  const length = Math.max(a.length, b.length);
  return Array.from({ length }, (_, k) => (a[k] ?? 1) === (b[k] ?? 1)).every(Boolean);
}
