import { BlockReader } from "@/lib/calibration/a2l/blocks/block-reader";
import { readModule } from "@/lib/calibration/a2l/blocks/read-module";
import { cut, Findings } from "@/lib/calibration/a2l/findings";
import { TokenSource } from "@/lib/calibration/a2l/token-source";
import type { Description, DescriptionFile, DescriptionModule } from "@/lib/calibration/a2l/types";
import { FileRefusedError } from "@/lib/errors";

function readProject(reader: BlockReader, modules: DescriptionModule[]): string {
  const project = reader.word("name");
  reader.quoted();
  for (let option = reader.option(); option !== null; option = reader.option()) {
    if (option === "/MODULE") modules.push(readModule(reader));
    else if (option === "/HEADER") reader.passBlock();
    else reader.pass(option, "PROJECT");
  }
  return project;
}

/** The two numbers of ASAP2_VERSION as people write them, e.g. 1.71. */
const versionOf = (reader: BlockReader) => `${reader.word("version")}.${reader.word("version")}`;

/**
 * Reads an ASAP2 description (ASAM MCD-2 MC 1.5 to 1.7): `files` with the main one first, the others as it includes
 * them, by base name. Time and memory grow with the bytes. What values do not need is passed over, what can't be read is
 * in `notRead` with the reason. Throws FileRefusedError with a code of DESCRIPTION_REFUSALS, file and line.
 */
export function readDescription(files: readonly DescriptionFile[]): Description {
  const findings = new Findings();
  const source = new TokenSource(files, findings);
  const reader = new BlockReader(source, findings);
  const modules: DescriptionModule[] = [];
  let version: string | null = null;
  let project: string | null = null;
  for (let option = reader.option(); option !== null; option = reader.option()) {
    if (option === "/PROJECT" && project === null) project = readProject(reader, modules);
    else if (option === "ASAP2_VERSION") version = versionOf(reader);
    else if (option.startsWith("/")) {
      findings.noteOnce(
        "block_outside",
        option,
        `The block ${option.slice(1)} stands outside of the project and was passed over.`,
        reader.begun,
      );
      reader.passBlock();
    } else if (option === "A2ML_VERSION") reader.numbers(2);
  }
  const main = files[0].name;
  if (project === null) {
    throw new FileRefusedError(
      "no_project",
      `${main} holds no PROJECT, so it is no description (A2L) or not the main file of one. Put the main file first.`,
    );
  }
  if (modules.length === 0) {
    throw new FileRefusedError(
      "no_module",
      `The project ${cut(project)} in ${main} holds no MODULE, so it describes nothing.`,
    );
  }
  return { version, project, encoding: source.encoding, modules, ...findings.close(main) };
}
