import type { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import { readAlignment, readByteOrder } from "@/lib/calibration/a2l/blocks/read-layout";
import type { Alignments, ByteOrder, MemorySegment } from "@/lib/calibration/a2l/types";

/** What MOD_COMMON and MOD_PAR say of a module. */
export interface ModuleFacts {
  byteOrder: ByteOrder | null;
  alignments: Alignments;
  memorySegments: MemorySegment[];
  epkText: string | null;
  epkAddresses: number[];
}

/** Reads MOD_COMMON: byte order and alignments of everything that states none of its own. */
export function readModCommon(reader: BlockReader, facts: ModuleFacts): void {
  const place = reader.begun;
  reader.quoted();
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    if (keyword === "BYTE_ORDER") facts.byteOrder = readByteOrder(reader, place);
    else if (keyword === "DEPOSIT") {
      if (reader.word("deposit") === "DIFFERENCE") {
        const message =
          "The module stores axis points as differences unless they say otherwise (DEPOSIT DIFFERENCE in MOD_COMMON). They are read as points; compare one axis that you know.";
        reader.findings.note("axes_as_differences", message, place);
      }
    } else if (!readAlignment(reader, keyword, facts.alignments)) reader.pass(keyword, "MOD_COMMON");
  }
}

function readSegment(reader: BlockReader): MemorySegment {
  const segment = {
    name: reader.word("name of a memory segment"),
    text: reader.quoted(),
    programType: reader.word("program type"),
  };
  reader.word("memory type");
  reader.word("attribute");
  const place = { address: reader.whole("address"), length: reader.whole("size") };
  // The five offsets are numbers, which are no options and are passed over.
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option())
    reader.pass(keyword, "MEMORY_SEGMENT");
  return { ...segment, ...place };
}

/** Addresses of one EPK; each is held against the image letter by letter. */
const MOST_EPK_ADDRESSES = 100;

/** Reads MOD_PAR: memory segments and the text by which image and description are known to belong together. */
export function readModPar(reader: BlockReader, facts: ModuleFacts): void {
  reader.quoted();
  for (let keyword = reader.option(); keyword !== null; keyword = reader.option()) {
    if (keyword === "EPK") facts.epkText = reader.word("EPK");
    else if (keyword === "ADDR_EPK") {
      if (facts.epkAddresses.length < MOST_EPK_ADDRESSES)
        facts.epkAddresses.push(reader.whole("address of the EPK"));
      else reader.fault ??= `it states more than ${MOST_EPK_ADDRESSES} addresses of the EPK`;
    } else if (keyword === "/MEMORY_SEGMENT") {
      const segment = readSegment(reader);
      if (reader.fault === null) facts.memorySegments.push(segment);
      reader.findings.keep(2, reader.begun);
    } else reader.pass(keyword, "MOD_PAR");
  }
}
