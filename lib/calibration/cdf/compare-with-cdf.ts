import type { CdfFile, CdfInstance, CdfValue } from "@/lib/calibration/cdf/types";
import { AXIS_NAMES, cellIndex } from "@/lib/calibration/values/cells";
import type { ImageReading, PhysicalValue, ReadCharacteristic } from "@/lib/calibration/values/types";

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
  /** As the image has it: of the axis for a point of one. */
  unit: string;
  decimals: number;
}

export interface CdfComparison {
  /** Characteristics and shared axes that both have in the same shape. */
  compared: number;
  /** Those of them without a difference. */
  equal: number;
  /** Values (cells and points of own axes) that were compared. */
  values: number;
  /** The first differences, in the file's order; `differenceCount` tells how many there are. */
  differences: CdfDifference[];
  differenceCount: number;
  /** In both, but of another shape, so that no cell stands for another; `axis` where only an own axis has other points. */
  otherShape: { name: string; axis: string | null; image: number[]; file: number[] }[];
  /** Compared as they stand, though the file names another unit. */
  otherUnit: { name: string; image: string; file: string }[];
  onlyInFile: string[];
  onlyInImage: string[];
}

const MOST_LISTED = 10_000;
/** Values without a raw step, and axis points: the digits that a values file carries are not always all of them. */
const RELATIVE = 1e-6;
/** Half a step is still the same raw value; the conversion itself rounds in its last bits. */
const HALF_STEP = 0.5 * (1 + 1e-9);

/**
 * Compares an image with a values file by name: numbers that lie more than half a raw step apart, texts that are not the same. Without a
 * raw step (floats) and for points of own axes, apart means by more than a millionth. What has no value on one side differs from anything.
 * Shared axes are compared once, under their own name.
 */
export function compareWithCdf(reading: ImageReading, cdf: CdfFile): CdfComparison {
  const byName = new Map(reading.characteristics.map((read) => [read.name, read]));
  const inFile = new Set(cdf.instances.map(({ name }) => name));
  const result: CdfComparison = {
    compared: 0,
    equal: 0,
    values: 0,
    differences: [],
    differenceCount: 0,
    otherShape: [],
    otherUnit: [],
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
    result.otherShape.push({ name, axis: null, image: dims, file: instance.dims });
    return;
  }
  const [unit, fileUnit] = [read.unit.trim(), instance.unit.trim()];
  if (fileUnit !== "" && fileUnit !== unit) result.otherUnit.push({ name, image: unit, file: fileUnit });
  const before = result.differenceCount;
  const differ = (at: Pick<CdfDifference, "axis" | "index" | "image" | "file" | "unit" | "decimals">) => {
    result.differenceCount++;
    if (result.differences.length >= MOST_LISTED) return;
    const { image, file } = at;
    const bothNumbers = typeof image === "number" && typeof file === "number";
    result.differences.push({ name, ...at, difference: bothNumbers ? file - image : null });
  };
  values.forEach((image, cell) => {
    const file = instance.values[cell];
    if (!isSame(image, file, read.rawStep))
      differ({ axis: null, index: cellIndex(cell, dims), image, file, unit, decimals: read.decimals });
  });
  let isOdd = false;
  read.axes.forEach(({ points, unit: ofAxis, decimals }, k) => {
    const file = instance.axes[k]?.values ?? [];
    const axis = AXIS_NAMES[k] ?? `${k + 1}`;
    if (file.length === 0) return;
    if (file.length !== points.length) {
      isOdd = true;
      result.otherShape.push({ name, axis, image: [points.length], file: [file.length] });
      return;
    }
    result.values += points.length;
    points.forEach((image, at) => {
      if (!isSame(image, file[at], null))
        differ({ axis, index: [at], image, file: file[at], unit: ofAxis.trim(), decimals });
    });
  });
  result.values += values.length;
  result.compared++;
  if (result.differenceCount === before && !isOdd) result.equal++;
}

function isSame(image: PhysicalValue, file: CdfValue, rawStep: number | null): boolean {
  if (image === null || file === null) return false;
  if (typeof image !== "number" || typeof file !== "number") return image === file;
  const rounding = RELATIVE * Math.max(Math.abs(image), Math.abs(file));
  return Math.abs(image - file) <= (rawStep === null ? rounding : HALF_STEP * rawStep);
}

/** Dimensions of one at the end do not change a shape. */
function sameShape(a: readonly number[], b: readonly number[]): boolean {
  const length = Math.max(a.length, b.length);
  return Array.from({ length }, (_, k) => (a[k] ?? 1) === (b[k] ?? 1)).every(Boolean);
}
