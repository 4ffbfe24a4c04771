import { chmodSync, mkdirSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { appSettings, migrate, seedDemo, startApp } from "./app.mjs";
import { ensureBuild } from "./build.mjs";
import { countChecks, countPlaywright, countVitest } from "./count-results.mjs";
import { demandWritable, freePort } from "./machine.mjs";
import { ensureChromium, ensureNodePackages, ensurePostgres } from "./packages.mjs";
import { startThrowawayCluster } from "./postgres.mjs";
import { alreadyTesting, SetupProblem, unknownPhase } from "./problems.mjs";
import { createStopList, run, takeLock } from "./processes.mjs";
import { newSecrets } from "./secrets.mjs";

const ROOT = dirname(dirname(fileURLToPath(import.meta.url)));
const FOLDER = join(ROOT, ".data", "test");
/** Apart from the build of npm start, whose server may be running. */
const DIST_DIR = ".data/test/next";
const VITEST = "node_modules/vitest/vitest.mjs";
const PLAYWRIGHT = "node_modules/@playwright/test/cli.js";
const UNIT = ["unit", "component", "architecture"];

/** @typedef {import("./count-results.mjs").Count} Count */
/** @typedef {{ say: (line: string) => void, stops: ReturnType<typeof createStopList>, extra: string[] }} Run */
/** @typedef {{ title: string, run: (context: Run) => Promise<Count> }} Phase */

/** Types, lint, boundaries, dead code, structure: each counts as one test. */
async function check() {
  const report = join(FOLDER, "check.json");
  rmSync(report, { force: true });
  const { code } = await run(process.execPath, ["tests/architecture/check.mjs", report], {
    cwd: ROOT,
    logFile: join(FOLDER, "check.log"),
    echo: true,
  });
  return countChecks(report, code);
}

/** @param {string[]} projects of vitest.config.mts @returns {Phase["run"]} */
const vitest = (projects) => async (context) => {
  const report = join(FOLDER, `vitest-${projects[0]}.json`);
  rmSync(report, { force: true });
  const args = [
    "run",
    ...projects.flatMap((name) => ["--project", name]),
    "--reporter=default",
    "--reporter=json",
  ];
  const { code } = await run(
    process.execPath,
    [VITEST, ...args, `--outputFile.json=${report}`, ...context.extra],
    {
      cwd: ROOT,
      logFile: join(FOLDER, `vitest-${projects[0]}.log`),
      echo: true,
    },
  );
  return countVitest(report, code);
};

/** Production build, own database (durable, as in the product), own folders, own port, real Chromium. */
async function browser(/** @type {Run} */ { say, stops, extra }) {
  const chromium = await ensureChromium({ root: ROOT, logs: FOLDER, say });
  const secrets = newSecrets();
  const dataFolder = mkdtempSync(join(tmpdir(), "twinpass-e2e-"));
  chmodSync(dataFolder, 0o711);
  stops.add(() => rmSync(dataFolder, { recursive: true, force: true }));
  // One key for all builds of this folder, or every run would build anew. It guards nothing outside the tests.
  const actionsKey = Buffer.alloc(32, "twinpass tests").toString("base64");
  const built = await ensureBuild({
    root: ROOT,
    distDir: DIST_DIR,
    actionsKey,
    logFile: join(FOLDER, "build.log"),
    say,
  });
  if (!built) say("The production build of the last run is still current");
  const cluster = await startThrowawayCluster({ durable: true });
  stops.add(cluster.stop);
  const port = await freePort();
  const settings = appSettings({
    port,
    dataFolder,
    distDir: DIST_DIR,
    secrets: { ...secrets, actionsKey },
    cluster,
    outside: {},
  });
  await migrate({ root: ROOT, settings, cluster, logs: FOLDER });
  await seedDemo({ root: ROOT, settings, cluster, logs: FOLDER, say });
  await startApp({ root: ROOT, settings, logs: FOLDER, say, stops });

  const report = join(FOLDER, "playwright.json");
  rmSync(report, { force: true });
  const { code } = await run(
    process.execPath,
    [PLAYWRIGHT, "test", "-c", "tests/e2e/playwright.config.ts", ...extra],
    {
      cwd: ROOT,
      logFile: join(FOLDER, "playwright.log"),
      echo: true,
      env: {
        ...process.env,
        ...settings,
        DATABASE_OWNER_URL: cluster.url("owner"),
        E2E_BASE_URL: `http://localhost:${port}`,
        E2E_CHROMIUM: chromium,
        E2E_REPORT: report,
        E2E_LOGS: FOLDER,
      },
    },
  );
  return countPlaywright(report, code);
}

/** @type {Record<string, Phase>} */
const PHASES = {
  check: { title: "npm run check", run: check },
  unit: { title: "unit, component and architecture tests", run: vitest(UNIT) },
  integration: { title: "integration tests (real PostgreSQL)", run: vitest(["integration"]) },
  e2e: { title: "browser tests (production build, real Chromium)", run: browser },
};

/**
 * `npm test`: all phases, or the one named first; what follows the name is passed on to vitest or Playwright.
 * @param {string[]} args
 */
export async function runTests([only, ...extra]) {
  const say = (/** @type {string} */ line) => console.log(line);
  const stops = createStopList({ say });
  stops.handleSignals((signal) => (signal === "SIGINT" ? 130 : 143));
  let exitCode = 1;
  try {
    if (only !== undefined && !(only in PHASES)) {
      throw new SetupProblem(unknownPhase({ name: only, known: Object.keys(PHASES) }));
    }
    const phases = Object.entries(PHASES).filter(([name]) => only === undefined || name === only);
    exitCode = await runPhases(phases, { say, stops, extra });
  } catch (error) {
    if (stops.isStopping()) return;
    say(`\n${plain(error)}\n0 passed, 1 failed`);
  }
  await stops.stopAll();
  process.exit(exitCode);
}

/** @param {[string, Phase][]} phases @param {Run} context @returns {Promise<number>} exit code */
async function runPhases(phases, { say, stops, extra }) {
  demandWritable(ROOT);
  mkdirSync(FOLDER, { recursive: true });
  const lock = takeLock(join(FOLDER, "lock"), "npm test");
  if ("holder" in lock) throw new SetupProblem(alreadyTesting({ pid: lock.holder.pid }));
  stops.add(lock.release);
  const place = { root: ROOT, logs: FOLDER, say };
  await ensureNodePackages(place);
  await ensurePostgres(place);

  let passed = 0;
  let failed = 0;
  const table = [];
  for (const [name, phase] of phases) {
    say(`\n=== ${phase.title}`);
    const startedAt = Date.now();
    const count = await counted(phase, { say, stops, extra });
    if (stops.isStopping()) return 1;
    passed += count.passed;
    failed += count.failed;
    for (const note of count.notes) say(`Note: ${note}`);
    const seconds = ((Date.now() - startedAt) / 1000).toFixed(1);
    table.push(
      `${name.padEnd(12)} ${seconds.padStart(6)} s   ${count.passed} passed, ${count.failed} failed`,
    );
  }
  await stops.stopAll();
  say(`\n${table.join("\n")}`);
  say(`${passed} passed, ${failed} failed`);
  return failed === 0 ? 0 : 1;
}

/** A phase that can't even start is one failure, said plainly; the phases after it still run. */
async function counted(/** @type {Phase} */ phase, /** @type {Run} */ context) {
  try {
    return await phase.run(context);
  } catch (error) {
    context.say(plain(error));
    return { passed: 0, failed: 1, notes: [] };
  }
}

/** @param {unknown} error @returns {string} */
function plain(error) {
  if (error instanceof SetupProblem) return error.message;
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
