/** The storage contract against a real S3-compatible server, where Debian's packages for one are there. */
import { spawn } from "node:child_process";
import { chmodSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { end, hasSwift, installSwift, up } from "./outside-s3.mjs";

const VITEST_CONFIG = fileURLToPath(new URL("./soak-vitest.config.mts", import.meta.url));

/** @param {string} line */
const say = (line) => process.stdout.write(`soak:s3: ${line}\n`);

if (!hasSwift()) {
  const tried = installSwift();
  if (!hasSwift()) {
    const why = tried ? "apt-get could not install it" : "installing it needs root and apt-get";
    say(`not run: Debian's python3-swift is missing, and ${why}.`);
    process.exit(0);
  }
}

const folder = mkdtempSync(join(tmpdir(), "twinpass-swift-"));
chmodSync(folder, 0o755);
/** @type {import("node:child_process").ChildProcess | undefined} */
let tests;
let stopped = false;
for (const signal of /** @type {const} */ (["SIGINT", "SIGTERM"])) {
  process.on(signal, () => {
    stopped = true;
    tests?.kill(signal);
  });
}
try {
  say("starting OpenStack Swift with s3api on loopback");
  const config = await up(folder);
  say(`answers at ${config.endpoint}`);
  if (stopped) throw new Error("stopped before the tests began");
  const args = ["node_modules/vitest/vitest.mjs", "run", "--config", VITEST_CONFIG];
  const env = { ...process.env, SOAK_S3: JSON.stringify({ config, folder }) };
  const child = spawn(process.execPath, args, { stdio: "inherit", env });
  tests = child;
  process.exitCode = await new Promise((done) => child.once("close", (code) => done(code ?? 1)));
} catch (error) {
  say(error instanceof Error ? error.message : String(error));
  process.exitCode = 1;
} finally {
  await end(folder, "SIGTERM");
  if (process.exitCode) process.stdout.write(tail(join(folder, "logs", "swift.log")));
  rmSync(folder, { recursive: true, force: true });
  say(process.exitCode ? "failed" : "passed, stopped and cleared away");
}

/** @param {string} file @returns {string} */
function tail(file) {
  try {
    return readFileSync(file, "utf8").slice(-4000);
  } catch {
    return "";
  }
}
