import type { ImageReading, ReadAxis, ReadCharacteristic } from "@/lib/calibration/values/types";

/** A characteristic as the reader gives it; what a test does not name is plain. */
export function madeCharacteristic(over: Partial<ReadCharacteristic> = {}): ReadCharacteristic {
  const values = over.values ?? [1];
  return {
    name: "value",
    text: "",
    type: "VALUE",
    address: 0x1000,
    unit: "",
    decimals: 1,
    dims: [],
    axes: [],
    values,
    raw: values.map((value) => (typeof value === "number" ? value : 0)),
    characters: null,
    limits: { lower: -1000, upper: 1000, extended: null },
    rawStep: 0.1,
    functions: [],
    groups: [],
    readOnly: false,
    formula: null,
    bytes: [],
    ...over,
  };
}

/** An axis with points of its own. */
export function madeAxis(points: ReadAxis["points"], over: Partial<ReadAxis> = {}): ReadAxis {
  return {
    kind: "STD_AXIS",
    reference: null,
    inputQuantity: null,
    unit: "",
    decimals: 0,
    points,
    raw: points.map((point) => (typeof point === "number" ? point : 0)),
    ...over,
  };
}

/** A reading of these characteristics and nothing else. */
export function madeReading(...characteristics: ReadCharacteristic[]): ImageReading {
  return {
    reading: 1,
    characteristics,
    notRead: [],
    memorySegments: [],
    epk: { state: "none", expected: null, found: null },
    problems: [],
  };
}
