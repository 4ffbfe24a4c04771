import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import { cdfOfReading } from "@/lib/calibration/cdf/cdf-instances";
import { compareWithCdf } from "@/lib/calibration/cdf/compare-with-cdf";
import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import { writeCdfx } from "@/lib/calibration/cdf/write-cdfx";
import { readImage } from "@/lib/calibration/image/read-image";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";

const golden = (path: string) => gunzipSync(readFileSync(new URL(`../../golden/${path}`, import.meta.url)));
const reading = readImageByDescription(
  readDescription([{ name: "demo.a2l", bytes: golden("descriptions/ASAP2_Demo_V171.a2l.gz") }]),
  readImage(golden("images/ASAP2_Demo_V171.hex.gz"), { fileName: "demo.hex" }),
);
const selection = cdfOfReading(reading);
const text = [...writeCdfx("demo", selection.instances)].join("");

interface Fact {
  type: string;
  index?: string;
  dims?: number[];
  phys?: unknown[];
  text?: string;
}
const facts: Record<string, Fact> = JSON.parse(golden("descriptions/values.json.gz").toString("utf8")).values;
/** Values of an instance, taken out of the file by a search, apart from the reader. */
const valuesOf = (name: string) => {
  const [, rest] = text.split(`<SW-INSTANCE>\n<SHORT-NAME>${name}</SHORT-NAME>`);
  const phys = /<SW-VALUES-PHYS>(.*?)<\/SW-VALUES-PHYS>/s.exec(rest ?? "")?.[1] ?? "";
  return [...phys.matchAll(/<(V|VT)>([^<]*)<\/\1>/g)].map(([, tag, value]) =>
    tag === "V" ? Number(value) : value,
  );
};

describe("the demonstration image as a values file", () => {
  it("holds what was decoded in Python, apart from this reader, and names what has no value", () => {
    // Formulas are stated there as text, and arrays stored by columns in the order of memory: other tests deal with them.
    const rows = Object.entries(facts).flatMap(([name, { phys, index, dims }]) =>
      phys?.every((value) => typeof value !== "object") && (index !== "COLUMN_DIR" || (dims?.length ?? 0) < 2)
        ? [{ name, phys }]
        : [],
    );
    let compared = 0;
    for (const { name, phys } of rows) {
      if (selection.leftOut.some((out) => out.name === name)) continue;
      const found = valuesOf(name);
      expect(found, name).toHaveLength(phys.length);
      phys.forEach((value, k) => {
        if (typeof value === "number")
          expect(Math.abs(Number(found[k]) - value), name).toBeLessThanOrEqual(1e-9 * Math.abs(value));
        else expect(found[k], name).toBe(value);
      });
      compared++;
    }
    expect(compared).toBeGreaterThan(60);
    expect(selection.leftOut.map(({ name }) => name)).toEqual(reading.notRead.map(({ name }) => name));
  });
  it("is read back without a difference to the image", () => {
    const file = readCdfx(new TextEncoder().encode(text));
    expect([file.problems, file.notes]).toEqual([[], []]);
    expect(file.instances).toEqual(selection.instances);
    expect(compareWithCdf(reading, file)).toMatchObject({
      compared: reading.characteristics.length,
      equal: reading.characteristics.length,
      differenceCount: 0,
      otherShape: [],
      onlyInImage: [],
    });
  });
});
