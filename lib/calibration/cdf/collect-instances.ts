import type { CdfAxis, CdfFile, CdfInstance, CdfValue } from "@/lib/calibration/cdf/types";
import { ValueGroups } from "@/lib/calibration/cdf/value-groups";
import { cellCount } from "@/lib/calibration/values/cells";
import { FileRefusedError } from "@/lib/errors";

/** A reading of an image ends at four million cells; a made-up file must not claim memory by numbers. */
const MOST_VALUES = 10_000_000;
const MOST_INSTANCES = 500_000;
const LONGEST_TEXT = 1 << 20;
const MOST_PROBLEMS = 200;
const MOST_NOTES = 50;
/** Parts of structures carry the names around them, so a long one would be kept again and again. */
const LONGEST_NAME = 1024;
/** Only one way to match: a long row of digits must not be tried at every place. */
const NUMBER = /^[+-]?(\d+(\.\d*)?|\.\d+)(e[+-]?\d+)?$/i;
/** Categories whose single value is still an array of one. */
const ARRAYS = /^(CURVE|MAP|CUBOID|CUBE_[45]|VAL_BLK|.*_AXIS)$/;

interface Draft extends Omit<CdfInstance, "axes" | "dims" | "values"> {
  sizes: number[];
  found: ValueGroups | null;
  axes: (Omit<CdfAxis, "values"> & { index: number; found: ValueGroups | null })[];
  variants: number;
}

/** Builds instances from the elements of a CDF file as they open and close. Elements that are not known are passed over. */
export class InstanceCollector {
  private readonly file: CdfFile = { instances: [], notes: [], problems: [] };
  private readonly path: string[] = [];
  private readonly drafts: Draft[] = [];
  private readonly names = new Set<string>();
  private inAxis = false;
  private groups: ValueGroups | null = null;
  /** Length of the path at which the values began. */
  private valuesFrom = 0;
  /** Length of the path at which a second variant began; 0 = none is being passed over. */
  private passedOverFrom = 0;
  private gathered = "";
  private valueCount = 0;
  private problemCount = 0;

  /** @param mostValues bound of values in the file */
  constructor(private readonly mostValues = MOST_VALUES) {}

  get depth(): number {
    return this.path.length;
  }

  note(message: string): void {
    const { notes } = this.file;
    if (notes.length < MOST_NOTES && !notes.includes(message)) notes.push(message);
  }

  open(name: string): void {
    this.path.push(name);
    this.gathered = "";
    if (this.passedOverFrom > 0) return;
    // Inside values only groups mean anything; what else stands there is passed over when it closes.
    if (this.groups) {
      if (name === "VG") this.groups.openGroup();
      return;
    }
    if (name === "SW-INSTANCE") this.openInstance();
    const draft = this.drafts[this.drafts.length - 1];
    if (!draft) return;
    if (name === "SW-INSTANCE-PROPS-VARIANT" && ++draft.variants === 2) {
      this.passedOverFrom = this.path.length;
      this.problem(draft, "has more than one variant; only the first was read.");
    } else if (name === "SW-AXIS-CONT") {
      this.inAxis = true;
      draft.axes.push({ category: "", reference: null, unit: "", index: Number.NaN, found: null });
    } else if (name === "SW-VALUES-PHYS") {
      this.groups = new ValueGroups();
      this.valuesFrom = this.path.length;
      const owner = this.inAxis ? draft.axes[draft.axes.length - 1] : draft;
      if (owner.found) this.problem(draft, "states its values twice; the later ones were taken.");
      owner.found = this.groups;
    } else if (name === "SW-VALUES-CODED")
      this.note("Coded (raw) values were passed over; only physical ones are read.");
  }

  text(piece: string): void {
    if (this.gathered.length + piece.length > LONGEST_TEXT)
      throw new FileRefusedError(
        "file_damaged",
        "A text of the values file is longer than a million characters.",
      );
    this.gathered += piece;
  }

  close(): void {
    const name = this.path.pop() ?? "";
    const text = this.gathered;
    this.gathered = "";
    if (this.passedOverFrom > 0) {
      if (this.path.length < this.passedOverFrom) this.passedOverFrom = 0;
      return;
    }
    const draft = this.drafts[this.drafts.length - 1];
    if (!draft) return;
    if (this.groups) this.closeInValues(draft, name, text);
    else this.closeProperty(draft, name, text);
  }

  /** What was gathered. */
  finish(): CdfFile {
    const more = this.problemCount - this.file.problems.length;
    if (more > 0) this.file.problems.push(`${more} further problems are not listed.`);
    if (this.file.instances.length === 0) this.note("The file holds no values.");
    return this.file;
  }

  private openInstance(): void {
    if (this.names.size + this.drafts.length >= MOST_INSTANCES)
      throw new FileRefusedError(
        "too_many_values",
        `The values file holds more than ${MOST_INSTANCES} instances.`,
      );
    this.inAxis = false;
    this.drafts.push({
      name: "",
      text: "",
      category: "",
      unit: "",
      functions: [],
      sizes: [],
      found: null,
      axes: [],
      variants: 0,
    });
  }

  private closeInValues(draft: Draft, name: string, text: string): void {
    if (name === "V" || name === "VF") this.groups?.add(this.counted(this.numberOf(draft, text)));
    else if (name === "VT") this.groups?.add(this.counted(text));
    else if (name === "VG") this.groups?.closeGroup();
    else if (this.path.length < this.valuesFrom) this.groups = null;
    else if (name !== "LABEL") this.note(`Values of the kind ${name.slice(0, 40)} were passed over.`);
  }

  private closeProperty(draft: Draft, name: string, text: string): void {
    const parent = this.path[this.path.length - 1];
    const trimmed = text.trim();
    const axis = this.inAxis ? draft.axes[draft.axes.length - 1] : null;
    if (name === "SW-INSTANCE") this.closeInstance(draft);
    else if (name === "SW-AXIS-CONT") this.inAxis = false;
    else if (name === "SHORT-NAME" && parent === "SW-INSTANCE") draft.name = this.fullName(trimmed);
    else if (name === "LONG-NAME" && parent === "SW-INSTANCE") draft.text = text;
    else if (name === "CATEGORY" && (axis || parent === "SW-INSTANCE")) (axis ?? draft).category = trimmed;
    else if (name === "SW-FEATURE-REF" && trimmed !== "") draft.functions.push(trimmed);
    else if (name === "UNIT-DISPLAY-NAME") (axis ?? draft).unit = text;
    else if (name === "SW-INSTANCE-REF" && axis && trimmed !== "") axis.reference = trimmed;
    else if (name === "SW-AXIS-INDEX" && axis) axis.index = Number(trimmed);
    else if (name === "V" && parent === "SW-ARRAYSIZE" && !axis) draft.sizes.push(Number(trimmed));
  }

  private closeInstance(draft: Draft): void {
    this.drafts.pop();
    const { name, text, category, unit, functions, found, axes } = draft;
    // A place in the tree that only holds others has no values of its own.
    if (!found && axes.length === 0 && category === "") return;
    if (this.names.has(name)) this.problem(draft, "is there more than once.");
    this.names.add(name);
    if (axes.every(({ index }) => index > 0)) axes.sort((a, b) => a.index - b.index);
    this.file.instances.push({
      name,
      text,
      category,
      unit,
      functions,
      dims: this.dimsOf(draft),
      values: found?.values ?? [],
      axes: axes.map((axis) => ({
        category: axis.category,
        reference: axis.reference,
        unit: axis.unit,
        values: axis.found?.values ?? [],
      })),
    });
  }

  /** The shape: as stated where the number of values fits it, else as the groups nest. */
  private dimsOf(draft: Draft): number[] {
    const { found, sizes, category } = draft;
    if (!found) {
      this.problem(draft, "has no values.");
      return [];
    }
    if (found.isRagged) this.problem(draft, "has groups of unequal size; its values were read as one row.");
    const nested = found.dims;
    if (sizes.length === 0)
      return nested.length === 1 && nested[0] === 1 && !ARRAYS.test(category) ? [] : nested;
    const stated = [...sizes];
    while (stated.length > 1 && stated[stated.length - 1] === 1) stated.pop();
    const fits = cellCount(stated) === found.values.length;
    const agrees = nested.length === 1 || nested.join() === stated.join();
    if (fits && agrees) return stated;
    this.problem(draft, `states the size ${stated.join(" × ")} and holds ${nested.join(" × ")} values.`);
    return nested;
  }

  private numberOf(draft: Draft, text: string): number | null {
    const trimmed = text.trim();
    const value = NUMBER.test(trimmed) ? Number(trimmed) : Number.NaN;
    if (Number.isFinite(value)) return value;
    this.problem(draft, `holds "${trimmed.slice(0, 40)}", which is no number.`);
    return null;
  }

  private counted(value: CdfValue): CdfValue {
    if (++this.valueCount > this.mostValues)
      throw new FileRefusedError(
        "too_many_values",
        `The values file holds more than ${this.mostValues} values.`,
      );
    return value;
  }

  /** Parts of a structure carry its name in front. */
  private fullName(own: string): string {
    const outer = this.drafts[this.drafts.length - 2];
    const name = outer ? `${outer.name}.${own}` : own;
    if (name.length <= LONGEST_NAME) return name;
    throw new FileRefusedError(
      "file_damaged",
      `A name of the values file is longer than ${LONGEST_NAME} characters: "${name.slice(0, 40)}…".`,
    );
  }

  private problem({ name }: Pick<Draft, "name">, message: string): void {
    this.problemCount++;
    if (this.file.problems.length < MOST_PROBLEMS)
      this.file.problems.push(`${name === "" ? "An instance without a name" : name} ${message}`);
  }
}
