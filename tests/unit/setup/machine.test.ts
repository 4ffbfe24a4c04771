import { createServer, type Server } from "node:net";
import { tmpdir } from "node:os";
import { afterEach, describe, expect, it } from "vitest";
import {
  demandFreePort,
  demandRoom,
  freeBytes,
  freePort,
  parsePort,
  portOwner,
  startTimeOf,
} from "@/docker-less-setup/machine.mjs";
import { SetupProblem } from "@/docker-less-setup/problems.mjs";
import { explainFailure } from "@/docker-less-setup/processes.mjs";

let server: Server | undefined;

function listen(port: number, host: string): Promise<void> {
  return new Promise((resolve, reject) => {
    server = createServer();
    server.once("error", reject);
    server.listen(port, host, () => resolve());
  });
}

afterEach(() => new Promise<void>((resolve) => (server ? server.close(() => resolve()) : resolve())));

describe("ports", () => {
  it("reads PORT as a whole number from 1024 to 65535", () => {
    expect(parsePort(undefined, 3000)).toBe(3000);
    expect(parsePort("", 3000)).toBe(3000);
    expect(parsePort("3001", 3000)).toBe(3001);
    for (const value of ["abc", "80", "65536", "3000.5", "-1", "0x1000", "3000 "]) {
      expect(() => parsePort(value, 3000)).toThrow(SetupProblem);
    }
  });

  for (const host of ["127.0.0.1", "0.0.0.0", "::1"]) {
    it(`names the process that listens on ${host}`, async () => {
      const port = await freePort();
      await demandFreePort(port);
      await listen(port, host);
      expect(portOwner(port)?.pid).toBe(process.pid);
      await expect(demandFreePort(port)).rejects.toThrow(`Port ${port} is taken by process ${process.pid}`);
    });
  }
});

describe("disk", () => {
  it("measures the free room of a folder", () => {
    expect(freeBytes(tmpdir())).toBeGreaterThan(0);
  });

  it("stops before a step that needs more than there is", () => {
    const facts = { folder: "/srv/clone", neededBytes: 2e9 };
    expect(() => demandRoom({ ...facts, freeBytes: 2e9 })).not.toThrow();
    expect(() => demandRoom({ ...facts, freeBytes: 2e9 - 1 })).toThrow(
      /disk that holds \/srv\/clone is full/,
    );
  });

  it("recognises a disk that fills up during a step", () => {
    const facts = { step: "Installing", code: 228, logFile: "/srv/clone/.data/log/npm.log" };
    for (const log of [
      "npm error ENOSPC: no space left on device, write",
      "could not write: No space left on device",
    ]) {
      expect(explainFailure({ ...facts, log })).toContain("is full");
    }
    expect(explainFailure({ ...facts, log: "npm error 404" })).not.toContain("is full");
  });
});

describe("startTimeOf", () => {
  it("tells a process that runs from one that does not", () => {
    expect(startTimeOf(process.pid)).toMatch(/^\d+$/);
    expect(startTimeOf(2 ** 22 + 1)).toBeNull();
  });
});
