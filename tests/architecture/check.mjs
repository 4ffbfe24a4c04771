import { spawn } from "node:child_process";
import { existsSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { inspectStructure } from "./structure.mjs";

const HOME = dirname(dirname(dirname(fileURLToPath(import.meta.url))));
const LAYERS = ["app", "components", "db", "lib", "storage", "tests", "docker-less-setup"];

/** @typedef {{ ok: boolean, output: string }} Outcome */
/** @typedef {{ name: string, run: (root: string) => Promise<Outcome> }} Check */

/**
 * @param {string} root folder to run in
 * @param {string} script path inside node_modules of this project
 * @param {string[]} args
 * @returns {Promise<Outcome & { stdout: string }>}
 */
function tool(root, script, args) {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [join(HOME, "node_modules", script), ...args], {
      cwd: root,
      env: { ...process.env, NEXT_TELEMETRY_DISABLED: "1", NO_COLOR: "1" },
      stdio: ["ignore", "pipe", "pipe"],
    });
    let stdout = "";
    let stderr = "";
    child.stdout.setEncoding("utf8").on("data", (text) => {
      stdout += text;
    });
    child.stderr.setEncoding("utf8").on("data", (text) => {
      stderr += text;
    });
    child.once("error", reject);
    child.once("close", (code) => resolve({ ok: code === 0, stdout, output: (stdout + stderr).trim() }));
  });
}

/** TypeScript, tests and setup scripts included; the route types that pages are checked against are made first. */
async function types(/** @type {string} */ root) {
  const routes = await tool(root, "next/dist/bin/next", ["typegen"]);
  return routes.ok ? tool(root, "typescript/bin/tsc", ["--noEmit", "-p", "."]) : routes;
}

/** Layers and directions of .dependency-cruiser.cjs. A run that read no module proves nothing, so it fails. */
async function boundaries(/** @type {string} */ root) {
  const folders = LAYERS.filter((layer) => existsSync(join(root, layer)));
  const args = ["--config", ".dependency-cruiser.cjs", "--output-type", "json", ...folders];
  const { stdout, output } = await tool(root, "dependency-cruiser/bin/dependency-cruise.mjs", args);
  if (!stdout.startsWith("{")) return { ok: false, output };
  const { summary, modules } = JSON.parse(stdout);
  const own = modules.filter((/** @type {{ source: string }} */ { source }) =>
    LAYERS.includes(source.split("/")[0] ?? ""),
  );
  const violations = summary.violations.map(
    (/** @type {{ rule: { name: string }, from: string, to: string }} */ { rule, from, to }) =>
      `${from} → ${to} (${rule.name})`,
  );
  if (own.length === 0) violations.push("dependency-cruiser read no module of this project");
  return { ok: violations.length === 0, output: violations.join("\n") };
}

async function structure(/** @type {string} */ root) {
  const { files, complaints } = inspectStructure(root);
  if (files === 0) complaints.push("no file was read");
  return { ok: complaints.length === 0, output: complaints.join("\n") };
}

/** @type {Check[]} */
export const CHECKS = [
  { name: "structure", run: structure },
  { name: "boundaries", run: boundaries },
  {
    name: "lint",
    run: (root) => tool(root, "@biomejs/biome/bin/biome", ["ci", "--colors=off", "--error-on-warnings", "."]),
  },
  { name: "dead code", run: (root) => tool(root, "knip/bin/knip.js", ["--no-progress"]) },
  { name: "types", run: types },
];

/**
 * Runs every check, also after one that fails.
 * @param {string} root
 * @param {(line: string) => void} say
 * @returns {Promise<{ passed: number, failed: number }>}
 */
export async function runChecks(root, say) {
  let failed = 0;
  for (const check of CHECKS) {
    const startedAt = Date.now();
    const { ok, output } = await check.run(root);
    if (!ok) failed += 1;
    say(`${ok ? "ok    " : "FAILED"} ${check.name} (${((Date.now() - startedAt) / 1000).toFixed(1)} s)`);
    if (!ok) say(output);
  }
  return { passed: CHECKS.length - failed, failed };
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const report = process.argv[2];
  const count = await runChecks(HOME, console.log);
  if (report) writeFileSync(report, JSON.stringify(count));
  process.exitCode = count.failed === 0 ? 0 : 1;
}
