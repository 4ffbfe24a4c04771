import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { describe, expect, it, vi } from "vitest";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import { readImage } from "@/lib/calibration/image/read-image";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";

vi.setConfig({ testTimeout: 60_000 });

const golden = (path: string) => gunzipSync(readFileSync(new URL(`../../golden/${path}`, import.meta.url)));
const read = (name: string) =>
  readImageByDescription(
    readDescription([{ name: `${name}.a2l`, bytes: golden(`descriptions/${name}.a2l.gz`) }]),
    readImage(golden("images/ASAP2_Demo_V171.hex.gz"), { fileName: "ASAP2_Demo_V171.hex" }),
  );

interface Fact {
  type: string;
  dims?: number[];
  index?: string;
  raw?: number[];
  phys?: unknown[];
  rescale_raw?: number[];
  text?: string;
  note?: string;
  bytes_used: number;
  axes?: { attr: string; ref?: string; raw?: number[]; phys?: unknown[] }[];
}
const facts: Record<string, Fact> = JSON.parse(golden("descriptions/values.json.gz").toString("utf8")).values;
const reading = read("ASAP2_Demo_V171");
const found = new Map(reading.characteristics.map((one) => [one.name, one]));

/** From the order of addresses, y fastest, to x fastest; further axes stay outside. */
function fromColumns<T>(cells: readonly T[], [nx, ny]: readonly number[]): T[] {
  const logical: T[] = [];
  for (let plane = 0; plane < cells.length; plane += nx * ny)
    for (let y = 0; y < ny; y++) for (let x = 0; x < nx; x++) logical.push(cells[plane + x * ny + y]);
  return logical;
}

describe("the demonstration image by its description (values decoded in Python, apart from this reader)", () => {
  it("knows every characteristic and shared axis, and what has no memory", () => {
    const virtual = Object.keys(facts).filter((name) => facts[name].note?.startsWith("virtual"));
    expect(reading.notRead.map(({ name }) => name)).toEqual(virtual.sort());
    expect([...found.keys(), ...virtual].sort()).toEqual(Object.keys(facts).sort());
    expect(reading.notRead[0].reason).toBe(
      "it has no memory of its own: its value comes by the formula X1 - 9 from ASAM.C.SCALAR.SBYTE.IDENTICAL.",
    );
    expect(found.size).toBe(85);
  });

  const memory = Object.entries(facts).filter(([, { note }]) => !note?.startsWith("virtual"));
  it.each(memory)("%s", (name, fact) => {
    const one = found.get(name);
    if (!one) throw new Error(`${name} was not read`);
    expect(one.type).toBe(fact.type);
    if (fact.type === "ASCII") return expect(one.characters).toBe(fact.text);
    const order = <T>(cells: readonly T[]) =>
      fact.index === "COLUMN_DIR" && fact.dims && fact.dims.length > 1
        ? fromColumns(cells, fact.dims)
        : cells;
    const raw = fact.raw ?? fact.rescale_raw ?? [];
    expect(one.raw).toEqual(order(raw));
    // The decoder left formulas alone and says which raw number goes into which; "X1+4" is the only one.
    const physical = (fact.phys ?? raw).map((value) =>
      typeof value === "object" && value !== null ? Number((value as { raw: number }).raw) + 4 : value,
    );
    expect(one.values).toEqual(order(physical));
    if (fact.dims) expect(one.dims).toEqual(fact.dims);
    for (const [k, axis] of (fact.axes ?? []).entries()) {
      expect(one.axes[k].kind).toBe(axis.attr);
      expect(one.axes[k].reference).toBe(axis.ref ?? null);
      if (axis.raw) expect([one.axes[k].raw, one.axes[k].points]).toEqual([axis.raw, axis.phys]);
      expect(one.axes[k].points).toHaveLength(one.dims[k]);
      expect(one.axes[k].raw).toHaveLength(one.dims[k]);
    }
    const end = Math.max(...one.bytes.map(({ address, length }) => address + length));
    expect(end - one.address).toBe(fact.bytes_used);
  });

  it("puts the points of shared and curve axes to their cells", () => {
    const points = (name: string) => found.get(name)?.axes[0].points;
    expect(points("ASAM.C.CURVE.COM_AXIS")).toEqual(facts["ASAM.C.AXIS_PTS.UBYTE_8"].phys);
    // The curve gives 0 to 7 at its own eight points.
    expect(points("ASAM.C.CURVE.CURVE_AXIS")).toEqual(facts["ASAM.C.CURVE_AXIS"].axes?.[0].phys);
    // Pairs 17→32, 20→64, 32→128, 176→208, 210→255 over nine cells 32 apart; nothing leads to cell 0.
    const rescaled = points("ASAM.C.CURVE.RES_AXIS") ?? [];
    expect(rescaled.slice(0, 7)).toEqual([null, 17, 20, 26, 32, 89.6, 147.2]);
    expect(rescaled[7]).toBeCloseTo(176 + (34 * 16) / 47, 10);
    expect(rescaled[8]).toBe(210);
  });

  it("tells what the description says around the values", () => {
    const one = found.get("ASAM.C.SCALAR.SBYTE.IDENTICAL");
    expect(one).toMatchObject({
      unit: "hours",
      decimals: 1,
      limits: { lower: -100, upper: 100, extended: [-128, 127] },
      rawStep: 1,
      readOnly: false,
    });
    expect(found.get("ASAM.C.SCALAR.SWORD.RAT_FUNC_DIV_10")?.rawStep).toBeCloseTo(0.1, 12);
    expect(found.get("ASAM.C.DEPENDENT.REF_3.SWORD")?.formula).toBe("X1 + X2");
    expect(one?.functions[0]).toBe("FunctionScalar");
    expect(found.get("ASAM.C.DEPENDENT.REF_1.SWORD")?.functions).toEqual([
      "FunctionDependentParameters",
      "FunctionScalar",
    ]);
    expect(found.get("ASAM.C.ASCII.UBYTE.NUMBER_42")?.groups).toEqual(["Group_Type_ASCII", "Group_Type_All"]);
    expect(reading.epk).toEqual({ state: "none", expected: null, found: null });
    // Start and length as srec_info states the first range of the image.
    expect(reading.memorySegments[0]).toEqual({
      name: "ECU_Code",
      programType: "DATA",
      address: 0x16000,
      length: 0x86c,
    });
    expect(reading.problems.join(" ")).toMatch(/INDEX_DECR.*Check one known cell/);
  });

  it("reads the same raw numbers by the description with all keywords, and that it belongs to another image", () => {
    const other = read("ASAP2_Demo_V171_allKeywords");
    // That description gives some curves other axes; what kept its shape has the same raw numbers.
    const kept = other.characteristics.filter(
      (one) => JSON.stringify(one.dims) === JSON.stringify(found.get(one.name)?.dims),
    );
    expect(kept.length).toBeGreaterThan(60);
    for (const one of kept) expect([one.name, one.raw]).toEqual([one.name, found.get(one.name)?.raw]);
    expect(other.epk).toEqual({ state: "mismatch", expected: "EPROM identifier test", found: null });
  });
});
