import { describe, expect, it } from "vitest";
import { oldNodeMessage } from "@/docker-less-setup/node-version.mjs";
import * as problems from "@/docker-less-setup/problems.mjs";

/** Each message with injected facts, and what a person must find in it: what, where, what to do. */
const MESSAGES: Record<string, { text: string; says: string[] }> = {
  portTaken: {
    text: problems.portTaken({
      port: 3000,
      owner: { pid: 41, command: "python3 -m http.server" },
      free: 3002,
    }),
    says: ["3000", "41", "python3 -m http.server", "PORT=3002 npm start"],
  },
  portUnusable: { text: problems.portUnusable({ value: "abc" }), says: ["PORT=abc", "1024 to 65535"] },
  diskFull: {
    text: problems.diskFull({ folder: "/srv/clone", freeBytes: 3e8, neededBytes: 2e9 }),
    says: ["/srv/clone", "0.3 GB", "2.0 GB", "Make room"],
  },
  noPackageRights: {
    text: problems.noPackageRights({ packages: ["postgresql"], apt: true, user: "ann" }),
    says: ["ann", "sudo apt-get install -y --no-install-recommends postgresql"],
  },
  packageInstallFailed: {
    text: problems.packageInstallFailed({
      packages: ["chromium"],
      log: "Reading…\nE: Unable to locate package",
      logFile: "x/apt.log",
    }),
    says: ["chromium", "E: Unable to locate package", "x/apt.log", "try again"],
  },
  stepFailed: {
    text: problems.stepFailed({
      step: "The build",
      code: 1,
      log: "one\nError: no page",
      logFile: "x/build.log",
    }),
    says: ["The build", "code 1", "Error: no page", "x/build.log"],
  },
  folderUnreachable: {
    text: problems.folderUnreachable({
      folder: "/closed/clone/.data",
      blockedAt: "/closed",
      user: "postgres",
    }),
    says: ["postgres", "/closed/clone/.data", "chmod o+x /closed"],
  },
  folderOfAnother: {
    text: problems.folderOfAnother({ folder: ".data/pg", owner: "postgres", user: "ann" }),
    says: [".data/pg", "postgres", "ann", "Start it as"],
  },
  noDatabaseUser: {
    text: problems.noDatabaseUser({ user: "postgres" }),
    says: ["root", "adduser", "postgres"],
  },
  databaseVersion: {
    text: problems.databaseVersion({ made: "15", installed: ["17"], folder: ".data/pg" }),
    says: ["15", "17", ".data/pg", "postgresql-15"],
  },
  secretsLost: {
    text: problems.secretsLost({ folder: ".data/pg", file: ".data/secrets.json" }),
    says: [".data/secrets.json", ".data/pg", "Put the file back"],
  },
  notDurable: {
    text: problems.notDurable({ settings: ["fsync"], folder: ".data/pg" }),
    says: ["fsync", ".data/pg", "lost", "RESET"],
  },
  alreadyRunning: {
    text: problems.alreadyRunning({ pid: 77, address: "http://localhost:3000" }),
    says: ["77", "http://localhost:3000", "kill 77"],
  },
  folderReadOnly: {
    text: problems.folderReadOnly({ folder: "/srv/clone", user: "ann" }),
    says: ["ann", "/srv/clone"],
  },
  alreadyTesting: { text: problems.alreadyTesting({ pid: 78 }), says: ["78", "Wait"] },
  unknownPhase: {
    text: problems.unknownPhase({ name: "e3e", known: ["unit", "e2e"] }),
    says: ["e3e", "unit, e2e"],
  },
};

describe("messages of npm start and npm test", () => {
  for (const [name, { text, says }] of Object.entries(MESSAGES)) {
    it(`${name} says what, where and what to do`, () => {
      for (const part of says) expect(text).toContain(part);
      expect(text).not.toMatch(/undefined|null|NaN|\[object/);
    });
  }

  it("has a case for every message", () => {
    const texts = new Set(["gigabytes", "excerpt", "SetupProblem"]);
    const messages = Object.keys(problems).filter((name) => !texts.has(name));
    expect(Object.keys(MESSAGES).sort()).toEqual(messages.sort());
  });

  it("says so when the owner of a port may not be seen, and when there is no apt-get", () => {
    expect(problems.portTaken({ port: 3000, owner: null, free: 3001 })).toContain("another user");
    expect(problems.noPackageRights({ packages: ["postgresql"], apt: false, user: "ann" })).not.toContain(
      "sudo",
    );
  });
});

describe("excerpt", () => {
  it("begins at the first line that speaks of an error, else shows the end", () => {
    const log = ["start", "Error: no such page", ...Array.from({ length: 30 }, (_, i) => `trace ${i}`)].join(
      "\n",
    );
    expect(problems.excerpt(log, 3)).toBe("    Error: no such page\n    trace 0\n    trace 1");
    expect(problems.excerpt("a\nb\nc\nd\n", 2)).toBe("    c\n    d");
    expect(problems.excerpt("only", 5)).toBe("    only");
  });
});

describe("oldNodeMessage", () => {
  it("refuses what is older than the minimum and takes the rest", () => {
    for (const old of ["v18.19.0", "v20.19.9", "v20.9.0", "v8.17.0"]) {
      expect(oldNodeMessage(old, "20.20.0")).toContain("too old");
    }
    for (const good of ["v20.20.0", "v20.20.2", "v21.0.0", "v22.1.0", "v100.0.0"]) {
      expect(oldNodeMessage(good, "20.20.0")).toBeNull();
    }
  });
});
