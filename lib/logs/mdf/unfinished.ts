import { FileRefusedError } from "@/lib/errors";
import { type MdfFile, refuseDamaged } from "@/lib/logs/mdf/mdf-blocks";
import { lastPlainBlock } from "@/lib/logs/mdf/mdf-data";
import type { MdfTree } from "@/lib/logs/mdf/mdf-tree";
import type { LogProblem } from "@/lib/logs/types";

/** What the writer of a file left undone, and what follows from it for the reader. */
export interface Unfinished {
  /** The numbers of records were never written: they follow from the bytes. */
  countsMissing: boolean;
  problem: LogProblem | null;
  /** Finds the block that runs to the end of the file, once the structure is known. */
  settle: (tree: MdfTree) => void;
  /** Refuses mixed records in an unfinished file. */
  demandSorted: () => void;
}

const COUNTS = 1;
const LAST_LENGTH = 4;
/** What else may be unfinished, by its bit. */
const OTHERS: readonly [number, string][] = [
  [2, "the counts of its reductions"],
  [8, "the length of its last reduction block"],
  [16, "its last list of data blocks"],
  [32, "the sizes of its text groups"],
  [64, "the places of its text values"],
];

function refuse(what: string): never {
  throw new FileRefusedError(
    "format_not_supported",
    `${what}. Open the file once in the program that recorded it, save it, and upload that.`,
  );
}

function refuseVersion(file: MdfFile): void {
  const text = String.fromCharCode(...file.bytes.subarray(8, 16))
    .replaceAll("\u0000", " ")
    .trim();
  const version = file.view.getUint16(28, true);
  if (version >= 400 && version < 500) return;
  throw new FileRefusedError(
    "format_not_supported",
    `This is an MDF file of version ${text || version / 100}; only version 4 is read. Export the log as MDF 4 or as CSV.`,
  );
}

/** Reads the head of the file: version, and whether it was finished. Throws FileRefusedError for what can't be read. */
export function checkFinished(file: MdfFile): Unfinished {
  if (file.bytes.length < 64 + 24)
    refuseDamaged(`The file has ${file.bytes.length} bytes, less than its head`);
  refuseVersion(file);
  const finished = file.bytes[0] === "M".charCodeAt(0);
  const flags = finished ? 0 : file.view.getUint16(60, true);
  const custom = finished ? 0 : file.view.getUint16(62, true);
  const other = OTHERS.find(([bit]) => flags & bit);
  if (other) refuse(`The MDF file was never finished by its logger: ${other[1]} are missing`);
  if (custom !== 0 || flags > 127)
    refuse("The MDF file was never finished, in a way that only its logger knows");
  return {
    countsMissing: (flags & COUNTS) !== 0,
    problem:
      flags === 0
        ? null
        : {
            code: "file_not_finished",
            message:
              "The logger did not finish this file; the samples were counted from the bytes that are there.",
          },
    demandSorted: () => {
      if (flags !== 0) refuse("The MDF file was never finished and mixes records of several kinds");
    },
    settle: (tree) => {
      if (!(flags & LAST_LENGTH)) return;
      file.openBlockAt = Math.max(0, ...tree.dataGroups.map((group) => lastPlainBlock(file, group.dataLink)));
      if (file.openBlockAt < file.furthest)
        refuse("The MDF file was never finished and its last data block is not the last thing in it");
    },
  };
}
