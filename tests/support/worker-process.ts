import { type ChildProcess, spawn } from "node:child_process";
import { mkdtempSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { onTestFinished } from "vitest";

/** The product's worker as a process of its own; it ends with the test at the latest. */
export function startWorkerProcess(place: { databaseUrl: string; storageRoot: string }): {
  child: ChildProcess;
  /** The log so far, one JSON line an event. */
  log: () => string;
} {
  const child = spawn(
    process.execPath,
    ["--conditions=react-server", "--import", "tsx", "lib/jobs/worker.ts"],
    {
      stdio: ["ignore", "pipe", "inherit"],
      env: {
        PATH: process.env.PATH,
        NODE_ENV: "test",
        DATABASE_URL: place.databaseUrl,
        STORAGE_ROOT: place.storageRoot,
        STORAGE_LINK_SECRET: "only-for-tests-only-for-tests-only",
        AUTH_SECRET: "only-for-tests-only-for-tests-only",
        AUTH_URL: "http://localhost:3000",
        MAIL_FOLDER: mkdtempSync(join(tmpdir(), "twinpass-mail-")),
      },
    },
  );
  let text = "";
  child.stdout?.setEncoding("utf8").on("data", (chunk: string) => {
    text += chunk;
  });
  onTestFinished(() => void child.kill("SIGKILL"));
  return { child, log: () => text };
}
