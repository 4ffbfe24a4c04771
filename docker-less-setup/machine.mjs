import {
  accessSync,
  constants,
  existsSync,
  readdirSync,
  readFileSync,
  readlinkSync,
  statfsSync,
} from "node:fs";
import { createServer } from "node:net";
import { userInfo } from "node:os";
import { delimiter, join } from "node:path";
import { diskFull, folderReadOnly, portTaken, portUnusable, SetupProblem } from "./problems.mjs";

/** @returns {boolean} */
export function isRoot() {
  return process.getuid?.() === 0;
}

/** @returns {string} name of this user, or its number where it has no name */
export function userName() {
  try {
    return userInfo().username;
  } catch {
    return String(process.getuid?.());
  }
}

/** @param {string} command @returns {string | null} full path, or null when it is not on the PATH */
export function findCommand(command) {
  for (const folder of (process.env.PATH ?? "").split(delimiter)) {
    const file = join(folder, command);
    try {
      accessSync(file, constants.X_OK);
      return file;
    } catch {
      // not here
    }
  }
  return null;
}

/** @param {string} folder an existing folder @returns {number} bytes that this user may still fill */
export function freeBytes(folder) {
  const disk = statfsSync(folder);
  return disk.bavail * disk.bsize;
}

/**
 * @param {{ folder: string, freeBytes: number, neededBytes: number }} facts
 * @throws SetupProblem when there is less room than the step needs
 */
export function demandRoom(facts) {
  if (facts.freeBytes < facts.neededBytes) throw new SetupProblem(diskFull(facts));
}

/** @param {string} folder @throws SetupProblem when this user can't write there */
export function demandWritable(folder) {
  try {
    accessSync(folder, constants.W_OK | constants.X_OK);
  } catch {
    throw new SetupProblem(folderReadOnly({ folder, user: userName() }));
  }
}

/**
 * @param {string | undefined} value text of the PORT variable
 * @param {number} standard port when there is none
 * @throws SetupProblem when the text is no port
 */
export function parsePort(value, standard) {
  if (value === undefined || value === "") return standard;
  const port = /^\d{1,5}$/.test(value) ? Number(value) : Number.NaN;
  if (!(port >= 1024 && port <= 65535)) throw new SetupProblem(portUnusable({ value }));
  return port;
}

/** @param {number} port @param {string} host @returns {Promise<boolean>} whether nobody listens there */
export function portIsFree(port, host) {
  return new Promise((resolve) => {
    const server = createServer();
    // A machine without IPv6 answers EADDRNOTAVAIL or EAFNOSUPPORT: nobody can be listening there either.
    server.once("error", (error) =>
      resolve(/** @type {NodeJS.ErrnoException} */ (error).code !== "EADDRINUSE"),
    );
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(true)));
  });
}

/** @returns {Promise<number>} a port of 127.0.0.1 that is free now */
export function freePort() {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.once("error", reject);
    server.listen(0, "127.0.0.1", () => {
      const address = server.address();
      const port = typeof address === "object" && address ? address.port : 0;
      server.close(() => resolve(port));
    });
  });
}

/**
 * Browsers try ::1 as well as 127.0.0.1 for localhost, so both must be free.
 * @param {number} port
 * @throws SetupProblem naming the process that has the port and a port that is free
 */
export async function demandFreePort(port) {
  if ((await portIsFree(port, "127.0.0.1")) && (await portIsFree(port, "::1"))) return;
  let free = port + 1;
  while (free < 65535 && !((await portIsFree(free, "127.0.0.1")) && (await portIsFree(free, "::1"))))
    free += 1;
  throw new SetupProblem(portTaken({ port, owner: portOwner(port), free }));
}

/** @param {number} port @returns {{ pid: number, command: string } | null} the listening process, if visible */
export function portOwner(port) {
  const hexPort = port.toString(16).toUpperCase().padStart(4, "0");
  const sockets = new Set();
  for (const table of ["/proc/net/tcp", "/proc/net/tcp6"]) {
    if (!existsSync(table)) continue;
    for (const line of readFileSync(table, "utf8").split("\n").slice(1)) {
      const field = line.trim().split(/\s+/);
      const listening = field[3] === "0A";
      if (listening && field[1]?.endsWith(`:${hexPort}`)) sockets.add(`socket:[${field[9]}]`);
    }
  }
  for (const pid of readdirSync("/proc").filter((name) => /^\d+$/.test(name))) {
    if (openFiles(pid).some((target) => sockets.has(target))) {
      return { pid: Number(pid), command: commandOf(Number(pid)) };
    }
  }
  return null;
}

/** @param {string} pid @returns {string[]} what its file numbers point to; none when it is another user's or has ended */
function openFiles(pid) {
  try {
    return readdirSync(`/proc/${pid}/fd`).map((fd) => {
      try {
        return readlinkSync(`/proc/${pid}/fd/${fd}`);
      } catch {
        return "";
      }
    });
  } catch {
    return [];
  }
}

/** @param {number} pid @returns {string} its command line, shortened; empty when it has ended */
function commandOf(pid) {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, "utf8")
      .replace(/[\0\s]+/g, " ")
      .trim()
      .slice(0, 80);
  } catch {
    return "";
  }
}

/** @param {number} pid @returns {string | null} start time in clock ticks, which tells a reused number apart */
export function startTimeOf(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, "utf8");
    const afterName = stat.slice(stat.lastIndexOf(")") + 2).split(" ");
    const ended = afterName[0] === "Z" || afterName[0] === "X";
    return ended ? null : (afterName[19] ?? null);
  } catch {
    return null;
  }
}
