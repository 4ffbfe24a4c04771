import { gzipSync } from "node:zlib";
import type { RandomStream } from "@/lib/signal/random";
import {
  CALIBRATION_READERS,
  type CalibrationReader,
  calibrationSeeds,
} from "@/tests/fuzz/calibration-seeds";
import { judgeDescription } from "@/tests/fuzz/judge-description";
import { judgeFlip, judgeImage } from "@/tests/fuzz/judge-image";
import { judgeOutcome } from "@/tests/fuzz/judge-outcome";
import { judgeValuesFile } from "@/tests/fuzz/judge-values-file";
import { flipByte, moveLine, mutate } from "@/tests/fuzz/mutate";
import { type LogReader, READERS, seedFiles } from "@/tests/fuzz/seed-files";
import { mutateElements } from "@/tests/fuzz/values-file-seeds";

export type FuzzedReader = LogReader | CalibrationReader;
/** Makes one file from a stream of random numbers and has it judged; a fault of the reader is thrown. */
type FuzzCase = (random: RandomStream) => string;

function logCase(reader: LogReader): FuzzCase {
  const files = seedFiles(reader);
  return (random) => {
    const file = files[random.nextBelow(files.length)];
    const other = files[random.nextBelow(files.length)];
    const packedFirst = random.nextBelow(2) === 1;
    const packed = (bytes: Uint8Array) => (reader === "gzip" ? new Uint8Array(gzipSync(bytes)) : bytes);
    return judgeOutcome(
      packedFirst ? mutate(packed(file), other, random) : packed(mutate(file, other, random)),
    );
  };
}

function calibrationCase(reader: CalibrationReader): FuzzCase {
  const files = calibrationSeeds(reader);
  const fileName = reader === "intel-hex" ? "image.hex" : "image.s19";
  return (random) => {
    const file = files[random.nextBelow(files.length)];
    const other = files[random.nextBelow(files.length)];
    if (reader === "description") return judgeDescription(mutate(file, other, random), other);
    if (reader === "values-file")
      return judgeValuesFile(
        random.nextBelow(2) === 0 ? mutate(file, other, random) : mutateElements(files[0], random),
      );
    switch (random.nextBelow(4)) {
      case 0:
        return judgeImage(mutate(file, other, random), fileName);
      case 1:
        return judgeImage(moveLine(file, random), fileName);
      default:
        return judgeFlip(flipByte(file, random), file, fileName);
    }
  };
}

const isLogReader = (word: string): word is LogReader => READERS.some((each) => each === word);

/** The case of a reader by its word. Throws for a word that names none. */
export function fuzzCase(word: string): FuzzCase {
  if (isLogReader(word)) return logCase(word);
  const reader = CALIBRATION_READERS.find((each) => each === word);
  if (!reader) throw new Error(`no reader ${word}`);
  return calibrationCase(reader);
}
