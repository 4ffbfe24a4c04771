import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import { CDF_REFUSALS, type CdfFile } from "@/lib/calibration/cdf/types";
import { isWritable, writeCdfx } from "@/lib/calibration/cdf/write-cdfx";
import { FileRefusedError } from "@/lib/errors";

/** More problems than are listed are counted in one more line. */
const MOST_PROBLEMS = 201;

/** What is wrong with a values file that was read; null when its shapes add up and what is written of it is read the same. */
function faultOf(file: CdfFile): string | null {
  if (file.problems.length > MOST_PROBLEMS) return `${file.problems.length} problems kept`;
  for (const { name, dims, values } of file.instances) {
    const cells = dims.reduce((product, n) => product * n, 1);
    const isEmpty = dims.length === 0 && values.length === 0;
    if (cells !== values.length && !isEmpty)
      return `"${name}": ${dims.join(" × ")} cells, ${values.length} values`;
    if (values.some((value) => typeof value === "number" && !Number.isFinite(value)))
      return `"${name}" is not finite`;
  }
  const whole = file.instances.filter(
    ({ values, axes }) =>
      values.length > 0 && [values, ...axes.map((axis) => axis.values)].every((list) => !list.includes(null)),
  );
  const again = readCdfx(new TextEncoder().encode([...writeCdfx("again", whole)].join("")));
  const told = (instances: CdfFile["instances"]) =>
    JSON.stringify(instances.map(({ name, values, axes }) => [name, values, axes.length]));
  return told(again.instances) === told(whole) ? null : "is written and read back as something else";
}

/** Reads bytes as a values file. `read` or the code of the refusal; a fault of the reader is thrown. */
export function judgeValuesFile(bytes: Uint8Array): string {
  let file: CdfFile;
  try {
    file = readCdfx(bytes);
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    if (!(CDF_REFUSALS as readonly string[]).includes(error.code))
      throw new Error(`refused with unlisted code ${error.code}`);
    if (error.message.length > 2000) throw new Error(`refused in ${error.message.length} characters`);
    return error.code;
  }
  const texts = file.instances.flatMap(({ name, text, unit }) => [name, text, unit]);
  if (!texts.every(isWritable)) throw new Error("holds characters that XML can't carry");
  const fault = faultOf(file);
  if (fault) throw new Error(fault);
  return "read";
}
