import { spawnSync } from "node:child_process";
import { closeSync, mkdtempSync, openSync, readFileSync, rmSync, writeSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { isDeepStrictEqual } from "node:util";
import { gunzipSync } from "node:zlib";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import { cdfOfReading } from "@/lib/calibration/cdf/cdf-instances";
import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import type { CdfInstance } from "@/lib/calibration/cdf/types";
import { writeCdfx } from "@/lib/calibration/cdf/write-cdfx";
import { readImage } from "@/lib/calibration/image/read-image";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import { randomStream } from "@/lib/signal/random";

// npm run soak:values-file: what we write as ASAM CDF 2.0 read by Python's ElementTree and by our own reader, on the demonstration
// image and on made-up calibrations up to a large one. Ends with 1 where a value, a name or a count differs.
const say = (line: string) => console.log(`soak:values-file: ${line}`);
const golden = (path: string) => gunzipSync(readFileSync(new URL(`../golden/${path}`, import.meta.url)));
const WORDS = ["on", "off", "1 < 2 & 3", " °C ", "]]>", "\u{1f697}", "ß\nµ"];

/** What both readers must give of an instance; groups: one a row of x, and one a plane. */
const expected = ({ name, category, unit, dims, values, axes }: CdfInstance) => ({
  name,
  category,
  unit,
  values,
  groups: dims.slice(1).reduce((sum, n) => n + n * sum, 0),
  axes: axes.map(({ reference, values: points }) => reference ?? points),
});

function* madeInstances(seed: number, count: number): Generator<CdfInstance> {
  const random = randomStream(seed, 0);
  const number = () => (random.nextBelow(2 ** 31) - 2 ** 30) * 10 ** (random.nextBelow(40) - 20);
  const value = () => (random.nextBelow(20) === 0 ? WORDS[random.nextBelow(WORDS.length)] : number());
  const list = (length: number) => Array.from({ length }, value);
  const kinds = ["VALUE", "CURVE", "MAP", "CUBOID"];
  for (let k = 0; k < count; k++) {
    const rank = random.nextBelow(kinds.length);
    const dims = Array.from({ length: rank }, () => 1 + random.nextBelow(16));
    yield {
      name: `made.${seed}[${k}]`,
      text: WORDS[random.nextBelow(WORDS.length)],
      category: kinds[rank],
      unit: random.nextBelow(3) === 0 ? "" : WORDS[random.nextBelow(WORDS.length)],
      dims,
      values: list(dims.reduce((product, n) => product * n, 1)),
      axes: dims.map((n, axis) =>
        random.nextBelow(2) === 0
          ? { category: "STD_AXIS", reference: null, unit: "1/min", values: list(n) }
          : { category: "COM_AXIS", reference: `axis.${k}.${axis}`, unit: "", values: [] },
      ),
      functions: ["f"],
    };
  }
}

const folder = mkdtempSync(join(tmpdir(), "twinpass-values-"));
const script = fileURLToPath(new URL("./read_cdfx.py", import.meta.url));
const hasPython = spawnSync("python3", ["-c", "import xml.etree"]).status === 0;
if (!hasPython) say("ElementTree: not run, no python3");

function run(name: string, instances: CdfInstance[]): boolean {
  const path = join(folder, "values.cdfx");
  const file = openSync(path, "w");
  for (const piece of writeCdfx(name, instances)) writeSync(file, piece);
  closeSync(file);
  const before = process.cpuUsage();
  const bytes = readFileSync(path);
  const own = readCdfx(bytes);
  const { user, system } = process.cpuUsage(before);
  const verdicts = [isDeepStrictEqual(own.instances, instances) && own.problems.length === 0];
  if (hasPython) {
    const asked = spawnSync("python3", [script, path], { encoding: "utf8", maxBuffer: 2 ** 30 });
    if (asked.status !== 0) say(`${name}: ${asked.stderr.slice(-300)}`);
    verdicts.push(asked.status === 0 && isDeepStrictEqual(JSON.parse(asked.stdout), instances.map(expected)));
  }
  const cells = instances.reduce((sum, { values }) => sum + values.length, 0);
  const told = verdicts.map((same, k) => `${["own reader", "ElementTree"][k]} ${same ? "equal" : "DIFFERS"}`);
  const seconds = (user + system) / 1e6;
  say(
    `${name}: ${instances.length} instances, ${cells} cells, ${(bytes.length / 1e6).toFixed(1)} MB: ${told.join(", ")}; read at ${(bytes.length / 1e6 / seconds).toFixed(0)} MB a CPU second`,
  );
  return verdicts.every(Boolean);
}

try {
  const demo = readImageByDescription(
    readDescription([{ name: "demo.a2l", bytes: golden("descriptions/ASAP2_Demo_V171.a2l.gz") }]),
    readImage(golden("images/ASAP2_Demo_V171.hex.gz"), { fileName: "demo.hex" }),
  );
  const passed = [run("demonstration image", cdfOfReading(demo).instances)];
  for (let seed = 1; seed <= 20; seed++) passed.push(run(`made-up ${seed}`, [...madeInstances(seed, 200)]));
  passed.push(run("made-up, large", [...madeInstances(99, 4000)]));
  process.exitCode = passed.every(Boolean) ? 0 : 1;
} finally {
  rmSync(folder, { recursive: true, force: true });
}
