import { readDescription } from "@/lib/calibration/a2l/read-description";
import { DESCRIPTION_REFUSALS, type Description, type DescriptionModule } from "@/lib/calibration/a2l/types";
import { FileRefusedError } from "@/lib/errors";

export const asBytes = (text: string): Uint8Array => new TextEncoder().encode(text);

/** A project with one module that holds `body` from its fourth line on. */
export const inModule = (body: string): string =>
  `ASAP2_VERSION 1 61\n/begin PROJECT P "one"\n/begin MODULE M "two" /begin MOD_COMMON "" BYTE_ORDER MSB_LAST /end MOD_COMMON\n${body}\n/end MODULE\n/end PROJECT\n`;

/** Reads files given as texts, the first one being the main file. */
export function readTexts(files: Record<string, string | Uint8Array>): Description {
  return readDescription(
    Object.entries(files).map(([name, content]) => ({
      name,
      bytes: typeof content === "string" ? asBytes(content) : content,
    })),
  );
}

/** The only module of a description whose module holds `body`; with everything that was noted. */
export function readModuleOf(body: string): Description & { module: DescriptionModule } {
  const description = readTexts({ "main.a2l": inModule(body) });
  const [module] = description.modules;
  return { ...description, module };
}

/** Code and sentence of the refusal, which must be a listed one. Any other error is thrown on. */
export function descriptionRefusal(act: () => unknown): { code: string; message: string } {
  try {
    act();
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    if (!(DESCRIPTION_REFUSALS as readonly string[]).includes(error.code))
      throw new Error(`unlisted: ${error.code}`);
    return { code: error.code, message: error.message };
  }
  return { code: "read", message: "" };
}
