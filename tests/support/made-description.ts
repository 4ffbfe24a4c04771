import type {
  AxisDescription,
  AxisPoints,
  Characteristic,
  Conversion,
  DataType,
  Description,
  DescriptionModule,
  LayoutComponent,
  NamedSet,
  RecordLayout,
} from "@/lib/calibration/a2l/types";
import type { ImageSegment } from "@/lib/calibration/image/types";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import type { ImageReading, ReadCharacteristic } from "@/lib/calibration/values/types";

/** One component of a layout: position, keyword, type, and INDEX_* or an index mode. */
export function component(
  position: number,
  keyword: string,
  dataType: DataType,
  more: Partial<LayoutComponent> = {},
): LayoutComponent {
  return { position, keyword, dataType, indexMode: null, indexOrder: null, maxPairs: null, ...more };
}

export function layout(components: LayoutComponent[], more: Partial<RecordLayout> = {}): RecordLayout {
  return {
    name: "L",
    components,
    fixedCounts: {},
    alignments: {},
    isStatic: false,
    keepsStarts: false,
    ...more,
  };
}

export function characteristic(more: Partial<Characteristic> = {}): Characteristic {
  return {
    name: "C",
    text: "",
    type: "VALUE",
    displayIdentifier: null,
    address: 0x1000,
    layout: "L",
    conversion: null,
    lowerLimit: -1e9,
    upperLimit: 1e9,
    extendedLimits: null,
    byteOrder: null,
    format: null,
    physUnit: null,
    readOnly: false,
    line: 1,
    axes: [],
    matrixDim: null,
    bitMask: null,
    discrete: false,
    derived: null,
    ...more,
  };
}

export function axis(more: Partial<AxisDescription> = {}): AxisDescription {
  return {
    kind: "STD_AXIS",
    inputQuantity: null,
    conversion: null,
    maxPoints: 8,
    lowerLimit: -1e9,
    upperLimit: 1e9,
    reference: null,
    fixedRaw: null,
    byteOrder: null,
    physUnit: null,
    format: null,
    line: 1,
    ...more,
  };
}

export function axisPoints(more: Partial<AxisPoints> = {}): AxisPoints {
  const { axes, matrixDim, bitMask, discrete, derived, type, ...placed } = characteristic();
  return { ...placed, name: "A", layout: "LA", inputQuantity: null, maxPoints: 8, ...more };
}

/** Makes `name` → thing of a list; a layout or conversion goes by its own name. */
const byName = <T extends { name: string }>(things: readonly T[]) =>
  new Map(things.map((one) => [one.name, one]));

export interface MadeModule
  extends Omit<
    Partial<DescriptionModule>,
    "characteristics" | "axisPoints" | "layouts" | "conversions" | "functions" | "groups"
  > {
  characteristics?: Characteristic[];
  axisPoints?: AxisPoints[];
  layouts?: RecordLayout[];
  conversions?: Conversion[];
  functions?: NamedSet[];
  groups?: NamedSet[];
}

export function describedBy(made: MadeModule): Description {
  const module: DescriptionModule = {
    name: "M",
    byteOrder: "little",
    alignments: {},
    memorySegments: [],
    epk: null,
    measurements: new Map(),
    ...made,
    characteristics: byName(made.characteristics ?? []),
    axisPoints: byName(made.axisPoints ?? []),
    layouts: byName(made.layouts ?? []),
    conversions: byName(made.conversions ?? []),
    functions: byName(made.functions ?? []),
    groups: byName(made.groups ?? []),
  };
  return {
    version: "1.71",
    project: "P",
    encoding: "utf-8",
    modules: [module],
    notRead: [],
    missingIncludes: [],
    notes: [],
  };
}

export function segments(bytes: readonly number[], address = 0x1000): ImageSegment[] {
  return [{ address, bytes: Uint8Array.from(bytes) }];
}

/** Reads bytes at 0x1000 by a module made by hand. */
export function readMade(made: MadeModule, bytes: readonly number[], address = 0x1000): ImageReading {
  return readImageByDescription(describedBy(made), { segments: segments(bytes, address) });
}

/** The one characteristic of that name; throws with the reason where it was not read. */
export function readOne(made: MadeModule, bytes: readonly number[], name = "C"): ReadCharacteristic {
  const reading = readMade(made, bytes);
  const found = reading.characteristics.find((one) => one.name === name);
  if (!found) throw new Error(`${name}: ${JSON.stringify(reading.notRead)}`);
  return found;
}

/** Why a characteristic was not read; throws where it was. */
export function reasonOf(made: MadeModule, bytes: readonly number[], name = "C"): string {
  const found = readMade(made, bytes).notRead.find((one) => one.name === name);
  if (!found) throw new Error(`${name} was read.`);
  return found.reason;
}

/** Little-endian bytes of 16-bit numbers. */
export function words(...values: number[]): number[] {
  return values.flatMap((value) => [value & 0xff, (value >> 8) & 0xff]);
}
