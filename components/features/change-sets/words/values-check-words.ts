import { digitsFor, valueText } from "@/components/features/change-sets/words/figure-text";
import { counted, numberText } from "@/components/ui/data/number-text";
import type { Listed, ValuesCheck } from "@/lib/calibration/cdf/check-values";
import type { CdfDifference } from "@/lib/calibration/cdf/compare-with-cdf";
import { AXIS_NAMES } from "@/lib/calibration/values/cells";

/** Names of a file that could not be compared, or not as they are meant, with why. */
export interface LeftOut {
  sentence: string;
  listed: Listed<{ name: string; why: string }>;
}

const counts = (dims: readonly number[]) => (dims.length === 0 ? "one value" : dims.join(" × "));

/** What a check comes to, in one sentence. */
export function checkSentence(check: ValuesCheck): string {
  const { inFile, compared, equal, values, differing, problems } = check;
  if (inFile === 0) return "The file holds no values.";
  if (compared === 0)
    return "Nothing was compared: no name of the file has values of the same shape in the image.";
  const names = counted(compared, "name");
  if (differing.count > 0)
    return `${numberText(differing.count)} of ${counted(values, "value")} ${differing.count === 1 ? "differs" : "differ"}, in ${numberText(compared - equal)} of ${names}.`;
  const isWhole = leftOutOf(check).length === 0 && problems.length === 0;
  return `The file and the image agree in ${values === 1 ? "the one value" : `all ${counted(values, "value")}`}${isWhole ? "" : " that could be compared"} (${names}).`;
}

/** What stands between the check and a whole answer, the gravest first; [] where all of the file was compared. */
export function leftOutOf({ notInImage, notReadable, otherShape, otherUnit }: ValuesCheck): LeftOut[] {
  const all: LeftOut[] = [
    {
      sentence: "The description does not know these names, so the image has no values for them.",
      listed: { count: notInImage.count, first: notInImage.first.map((name) => ({ name, why: "" })) },
    },
    {
      sentence: "The description knows these names, but their values in the image could not be read.",
      listed: {
        count: notReadable.count,
        first: notReadable.first.map(({ name, reason }) => ({ name, why: reason })),
      },
    },
    {
      sentence:
        "These have another shape in the file than in the image; what does not match was not compared.",
      listed: {
        count: otherShape.count,
        first: otherShape.first.map(({ name, axis, image, file }) => ({
          name,
          why: `${axis === null ? "" : `Axis ${axis}: `}${counts(file)} in the file, ${counts(image)} in the image`,
        })),
      },
    },
    {
      sentence: "The units of these are not written alike; the numbers were compared as they stand.",
      listed: {
        count: otherUnit.count,
        first: otherUnit.first.map(({ name, image, file }) => ({
          name,
          why: `${file} in the file, ${image || "none"} in the image`,
        })),
      },
    },
  ];
  return all.filter(({ listed }) => listed.count > 0);
}

/** Where a difference lies: "x 3, y 1", "axis x, point 2", "" for a single value. Counted from 0. */
export function placeText({ axis, index }: Pick<CdfDifference, "axis" | "index">): string {
  if (axis !== null) return `axis ${axis}, point ${numberText(index[0])}`;
  if (index.length === 1) return numberText(index[0]);
  return index.map((at, k) => `${AXIS_NAMES[k] ?? k + 1} ${numberText(at)}`).join(", ");
}

/** The two values of a difference and how far they are apart, with as many digits as show it. */
export function differenceTexts({ file, image, difference, decimals }: CdfDifference) {
  const digits = difference === null ? decimals : digitsFor([difference], decimals);
  return {
    file: valueText(file, digits),
    image: valueText(image, digits),
    difference: difference === null ? "–" : numberText(difference, { decimals: digits, signed: true }),
  };
}
