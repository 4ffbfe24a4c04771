import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { gunzipSync } from "node:zlib";
import { readImage } from "@/lib/calibration/image/read-image";
import { FileRefusedError } from "@/lib/errors";
import { type ImageCase, ODD_IMAGES } from "./odd-images";

// npm run soak:images: our ranges and SHA-256 against Debian's srecord and python3-intelhex as installed, on the golden images
// and on the odd cases. Ends with 1 where two that read differ, or where one reads what the other refuses without a reason stated.
type Range = [first: number, last: number, sha256: string];
/** What a program read, or why not; null = this program does not read this kind. */
type Outcome = { ranges: Range[] } | { refused: string } | null;

const say = (line: string) => console.log(`soak:images: ${line}`);
const GOLDEN = fileURLToPath(new URL("../golden/images/", import.meta.url));
const sha256 = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");
const byAddress = (ranges: Range[]) => [...ranges].sort((a, b) => a[0] - b[0]);

const goldenCases: ImageCase[] = readdirSync(GOLDEN)
  .filter((file) => file.endsWith(".gz"))
  .map((file) => ({
    name: file.slice(0, -3),
    kind: file.includes(".hex") ? "hex" : "s19",
    bytes: new Uint8Array(gunzipSync(readFileSync(join(GOLDEN, file)))),
    meant: null,
  }));
const cases = [...goldenCases, ...ODD_IMAGES];

function ours({ bytes, kind }: ImageCase): Outcome {
  try {
    const { segments } = readImage(bytes, { fileName: `image.${kind}` });
    return { ranges: segments.map((s) => [s.address, s.address + s.bytes.length - 1, sha256(s.bytes)]) };
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    return { refused: error.message };
  }
}

/** Ranges from srec_info, bytes of each from srec_cat; its first words of complaint where it refuses. */
function bySrecord(file: string, kind: ImageCase["kind"]): Outcome {
  const format = kind === "hex" ? "-intel" : "-motorola";
  const info = spawnSync("srec_info", [file, format], { encoding: "utf8" });
  const refused = (stderr: string): Outcome => ({
    refused: stderr.replaceAll(/\s+/g, " ").split(`${file}: `).at(-1)?.trim() ?? "",
  });
  if (info.status !== 0) return refused(info.stderr);
  const spans = [...info.stdout.matchAll(/^(?:Data:)?\s+([\dA-F]+)(?: - ([\dA-F]+))?$/gm)];
  const ranges: Range[] = [];
  for (const [, first, last] of spans) {
    const [from, to] = [Number.parseInt(first, 16), Number.parseInt(last ?? first, 16)];
    // Its offsets wrap at 2^32; a negative one beyond 2 GiB ends the program.
    const down = `${(2 ** 32 - from) % 2 ** 32}`;
    const crop = ["-crop", `${from}`, `${to + 1}`, "-offset", down, "-o", "-", "-binary"];
    const cut = spawnSync("srec_cat", [file, format, ...crop], { maxBuffer: 1 << 28 });
    if (cut.status !== 0) return refused(cut.stderr.toString());
    ranges.push([from, to, sha256(cut.stdout)]);
  }
  return ranges.length > 0 ? { ranges: byAddress(ranges) } : { refused: "no data" };
}

/** All HEX files in one run of Debian's python, which sees Debian's packages. */
function byIntelhex(files: string[]): Map<string, Outcome> | null {
  const script = fileURLToPath(new URL("./read_intelhex.py", import.meta.url));
  const done = spawnSync("/usr/bin/python3", [script, ...files], { encoding: "utf8", maxBuffer: 1 << 28 });
  if (done.status !== 0) return null;
  const read = JSON.parse(done.stdout) as Record<string, Range[] | string>;
  return new Map(
    Object.entries(read).map(([file, got]) => [
      file,
      typeof got === "string" ? { refused: got } : { ranges: byAddress(got) },
    ]),
  );
}

const told = (outcome: Outcome) => (outcome === null ? "-" : "ranges" in outcome ? "reads" : "refuses");
const reason = (outcome: Outcome) => (outcome && "refused" in outcome ? outcome.refused.slice(0, 70) : "");

/** Whether ours and a reference say the same; "other" = both read, and not the same. */
function compare(own: Outcome, other: Outcome): "same" | "one refuses" | "other" {
  if (own === null || other === null) return "same";
  if ("ranges" in own && "ranges" in other)
    return JSON.stringify(own.ranges) === JSON.stringify(other.ranges) ? "same" : "other";
  return told(own) === told(other) ? "same" : "one refuses";
}

const folder = mkdtempSync(join(tmpdir(), "twinpass-images-"));
try {
  const files = cases.map(({ bytes, kind }, i) => {
    const file = join(folder, `${i}.${kind}`);
    writeFileSync(file, bytes);
    return file;
  });
  const hasSrecord = !spawnSync("srec_info", ["--version"]).error;
  if (!hasSrecord) say("srecord: not run, the Debian package srecord is missing");
  const intelhex = byIntelhex(files.filter((file) => file.endsWith(".hex")));
  if (!intelhex) say("intelhex: not run, the Debian package python3-intelhex is missing");

  const tally = { compared: 0, same: 0, faults: 0 };
  const differing: string[] = [];
  cases.forEach((one, i) => {
    const own = ours(one);
    const srec = hasSrecord ? bySrecord(files[i], one.kind) : null;
    const python = intelhex?.get(files[i]) ?? null;
    const against = [srec, python].filter((outcome) => outcome !== null);
    const verdicts = against.map((outcome) => compare(own, outcome));
    tally.compared += verdicts.length;
    tally.same += verdicts.filter((verdict) => verdict === "same").length;
    if (verdicts.every((verdict) => verdict === "same")) return;
    if (one.meant === null) tally.faults++;
    const why =
      one.meant ?? `FAULT ${verdicts} ${[own, srec, python].map(reason).filter(Boolean).join(" | ")}`;
    differing.push(
      `${one.name.padEnd(40)} ${[own, srec, python].map((o) => told(o).padEnd(8)).join(" ")} ${why}`,
    );
  });
  say(
    `${cases.length} files, ${tally.compared} comparisons, ${tally.same} the same in ranges and SHA-256 or both refused`,
  );
  if (differing.length > 0) {
    say(
      `${"where they differ".padEnd(40)} ${["ours", "srecord", "intelhex"].map((n) => n.padEnd(8)).join(" ")} why`,
    );
    for (const line of differing) say(line);
  }
  process.exitCode = tally.faults > 0 ? 1 : 0;
} finally {
  rmSync(folder, { recursive: true, force: true });
}
