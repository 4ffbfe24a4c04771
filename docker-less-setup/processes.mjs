import { spawn } from "node:child_process";
import {
  appendFileSync,
  closeSync,
  existsSync,
  linkSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from "node:fs";
import { dirname } from "node:path";
import { findCommand, startTimeOf } from "./machine.mjs";
import { diskFull, SetupProblem, stepFailed } from "./problems.mjs";

/** @typedef {{ cwd?: string, env?: NodeJS.ProcessEnv, logFile: string, echo?: boolean, input?: string }} RunOptions */

const STEP_GRACE_MS = 5_000;
const RESTART_FIRST_MS = 500;
const RESTART_LONGEST_MS = 30_000;
const CALM_MS = 60_000;
const LOG_BYTES = 2e7;
const PARENT_POLL_MS = 1_000;

/** Steps that run now, to be stopped with us. @type {Set<import("node:child_process").ChildProcess>} */
const runningSteps = new Set();

/** @param {number | undefined} pid leader of a group @param {NodeJS.Signals} signal */
function signalGroup(pid, signal) {
  if (pid === undefined) return;
  try {
    process.kill(-pid, signal);
  } catch {
    // ended already
  }
}

/**
 * Runs a command to its end in a process group of its own; output goes to a log file and, with `echo`, to the terminal.
 * @param {string} command
 * @param {string[]} args
 * @param {RunOptions} options
 * @returns {Promise<{ code: number | null, output: string }>} null code: ended by a signal
 */
export function run(command, args, { cwd, env, logFile, echo = false, input }) {
  mkdirSync(dirname(logFile), { recursive: true });
  writeFileSync(logFile, "");
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd, env, detached: true, stdio: ["pipe", "pipe", "pipe"] });
    runningSteps.add(child);
    /** @type {Buffer[]} */
    const chunks = [];
    for (const stream of [child.stdout, child.stderr]) {
      stream.on("data", (/** @type {Buffer} */ chunk) => {
        chunks.push(chunk);
        appendFileSync(logFile, chunk);
        if (echo) process.stdout.write(chunk);
      });
    }
    child.stdin.on("error", () => undefined);
    child.stdin.end(input ?? "");
    child.once("error", (error) => {
      runningSteps.delete(child);
      reject(error);
    });
    child.once("close", (code) => {
      runningSteps.delete(child);
      resolve({ code, output: Buffer.concat(chunks).toString("utf8") });
    });
  });
}

/**
 * As `run`, and a failure stops the start.
 * @param {string} step what it does, as the beginning of a sentence
 * @param {string} command
 * @param {string[]} args
 * @param {RunOptions} options
 * @returns {Promise<string>} the output
 * @throws SetupProblem with the last lines, or with the full disk where that is the cause
 */
export async function runStep(step, command, args, options) {
  const { code, output } = await run(command, args, options);
  if (code === 0) return output;
  throw new SetupProblem(explainFailure({ step, code, log: output, logFile: options.logFile }));
}

/**
 * @param {{ step: string, code: number | null, log: string, logFile: string }} facts
 * @returns {string} a plain sentence
 */
export function explainFailure(facts) {
  const full = /ENOSPC|No space left on device/i.test(facts.log);
  if (!full) return stepFailed(facts);
  return `${facts.step} failed. ${diskFull({ folder: dirname(facts.logFile), freeBytes: 0, neededBytes: 5e8 })}`;
}

/**
 * Starts a long-lived process that ends when this one ends, even by kill -9 (parent-death signal of setpriv).
 * @param {string[]} command
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, stdio: import("node:child_process").StdioOptions,
 *   deathSignal: "SIGTERM" | "SIGINT", as?: { uid: number, gid: number } }} options `as`: run it as that user (root only)
 */
export function spawnTied(command, { cwd, env, stdio, deathSignal, as }) {
  const setpriv = findCommand("setpriv");
  const user = as ? [`--reuid=${as.uid}`, `--regid=${as.gid}`, "--clear-groups"] : [];
  const whole = setpriv ? [setpriv, ...user, "--pdeathsig", deathSignal, "--", ...command] : command;
  return spawn(/** @type {string} */ (whole[0]), whole.slice(1), { cwd, env, stdio, detached: true });
}

/**
 * Keeps a process alive: when it ends by itself it is started again, ever more slowly while it keeps failing.
 * @param {{ name: string, command: string[], cwd: string, env: NodeJS.ProcessEnv, logFile: string,
 *   graceMs: number, say: (line: string) => void }} service
 * @returns {{ stop: () => Promise<void>, pid: () => number | undefined, restarts: () => number }}
 */
export function superviseService({ name, command, cwd, env, logFile, graceMs, say }) {
  mkdirSync(dirname(logFile), { recursive: true });
  if (existsSync(logFile) && statSync(logFile).size > LOG_BYTES) renameSync(logFile, `${logFile}.old`);
  let stopping = false;
  let restarts = 0;
  let delayMs = RESTART_FIRST_MS;
  /** @type {import("node:child_process").ChildProcess | undefined} */
  let child;
  /** @type {Promise<void>} */
  let ended = Promise.resolve();
  /** @type {NodeJS.Timeout | undefined} */
  let timer;

  const launch = () => {
    const log = openSync(logFile, "a");
    const startedAt = Date.now();
    const current = spawnTied(command, { cwd, env, stdio: ["ignore", log, log], deathSignal: "SIGTERM" });
    closeSync(log);
    child = current;
    ended = new Promise((resolve) => {
      current.once("error", () => resolve());
      current.once("exit", () => resolve());
    });
    current.once("exit", (code, signal) => {
      // What it started itself (a build worker, a parser) must not outlive it.
      signalGroup(current.pid, "SIGKILL");
      if (stopping) return;
      if (Date.now() - startedAt > CALM_MS) delayMs = RESTART_FIRST_MS;
      say(
        `The ${name} process ended by itself (${signal ?? `code ${code}`}); see ${logFile}. Starting it again.`,
      );
      restarts += 1;
      timer = setTimeout(launch, delayMs);
      delayMs = Math.min(delayMs * 2, RESTART_LONGEST_MS);
    });
  };

  const stop = async () => {
    stopping = true;
    clearTimeout(timer);
    if (child?.exitCode !== null || child.signalCode !== null) return;
    child.kill("SIGTERM");
    const killer = setTimeout(() => {
      say(`The ${name} process did not stop within ${graceMs / 1000} s and is ended the hard way.`);
      signalGroup(child?.pid, "SIGKILL");
    }, graceMs);
    await ended;
    clearTimeout(killer);
  };

  launch();
  return { stop, pid: () => child?.pid, restarts: () => restarts };
}

/**
 * What was started, stopped in the opposite order; SIGINT, SIGTERM and SIGHUP do the same.
 * @param {{ say: (line: string) => void }} options
 */
export function createStopList({ say }) {
  /** @type {(() => Promise<void> | void)[]} */
  const stops = [];
  /** @type {Promise<void> | undefined} */
  let stopping;

  const stopAll = () => {
    stopping ??= (async () => {
      for (const step of runningSteps) {
        signalGroup(step.pid, "SIGTERM");
        setTimeout(() => signalGroup(step.pid, "SIGKILL"), STEP_GRACE_MS).unref();
      }
      for (const stop of stops.reverse()) {
        try {
          await stop();
        } catch (error) {
          say(`Stopping went wrong: ${error instanceof Error ? error.message : String(error)}`);
        }
      }
    })();
    return stopping;
  };

  /** @param {NodeJS.Signals} signal @param {(signal: NodeJS.Signals) => number} exitCode */
  const onSignal = (signal, exitCode) => {
    if (stopping) return;
    say("Stopping …");
    void stopAll().then(() => process.exit(exitCode(signal)));
  };

  return {
    /** @param {() => Promise<void> | void} stop */
    add: (stop) => stops.push(stop),
    stopAll,
    isStopping: () => stopping !== undefined,
    /** @param {(signal: NodeJS.Signals) => number} exitCode */
    handleSignals: (exitCode) => {
      for (const signal of /** @type {const} */ (["SIGINT", "SIGTERM", "SIGHUP"])) {
        process.on(signal, () => onSignal(signal, exitCode));
      }
      // npm that is killed passes nothing on: being handed to another parent means the same as SIGTERM.
      const parent = process.ppid;
      const watch = () => process.ppid !== parent && onSignal("SIGTERM", exitCode);
      if (process.env.npm_lifecycle_event) setInterval(watch, PARENT_POLL_MS).unref();
    },
  };
}

/**
 * Takes a lock file that names this process; a lock of a process that has ended is taken over.
 * @param {string} file
 * @param {string} note told to whoever finds the lock, e.g. the address
 * @returns {{ holder: { pid: number, note: string } } | { release: () => void }}
 */
export function takeLock(file, note) {
  mkdirSync(dirname(file), { recursive: true });
  const own = `${file}.${process.pid}`;
  writeFileSync(own, JSON.stringify({ pid: process.pid, startTime: startTimeOf(process.pid), note }));
  try {
    for (let attempt = 0; attempt < 5; attempt += 1) {
      if (linked(own, file)) return { release: () => rmSync(file, { force: true }) };
      const holder = readLock(file) ?? setStaleLockAside(file, `${own}.stale`);
      if (holder) return { holder };
    }
  } finally {
    rmSync(own, { force: true });
  }
  throw new SetupProblem(`${file} can't be taken: others take it again and again. Try once more.`);
}

/** @param {string} from @param {string} to @returns {boolean} false when `to` exists: link(2) decides between racers */
function linked(from, to) {
  try {
    linkSync(from, to);
    return true;
  } catch (error) {
    if (/** @type {NodeJS.ErrnoException} */ (error).code === "EEXIST") return false;
    throw error;
  }
}

/** Moves first and looks then, so that a lock that somebody took meanwhile is seen and put back. */
function setStaleLockAside(/** @type {string} */ file, /** @type {string} */ aside) {
  try {
    renameSync(file, aside);
  } catch {
    return null;
  }
  const holder = readLock(aside);
  if (holder) linked(aside, file);
  rmSync(aside, { force: true });
  return holder;
}

/** @param {string} file @returns {{ pid: number, note: string } | null} the live process that holds the lock */
export function readLock(file) {
  try {
    const { pid, startTime, note } = JSON.parse(readFileSync(file, "utf8"));
    return startTime !== null && startTimeOf(pid) === startTime ? { pid, note } : null;
  } catch {
    return null;
  }
}
