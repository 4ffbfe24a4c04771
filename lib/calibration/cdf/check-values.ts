import { type CdfDifference, compareWithCdf } from "@/lib/calibration/cdf/compare-with-cdf";
import type { CdfFile } from "@/lib/calibration/cdf/types";
import type { ImageReading } from "@/lib/calibration/values/types";

/** The first of many, and how many there are. */
export interface Listed<T> {
  count: number;
  first: T[];
}

/** How an image stands to a values file. */
export interface ValuesCheck {
  /** Names with values in the file. */
  inFile: number;
  /** Names that both have in the same shape, and those of them that agree. */
  compared: number;
  equal: number;
  /** Values that were compared: cells, texts, and points of own axes. */
  values: number;
  differing: Listed<CdfDifference>;
  /** In both, but not of the same shape. */
  otherShape: Listed<{ name: string; axis: string | null; image: number[]; file: number[] }>;
  /** Compared as they stand, though the units are not written alike. */
  otherUnit: Listed<{ name: string; image: string; file: string }>;
  /** Names of the file that the description does not know. */
  notInImage: Listed<string>;
  /** Names of the file that the description knows, but whose values in the image could not be read. */
  notReadable: Listed<{ name: string; reason: string }>;
  /** Names of the image that the file does not have. */
  notInFile: Listed<string>;
  /** Of the file: where it contradicts itself or holds no number, with the name; and what is good to know. */
  problems: string[];
  notes: string[];
}

/**
 * Holds an image against a values file, as compareWithCdf does, in a form that can be shown: every list is cut after `most`.
 * @param most listed of each kind
 */
export function checkValues(reading: ImageReading, cdf: CdfFile, most: number): ValuesCheck {
  const found = compareWithCdf(reading, cdf);
  const reasons = new Map(reading.notRead.map(({ name, reason }) => [name, reason]));
  const listed = <T>(all: readonly T[], count = all.length): Listed<T> => ({
    count,
    first: all.slice(0, most),
  });
  return {
    inFile: cdf.instances.length,
    compared: found.compared,
    equal: found.equal,
    values: found.values,
    differing: listed(found.differences, found.differenceCount),
    otherShape: listed(found.otherShape),
    otherUnit: listed(found.otherUnit),
    notInImage: listed(found.onlyInFile.filter((name) => !reasons.has(name))),
    notReadable: listed(
      found.onlyInFile.flatMap((name) => {
        const reason = reasons.get(name);
        return reason === undefined ? [] : [{ name, reason }];
      }),
    ),
    notInFile: listed(found.onlyInImage),
    problems: cdf.problems,
    notes: cdf.notes,
  };
}
