import { spawn } from "node:child_process";
import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { startTimeOf } from "@/docker-less-setup/machine.mjs";
import { readLock, runStep, superviseService, takeLock } from "@/docker-less-setup/processes.mjs";

const MODULE = join(import.meta.dirname, "../../../docker-less-setup/processes.mjs");
let folder = "";

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "twinpass-processes-"));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

async function until(condition: () => boolean): Promise<void> {
  const giveUpAt = Date.now() + 10_000;
  while (!condition()) {
    if (Date.now() > giveUpAt) throw new Error("it did not happen within 10 s");
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}

function service(script: string, graceMs = 5_000) {
  const said: string[] = [];
  const logFile = join(folder, "service.log");
  const handle = superviseService({
    name: "worker",
    command: [process.execPath, "-e", script],
    cwd: folder,
    env: { NODE_ENV: "test" },
    logFile,
    graceMs,
    say: (line) => said.push(line),
  });
  const log = () => (existsSync(logFile) ? readFileSync(logFile, "utf8") : "");
  return { ...handle, said, log };
}

describe("a lock", () => {
  it("is taken once, and names its holder to the second", () => {
    const file = join(folder, "start.lock");
    const first = takeLock(file, "http://localhost:3000");
    if (!("release" in first)) throw new Error("not taken");
    expect(takeLock(file, "x")).toEqual({ holder: { pid: process.pid, note: "http://localhost:3000" } });
    first.release();
    expect(takeLock(file, "x")).toHaveProperty("release");
  });

  it("of a process that has ended is taken over, also where its number is used again", () => {
    const file = join(folder, "start.lock");
    for (const stale of [
      { pid: 2 ** 22 + 1, startTime: "5" },
      { pid: process.pid, startTime: "5" },
    ]) {
      writeFileSync(file, JSON.stringify({ ...stale, note: "" }));
      const taken = takeLock(file, "new");
      expect(taken).toHaveProperty("release");
      expect(readLock(file)).toEqual({ pid: process.pid, note: "new" });
    }
  });

  it("has one winner among racing processes", async () => {
    const file = join(folder, "start.lock");
    writeFileSync(file, JSON.stringify({ pid: 2 ** 22 + 1, startTime: "5", note: "stale" }));
    const script = `
      const { takeLock } = await import(${JSON.stringify(MODULE)});
      console.log("release" in takeLock(${JSON.stringify(file)}, "") ? "won" : "lost");
      setTimeout(() => undefined, 3000);`;
    const racers = Array.from({ length: 6 }, () =>
      spawn(process.execPath, ["--input-type=module", "-e", script]),
    );
    const answers = await Promise.all(
      racers.map(
        (racer) => new Promise<string>((resolve) => racer.stdout.once("data", (text) => resolve(`${text}`))),
      ),
    );
    for (const racer of racers) racer.kill("SIGKILL");
    expect(answers.filter((answer) => answer.trim() === "won")).toHaveLength(1);
  });
});

describe("a step", () => {
  it("gives its output, and stops the start with a plain sentence when it fails", async () => {
    const logFile = join(folder, "step.log");
    const node = (script: string) => runStep("The step", process.execPath, ["-e", script], { logFile });
    expect(await node("console.log('fine')")).toBe("fine\n");
    await expect(node("console.error('Error: broken'); process.exit(3)")).rejects.toThrow(
      /^The step ended with code 3\..*step\.log\):\n {4}Error: broken$/s,
    );
  });
});

describe("a supervised process", () => {
  it("is started again when it ends by itself, and that is said", async () => {
    const { stop, said, log, restarts } = service("console.log('up'); setTimeout(() => process.exit(7), 50)");
    await until(() => restarts() >= 1 && log().split("up").length > 2);
    await stop();
    expect(said[0]).toContain("The worker process ended by itself (code 7)");
    const after = restarts();
    await new Promise((resolve) => setTimeout(resolve, 800));
    expect(restarts()).toBe(after);
  });

  it("may finish its work when it is stopped", async () => {
    const script =
      "process.on('SIGTERM', () => setTimeout(() => { console.log('done'); process.exit(0) }, 200)); console.log('up'); setInterval(() => 0, 1000)";
    const { stop, log, said } = service(script);
    await until(() => log().includes("up"));
    await stop();
    expect(log()).toContain("done");
    expect(said).toEqual([]);
  });

  it("that will not stop is ended the hard way", async () => {
    const script = "process.on('SIGTERM', () => 0); console.log('up'); setInterval(() => 0, 1000)";
    const { stop, log, said, pid } = service(script, 300);
    await until(() => log().includes("up"));
    const child = pid() ?? 0;
    await stop();
    expect(startTimeOf(child)).toBeNull();
    expect(said[0]).toContain("did not stop within 0.3 s");
  });

  it("ends with the process that started it, even by kill -9", async () => {
    const script = `
      const { superviseService } = await import(${JSON.stringify(MODULE)});
      const { pid } = superviseService({ name: "worker", command: ["sleep", "60"], cwd: "/", env: { NODE_ENV: "test" },
        logFile: ${JSON.stringify(join(folder, "sleep.log"))}, graceMs: 1000, say: console.log });
      setTimeout(() => console.log(pid()), 300);`;
    const parent = spawn(process.execPath, ["--input-type=module", "-e", script]);
    const child = Number(
      await new Promise<string>((resolve) => parent.stdout.once("data", (text) => resolve(`${text}`))),
    );
    expect(startTimeOf(child)).not.toBeNull();
    parent.kill("SIGKILL");
    await until(() => startTimeOf(child) === null);
  });
});
