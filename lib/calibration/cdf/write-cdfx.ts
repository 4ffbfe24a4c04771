import type { CdfAxis, CdfInstance, CdfValue } from "@/lib/calibration/cdf/types";

/** What no XML 1.0 text can carry, not even escaped: control characters, halves of surrogate pairs, two non-characters. */
const UNWRITABLE =
  // biome-ignore lint/suspicious/noControlCharactersInRegex: these are what is looked for
  /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/;

const UNWRITABLE_ALL = new RegExp(UNWRITABLE, "g");

const ESCAPES: Readonly<Record<string, string>> = { "&": "&amp;", "<": "&lt;", ">": "&gt;", "\r": "&#13;" };

/** Whether a text can stand in an XML file at all. */
export const isWritable = (text: string) => !UNWRITABLE.test(text);

const escaped = (text: string) => text.replace(/[&<>\r]/g, (sign) => ESCAPES[sign]);
const element = (name: string, text: string) => `<${name}>${escaped(text)}</${name}>`;
/** A remark for people; two hyphens would end it. */
const comment = (text: string) =>
  `<!-- ${text.replace(/-(?=-|$)/g, "- ").replace(UNWRITABLE_ALL, "?")} -->\n`;
const optional = (name: string, text: string) => (text === "" ? "" : `${element(name, text)}\n`);

/**
 * Writes instances as an ASAM CDF 2.0 file (CDFX, UTF-8), in pieces so that a large one never stands in memory whole. Numbers have
 * as many digits as bring the same number back. Every text must be writable (`isWritable`) and every value a number or a text.
 * @param title name of the system, e.g. of the revision
 * @param leftOut what the file does not hold, with why: remarks at its end
 */
export function* writeCdfx(
  title: string,
  instances: Iterable<CdfInstance>,
  leftOut: readonly { name: string; reason: string }[] = [],
): Generator<string> {
  const name = element("SHORT-NAME", title);
  yield `<?xml version="1.0" encoding="UTF-8"?>\n<MSRSW>\n${name}\n<CATEGORY>CDF20</CATEGORY>\n<SW-SYSTEMS>\n<SW-SYSTEM>\n${name}\n`;
  yield `<SW-INSTANCE-SPEC>\n<SW-INSTANCE-TREE>\n${name}\n<CATEGORY>NO_VCD</CATEGORY>\n`;
  for (const instance of instances) yield* writeInstance(instance);
  for (const { name: missing, reason } of leftOut) yield comment(`Left out: ${missing}: ${reason}`);
  yield "</SW-INSTANCE-TREE>\n</SW-INSTANCE-SPEC>\n</SW-SYSTEM>\n</SW-SYSTEMS>\n</MSRSW>\n";
}

function* writeInstance(instance: CdfInstance): Generator<string> {
  const { name, text, category, functions, unit, dims, values, axes } = instance;
  const features = functions.map((f) => `${element("SW-FEATURE-REF", f)}\n`).join("");
  const size =
    category === "VAL_BLK" ? `<SW-ARRAYSIZE>${dims.map((n) => `<V>${n}</V>`).join("")}</SW-ARRAYSIZE>\n` : "";
  yield `<SW-INSTANCE>\n${element("SHORT-NAME", name)}\n${optional("LONG-NAME", text)}${element("CATEGORY", category)}\n${features}`;
  yield `<SW-INSTANCE-PROPS-VARIANTS>\n<SW-INSTANCE-PROPS-VARIANT>\n<SW-VALUE-CONT>\n${optional("UNIT-DISPLAY-NAME", unit)}${size}`;
  yield "<SW-VALUES-PHYS>";
  yield* writeCells(instance, dims.length - 1, 0, values.length);
  yield "</SW-VALUES-PHYS>\n</SW-VALUE-CONT>\n";
  if (axes.length > 0) yield `<SW-AXIS-CONTS>\n${axes.map(axisText).join("")}</SW-AXIS-CONTS>\n`;
  yield "</SW-INSTANCE-PROPS-VARIANT>\n</SW-INSTANCE-PROPS-VARIANTS>\n</SW-INSTANCE>\n";
}

/** Cells `from` to `to`: a group for each point of the axis `level`, down to x, whose points are the values of one group. */
function* writeCells(instance: CdfInstance, level: number, from: number, to: number): Generator<string> {
  const { dims, values, axes } = instance;
  if (level < 1) {
    yield values.slice(from, to).map(valueText).join("");
    return;
  }
  const step = (to - from) / dims[level];
  for (let point = 0; point < dims[level]; point++) {
    yield `\n<VG>${element("LABEL", String(axes[level]?.values[point] ?? point))}`;
    yield* writeCells(instance, level - 1, from + point * step, from + (point + 1) * step);
    yield "</VG>";
  }
}

function axisText({ category, reference, unit, values }: CdfAxis, index: number): string {
  const points =
    reference === null
      ? `<SW-VALUES-PHYS>${values.map(valueText).join("")}</SW-VALUES-PHYS>\n`
      : `${element("SW-INSTANCE-REF", reference)}\n`;
  return `<SW-AXIS-CONT>\n${element("CATEGORY", category)}\n${optional("UNIT-DISPLAY-NAME", unit)}<SW-AXIS-INDEX>${index + 1}</SW-AXIS-INDEX>\n${points}</SW-AXIS-CONT>\n`;
}

function valueText(value: CdfValue): string {
  if (typeof value === "string") return element("VT", value);
  return `<V>${Object.is(value, -0) ? "-0" : value}</V>`;
}
