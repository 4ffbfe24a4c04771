import { SaxesParser } from "saxes";
import { InstanceCollector } from "@/lib/calibration/cdf/collect-instances";
import { decodedPieces, xmlEncoding } from "@/lib/calibration/cdf/decode-xml";
import type { CdfFile } from "@/lib/calibration/cdf/types";
import { FileRefusedError } from "@/lib/errors";

/** Real files nest some fifteen deep, structures a little more. */
const DEEPEST = 64;

const localName = (name: string) => name.slice(name.indexOf(":") + 1);

/**
 * Reads a values file, ASAM CDF 2.0 (CDFX): physical values by instance, in both layouts that occur (values below the instance or below
 * its variant). A document type is never fetched, entities of its own are an error. Contradictions are problems, not refusals.
 * @throws FileRefusedError with a code of CDF_REFUSALS; damaged XML with its line
 */
export function readCdfx(bytes: Uint8Array): CdfFile {
  if (bytes.length === 0) throw new FileRefusedError("empty_file", "The file is empty.");
  const encoding = xmlEncoding(bytes);
  const collector = new InstanceCollector();
  if (encoding.note !== null) collector.note(encoding.note);
  const parser = new SaxesParser({ xmlns: false, position: true });
  let isCdf = false;
  parser.on("error", (error) => {
    throw damaged(parser.line, `it is no well-formed XML (${error.message.slice(0, 120)})`);
  });
  parser.on("doctype", () =>
    collector.note("The file names a document type; nothing was fetched for it and it was not checked."),
  );
  parser.on("opentag", ({ name }) => {
    const local = localName(name);
    if (collector.depth >= DEEPEST) throw damaged(parser.line, `elements nest more than ${DEEPEST} deep`);
    if (local === "SW-INSTANCE" || (local === "MSRSW" && collector.depth === 0)) isCdf = true;
    collector.open(local);
  });
  parser.on("text", (piece) => collector.text(piece));
  parser.on("cdata", (piece) => collector.text(piece));
  parser.on("closetag", () => collector.close());
  for (const piece of decodedPieces(bytes, encoding.label)) parser.write(piece);
  parser.close();
  if (!isCdf)
    throw new FileRefusedError(
      "not_cdf",
      "The file is XML but no ASAM CDF values file: it has no MSRSW element.",
    );
  return collector.finish();
}

function damaged(line: number, reason: string): FileRefusedError {
  return new FileRefusedError("file_damaged", `Line ${line}: ${reason}. Export the values again.`, { line });
}
