import { readFileSync } from "node:fs";
import { basename } from "node:path";
import { parseArgs } from "node:util";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import type { Description } from "@/lib/calibration/a2l/types";
import { checkValues } from "@/lib/calibration/cdf/check-values";
import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import { changeSetOf } from "@/lib/calibration/changes/change-set";
import { readImage } from "@/lib/calibration/image/read-image";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import {
  cdfReport,
  changesReport,
  descriptionReport,
  imageReport,
  valuesReport,
} from "@/lib/campaign/changes-report";
import { TwinpassError } from "@/lib/errors";

const USAGE = `Usage: npm run -s changes -- A.hex B.hex [--description ecu.a2l [included.a2l ...]]
       npm run -s changes -- A.hex --description ecu.a2l --values
       npm run -s changes -- A.hex --description ecu.a2l --cdf values.cdfx
Raw binaries need --base 0x810000. Two descriptions: --description-a old.a2l --description-b new.a2l`;

class CallError extends Error {}

interface Call {
  images: string[];
  /** Files of the description of each side; the same list where one serves both. */
  a: string[];
  b: string[];
  base: number | undefined;
  values: boolean;
  /** A values file that one image is held against. */
  cdf: string | null;
}

/** Differences, and names of each kind, that are printed of a values file. */
const MOST_PRINTED = 10_000;

const MANY = { type: "string", multiple: true } as const;

function call(): Call {
  const { values: options, positionals } = parseArgs({
    allowPositionals: true,
    options: {
      description: MANY,
      "description-a": MANY,
      "description-b": MANY,
      base: { type: "string" },
      values: { type: "boolean" },
      cdf: { type: "string" },
    },
  });
  const values = options.values ?? false;
  const cdf = options.cdf ?? null;
  const ofOne = cdf !== null ? "--cdf" : values ? "--values" : null;
  const wanted = ofOne ? 1 : 2;
  const isDescription = (path: string) => /\.a2l$/i.test(path);
  const images = positionals.filter((path) => !isDescription(path)).slice(0, wanted);
  if (images.length < wanted) throw new CallError(ofOne ? "Name one image." : "Name two images.");
  const more = positionals.filter((path) => !images.includes(path));
  const shared = options.description ?? [];
  if (shared.length === 0 && more.length > 0) {
    throw new CallError(`${basename(more[0])} is one file too many: name it behind --description.`);
  }
  const both = [...shared, ...more];
  const [a, b] = [options["description-a"] ?? both, options["description-b"] ?? both];
  if (ofOne && a.length === 0) throw new CallError(`${ofOne} needs a --description.`);
  return { images, a, b, base: baseOf(options.base), values, cdf };
}

function baseOf(text: string | undefined): number | undefined {
  if (text === undefined) return undefined;
  if (!/^(0x[\da-f]+|\d+)$/i.test(text))
    throw new CallError(`"${text}" is no address; write --base 0x810000.`);
  return Number(text);
}

function bytesOf(path: string): Uint8Array {
  try {
    return readFileSync(path);
  } catch (error) {
    throw new CallError(
      `Can't read ${basename(path)}: ${(error as NodeJS.ErrnoException).code ?? "unknown error"}.`,
    );
  }
}

function described(files: readonly string[]): Description | null {
  if (files.length === 0) return null;
  return readDescription(files.map((path) => ({ name: basename(path), bytes: bytesOf(path) })));
}

function print(result: unknown): void {
  console.log(JSON.stringify(result, null, 1));
}

function compare({ images, a, b, base }: Call): void {
  const [fileA, fileB] = images.map((path) => ({ name: basename(path), bytes: bytesOf(path) }));
  const imageA = readImage(fileA.bytes, { fileName: fileA.name, baseAddress: base });
  const imageB = readImage(fileB.bytes, { fileName: fileB.name, baseAddress: base });
  const descriptionA = described(a);
  const descriptionB = a.join("\n") === b.join("\n") ? descriptionA : described(b);
  const [byA, byB] = [descriptionA ?? descriptionB, descriptionB ?? descriptionA];
  const changes = changeSetOf(
    { image: imageA, reading: byA && readImageByDescription(byA, imageA) },
    { image: imageB, reading: byB && readImageByDescription(byB, imageB) },
    { readBy: descriptionA && descriptionB ? "both" : descriptionA ? "a" : "b" },
  );
  print(
    changesReport({
      a: imageReport(imageA, fileA.bytes),
      b: imageReport(imageB, fileB.bytes),
      changes,
      descriptions: [...new Set([byA, byB])].flatMap((one) => (one ? [descriptionReport(one)] : [])),
    }),
  );
}

function ofOneImage({ images, base, values, cdf }: Call, description: Description): void {
  const image = readImage(bytesOf(images[0]), { fileName: basename(images[0]), baseAddress: base });
  const reading = readImageByDescription(description, image);
  const { values: byName, ...said } = valuesReport(reading, descriptionReport(description));
  print({
    ...(cdf === null ? {} : { cdf: cdfReport(checkValues(reading, readCdfx(bytesOf(cdf)), MOST_PRINTED)) }),
    ...(values ? { values: byName } : {}),
    ...said,
  });
}

/** Prints changes, values or a check of values as JSON. Exit status 0: read; 1: a file is refused; 2: wrong call. */
function main(): number {
  try {
    const asked = call();
    const description = asked.values || asked.cdf !== null ? described(asked.a) : null;
    if (description) ofOneImage(asked, description);
    else compare(asked);
    return 0;
  } catch (error) {
    if (error instanceof TwinpassError) {
      console.error(`${error.code}: ${error.message}`);
      return 1;
    }
    if (error instanceof CallError || (error as NodeJS.ErrnoException).code?.startsWith("ERR_PARSE_ARGS")) {
      console.error(`${(error as Error).message}\n${USAGE}`);
      return 2;
    }
    throw error;
  }
}

process.exitCode = main();
