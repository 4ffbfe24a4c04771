import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { demandRoom, findCommand, freeBytes, isRoot, userName } from "./machine.mjs";
import { installedServers } from "./postgres-user.mjs";
import { noPackageRights, packageInstallFailed, SetupProblem } from "./problems.mjs";
import { run, runStep } from "./processes.mjs";

const NODE_PACKAGES_BYTES = 2e9;
const DEBIAN_PACKAGES_BYTES = 6e8;

/** @typedef {{ root: string, logs: string, say: (line: string) => void }} Place */

/**
 * npm writes node_modules/.package-lock.json last, so it tells what is completely installed.
 * @param {string} root
 * @returns {boolean} whether the installed Node packages are those of package-lock.json
 */
function nodePackagesCurrent(root) {
  const installed = join(root, "node_modules", ".package-lock.json");
  if (!existsSync(installed)) return false;
  const wanted = lockedVersions(join(root, "package-lock.json"));
  const have = lockedVersions(installed);
  return (
    [...have].every(([path, version]) => wanted.get(path)?.version === version.version) &&
    [...wanted].every(([path, { optional }]) => optional || have.has(path))
  );
}

/** @param {string} file @returns {Map<string, { version: string, optional: boolean }>} */
function lockedVersions(file) {
  const { packages } = JSON.parse(readFileSync(file, "utf8"));
  const entries = Object.entries(
    /** @type {Record<string, { version: string, optional?: boolean }>} */ (packages),
  );
  return new Map(
    entries
      .filter(([path]) => path !== "")
      .map(([path, { version, optional }]) => [path, { version, optional: !!optional }]),
  );
}

/** @param {Place} place */
export async function ensureNodePackages({ root, logs, say }) {
  if (nodePackagesCurrent(root)) return;
  demandRoom({ folder: root, freeBytes: freeBytes(root), neededBytes: NODE_PACKAGES_BYTES });
  say("Installing the Node packages of package-lock.json (about a minute)");
  const npm = process.env.npm_execpath;
  const [command, args] = npm ? [process.execPath, [npm]] : ["npm", []];
  await runStep(
    "Installing the Node packages",
    command,
    [...args, "ci", "--include=dev", "--no-audit", "--no-fund"],
    {
      cwd: root,
      logFile: join(logs, "npm-ci.log"),
    },
  );
}

/** @param {Place} place */
export async function ensurePostgres(place) {
  if (Object.keys(installedServers()).length > 0) return;
  await installDebianPackages(["postgresql"], place);
}

/** @param {Place} place @returns {Promise<string>} path of the browser */
export async function ensureChromium(place) {
  const found = findCommand("chromium");
  if (found) return found;
  await installDebianPackages(["chromium"], place);
  return findCommand("chromium") ?? "/usr/bin/chromium";
}

/**
 * @param {string[]} packages
 * @param {Place} place
 * @throws SetupProblem with the command to run where this user may not install
 */
async function installDebianPackages(packages, { logs, say }) {
  const logFile = join(logs, "apt.log");
  const apt = findCommand("apt-get");
  const mayInstall = apt !== null && (isRoot() || (await sudoWithoutPassword(logFile)));
  if (!mayInstall) throw new SetupProblem(noPackageRights({ packages, apt: apt !== null, user: userName() }));
  demandRoom({ folder: "/var", freeBytes: freeBytes("/var"), neededBytes: DEBIAN_PACKAGES_BYTES });
  say(`Installing ${packages.join(" ")} from Debian (apt-get)`);
  const become = isRoot() ? [] : ["sudo", "-n"];
  const aptGet = (/** @type {string[]} */ args) => {
    const whole = [...become, "env", "DEBIAN_FRONTEND=noninteractive", "apt-get", ...args];
    return run(/** @type {string} */ (whole[0]), whole.slice(1), { logFile });
  };
  const install = ["install", "-y", "--no-install-recommends", ...packages];
  if ((await aptGet(install)).code === 0) return;
  // The package lists are missing or old: fetch them and try once more.
  await aptGet(["update"]);
  const second = await aptGet(install);
  if (second.code !== 0) {
    throw new SetupProblem(packageInstallFailed({ packages, log: second.output, logFile }));
  }
}

/** @param {string} logFile @returns {Promise<boolean>} */
async function sudoWithoutPassword(logFile) {
  return findCommand("sudo") !== null && (await run("sudo", ["-n", "true"], { logFile })).code === 0;
}
