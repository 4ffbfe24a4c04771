import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const SCRIPT = fileURLToPath(new URL("./reference.py", import.meta.url));
const CANDIDATES = ["python3", "/usr/bin/python3"];
/** One thread, so that CPU time is the work and not the waiting of threads for each other. */
const ONE_THREAD = { OMP_NUM_THREADS: "1", OPENBLAS_NUM_THREADS: "1", MKL_NUM_THREADS: "1" };

/** The first python that has scipy, with the versions; null when none has. */
function findPython(): { command: string; versions: string } | null {
  for (const command of CANDIDATES) {
    const asked = spawnSync(
      command,
      ["-c", "import scipy, numpy; print('scipy', scipy.__version__, 'numpy', numpy.__version__)"],
      { encoding: "utf8" },
    );
    if (asked.status === 0) return { command, versions: asked.stdout.trim() };
  }
  return null;
}

/** The python that references are run with, or null. */
export const python = findPython();

/**
 * Runs one task of reference.py with arrays of doubles as input: a file a name in a folder that is removed again. Returns
 * what the task printed as JSON. Throws with python's own words when it fails.
 */
export function runReference(
  task: string,
  inputs: Readonly<Record<string, Float64Array>>,
): Record<string, number[]> {
  if (!python) throw new Error("no python3 with scipy");
  const folder = mkdtempSync(join(tmpdir(), "twinpass-bench-"));
  try {
    for (const [name, values] of Object.entries(inputs))
      writeFileSync(join(folder, `${name}.f64`), new Uint8Array(values.buffer));
    const done = spawnSync(python.command, [SCRIPT, task, folder], {
      encoding: "utf8",
      env: { ...process.env, ...ONE_THREAD },
      maxBuffer: 64 * 1024 * 1024,
    });
    if (done.status !== 0) throw new Error(`reference.py ${task}: ${done.stderr}`);
    return JSON.parse(done.stdout) as Record<string, number[]>;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
