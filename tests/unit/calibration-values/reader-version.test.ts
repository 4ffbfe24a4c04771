import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { expect, it } from "vitest";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import { readImage } from "@/lib/calibration/image/read-image";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import { digestOf } from "@/lib/canonical-json";

const golden = (path: string) => gunzipSync(readFileSync(new URL(`../../golden/${path}`, import.meta.url)));

/** SHA-256 of what each version of the reader makes of the demonstration image. A regression capture, not a truth. */
const CAPTURED: Readonly<Record<string, string>> = {
  "1.0.0": "17df4d52050e9ab54053698c0bb91529d84bd4a8c315b0f27883c6cd090a21f2",
};

it("what the reader makes of an image changes only with its version, which stored results name", () => {
  const reading = readImageByDescription(
    readDescription([{ name: "demo.a2l", bytes: golden("descriptions/ASAP2_Demo_V171.a2l.gz") }]),
    readImage(golden("images/ASAP2_Demo_V171.hex.gz"), { fileName: "demo.hex" }),
  );
  const values = reading.characteristics.map(({ name, raw, values: physical, axes, dims, bytes, unit }) => ({
    ...{ name, raw, physical, axes, dims, bytes, unit },
  }));
  expect(digestOf(values)).toBe(CAPTURED[READER_VERSION]);
});
