import { execFileSync, spawnSync } from "node:child_process";
import { existsSync, readdirSync, readFileSync, statSync } from "node:fs";
import { dirname, join } from "node:path";
import { findCommand, isRoot, userName } from "./machine.mjs";
import {
  databaseVersion,
  folderOfAnother,
  folderUnreachable,
  noDatabaseUser,
  SetupProblem,
} from "./problems.mjs";

const SERVER_USER = "postgres";

/** @typedef {{ uid: number, gid: number, name: string } | null} RunAs null: this user itself */

/** @returns {Record<string, string>} folder of the server binaries by major version */
export function installedServers() {
  /** @type {Record<string, string>} */
  const found = {};
  const root = "/usr/lib/postgresql";
  for (const version of existsSync(root) ? readdirSync(root) : []) {
    if (existsSync(join(root, version, "bin", "initdb"))) found[version] = join(root, version, "bin");
  }
  const other = findCommand("initdb");
  if (Object.keys(found).length === 0 && other) {
    const version = execFileSync(other, ["--version"], { encoding: "utf8" }).match(/(\d+)/)?.[1];
    if (version) found[version] = dirname(other);
  }
  return found;
}

/**
 * @param {string} folder cluster folder, which may not exist yet
 * @returns {string} folder of the binaries to use: those that made the cluster, else the newest
 * @throws SetupProblem when the cluster was made by a version that is no longer there
 */
export function serverBinaries(folder) {
  const servers = installedServers();
  const installed = Object.keys(servers).sort((a, b) => Number(b) - Number(a));
  const marker = join(folder, "PG_VERSION");
  const made = existsSync(marker) ? readFileSync(marker, "utf8").trim() : installed[0];
  const bin = made === undefined ? undefined : servers[made];
  if (bin === undefined) throw new SetupProblem(databaseVersion({ made: made ?? "?", installed, folder }));
  return bin;
}

/**
 * Root can't run the server, so from a root shell it runs as the owner of the cluster, at first the Debian user postgres.
 * @param {string} folder cluster folder, which may not exist yet
 * @returns {RunAs}
 */
export function serverUser(folder) {
  const owner = existsSync(folder) ? statSync(folder) : null;
  if (!isRoot()) {
    if (owner && owner.uid !== process.getuid?.()) {
      throw new SetupProblem(folderOfAnother({ folder, owner: nameOf(owner.uid), user: userName() }));
    }
    return null;
  }
  if (owner && owner.uid !== 0) return { uid: owner.uid, gid: owner.gid, name: nameOf(owner.uid) };
  const id = (/** @type {string} */ flag) => spawnSync("id", [flag, SERVER_USER], { encoding: "utf8" });
  if (id("-u").status !== 0) throw new SetupProblem(noDatabaseUser({ user: SERVER_USER }));
  return { uid: Number(id("-u").stdout), gid: Number(id("-g").stdout), name: SERVER_USER };
}

/** @param {number} uid @returns {string} */
function nameOf(uid) {
  const answer = spawnSync("getent", ["passwd", String(uid)], { encoding: "utf8" });
  return answer.stdout?.split(":")[0] || String(uid);
}

/** Words before a command that run it as the server's user, in a clean environment and from the root folder. */
function asServerUser(/** @type {RunAs} */ runAs, /** @type {string[]} */ command) {
  const clean = ["env", "-i", `PATH=${process.env.PATH}`, "LANG=C.UTF-8", ...command];
  if (!runAs) return clean;
  return ["setpriv", `--reuid=${runAs.uid}`, `--regid=${runAs.gid}`, "--clear-groups", "--", ...clean];
}

/** @param {RunAs} runAs @param {string[]} command */
export function runAsServerUser(runAs, command) {
  const [program = "", ...args] = asServerUser(runAs, command);
  return spawnSync(program, args, { cwd: "/", encoding: "utf8" });
}

/**
 * @param {string} folder an existing folder that the server must reach
 * @param {RunAs} runAs
 * @throws SetupProblem naming the first folder on the way that is closed
 */
export function demandReachable(folder, runAs) {
  if (!runAs) return;
  const way = [];
  for (let step = folder; step !== dirname(step); step = dirname(step)) way.unshift(step);
  for (const step of way) {
    if (runAsServerUser(runAs, ["test", "-x", step]).status !== 0) {
      throw new SetupProblem(folderUnreachable({ folder, blockedAt: step, user: runAs.name }));
    }
  }
}
