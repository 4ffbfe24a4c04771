import { mkdirSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { gzipSync, zipSync } from "fflate";
import { writeDescription } from "@/db/seed/control-unit/write-description";
import { EFFECTS } from "@/db/seed/demo-effects";
import { DEMO_DESCRIPTION_NAME, demoImage } from "@/db/seed/demo-image";
import { driveRoadDay } from "@/db/seed/demo-logs";

// Writes the files that the demo offers for download: npm run make-samples. Same input, same bytes.
const FOLDER = "public/samples";
const WRITTEN_AT = new Date("2026-01-01T00:00:00Z");

rmSync(FOLDER, { recursive: true, force: true });
mkdirSync(FOLDER, { recursive: true });
writeFileSync(join(FOLDER, "R5-full-curve.hex"), demoImage("visitor"));
writeFileSync(join(FOLDER, DEMO_DESCRIPTION_NAME), writeDescription());

const runs = driveRoadDay({
  twinsPerSide: 4,
  effectA: EFFECTS.ignition,
  effectB: EFFECTS.visitor,
  tempC: 9,
  seed: 14,
});
const files = Object.fromEntries(
  runs.map((run) => {
    const inTheCar = run.side === "A" ? "standing" : "R5";
    return [`run-${String(run.order).padStart(2, "0")}-${run.leg}-${inTheCar}.csv`, run.csv];
  }),
);
for (const [name, bytes] of Object.entries(files))
  writeFileSync(join(FOLDER, `${name}.gz`), gzipSync(bytes, { level: 9, mtime: 0 }));
writeFileSync(join(FOLDER, "road-day.zip"), zipSync(files, { level: 9, mtime: WRITTEN_AT }));
console.log(`Wrote ${Object.keys(files).length + 3} files into ${FOLDER}.`);
