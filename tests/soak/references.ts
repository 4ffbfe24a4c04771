import { spawnSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { python } from "../bench/python";
import {
  type Comparison,
  distance,
  goldenUnits,
  type ScipyReference,
  scipyComparisons,
  unitComparisons,
} from "../support/outside-references";

// npm run soak:references: our numerics and units against scipy and GNU Units as they are installed here.
const say = (line: string) => console.log(`soak:references: ${line}`);

/** Says how near ours are, or which are off; returns whether all are inside what is allowed. */
function judge(name: string, comparisons: Comparison[]): boolean {
  const off = comparisons.filter((comparison) => !(distance(comparison) <= comparison.allowed));
  for (const { what, ours, outside } of off) say(`${name}: ${what}: ours ${ours}, outside ${outside}`);
  const farthest = Math.max(...comparisons.map(distance));
  say(
    `${name}: ${comparisons.length - off.length} of ${comparisons.length} agree, farthest ${farthest.toExponential(1)}`,
  );
  return off.length === 0;
}

function againstScipy(): boolean {
  if (!python) {
    say("scipy: not run, no python3 with scipy (Debian package python3-scipy)");
    return true;
  }
  const script = fileURLToPath(new URL("./references.py", import.meta.url));
  const done = spawnSync(python.command, [script], { encoding: "utf8" });
  if (done.status !== 0) {
    say(`scipy: the reference program failed: ${done.stderr}`);
    return false;
  }
  const reference = JSON.parse(done.stdout) as ScipyReference;
  return judge(`scipy ${JSON.stringify(reference.versions)}`, scipyComparisons(reference));
}

function againstUnits(): boolean {
  const live = goldenUnits().map((reference) => {
    const asked = spawnSync("units", ["--terse", "--digits", "15", reference.from, reference.to], {
      encoding: "utf8",
    });
    return { ...reference, factor: asked.status === 0 ? Number(asked.stdout) : Number.NaN };
  });
  if (spawnSync("units", ["--version"]).error) {
    say("GNU Units: not run, the Debian package units is missing");
    return true;
  }
  return judge("GNU Units", unitComparisons(live));
}

const passed = [againstScipy(), againstUnits()];
process.exitCode = passed.every(Boolean) ? 0 : 1;
