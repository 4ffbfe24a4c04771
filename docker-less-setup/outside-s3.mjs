/**
 * One node of OpenStack Swift with its s3api on loopback, from Debian's python3-swift (Apache-2.0): code that has nothing
 * in common with ours, as an outside check of the S3 driver.
 *   node docker-less-setup/outside-s3.mjs up FOLDER | kill FOLDER | down FOLDER
 * "up" prints the settings of the S3 driver as JSON; a folder that was up before keeps its ports and its data.
 */
import { spawn, spawnSync } from "node:child_process";
import {
  chownSync,
  closeSync,
  existsSync,
  mkdirSync,
  openSync,
  readdirSync,
  readFileSync,
  writeFileSync,
} from "node:fs";
import { createServer, Socket } from "node:net";
import { join, resolve } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { findCommand, isRoot } from "./machine.mjs";

/** Debian's own interpreter: another python3 on the PATH may not see Debian's packages. */
const PYTHON = "/usr/bin/python3";
const SERVICE_USER = "swift";
const START_SECONDS = 60;
const ROLES = /** @type {const} */ (["account", "container", "object"]);
const FILTERS = [
  "catch_errors",
  "gatekeeper",
  "healthcheck",
  "listing_formats",
  "copy",
  "dlo",
  "versioned_writes",
];

/** @returns {boolean} whether Swift can be started here */
export function hasSwift() {
  return existsSync(PYTHON) && spawnSync(PYTHON, ["-c", "import swift.common.middleware.s3api"]).status === 0;
}

/** @returns {boolean} whether we had the rights to try to install Swift */
export function installSwift() {
  const installer = isRoot() && findCommand("apt-get");
  if (!installer) return false;
  const args = ["install", "-y", "-q", "--no-install-recommends", "python3-swift", "memcached"];
  spawnSync(installer, args, {
    stdio: "inherit",
    env: { ...process.env, DEBIAN_FRONTEND: "noninteractive" },
  });
  return true;
}

/** @param {number} port @returns {Promise<boolean>} */
function answers(port) {
  return new Promise((done) => {
    const socket = new Socket();
    const end = (/** @type {boolean} */ value) => {
      socket.destroy();
      done(value);
    };
    socket.once("connect", () => end(true)).once("error", () => end(false));
    socket.connect(port, "127.0.0.1");
  });
}

/** @returns {Promise<number>} a port that was free a moment ago */
function freePort() {
  return new Promise((done, fail) => {
    const server = createServer().once("error", fail);
    server.listen(0, "127.0.0.1", () => {
      const address = server.address();
      server.close(() =>
        typeof address === "object" && address ? done(address.port) : fail(new Error("no port")),
      );
    });
  });
}

/** @param {Record<string, Record<string, string | number>>} sections @returns {string} */
function ini(sections) {
  const blocks = Object.entries(sections).map(([name, values]) => {
    const lines = Object.entries(values).map(([key, value]) => `${key} = ${value}`);
    return [`[${name}]`, ...lines].join("\n");
  });
  return `${blocks.join("\n\n")}\n`;
}

/** Swift looks for swift.conf and the rings in /etc/swift unless told otherwise in the process. */
const LAUNCHER = `import os, sys
from swift.common import utils
utils.set_swift_dir(os.path.dirname(os.path.abspath(sys.argv[1])))
from swift.common.wsgi import run_wsgi
extra = {}
if sys.argv[2] == "object-server":
    from swift.obj import server
    extra["global_conf_callback"] = server.global_conf_callback
sys.exit(run_wsgi(sys.argv[1], sys.argv[2], **extra))
`;

/** @typedef {{ proxy: number, account: number, container: number, object: number, cache: number }} Ports */

/** @param {string} conf @param {string} data @param {Ports} ports @param {string} user */
function writeSettings(conf, data, ports, user) {
  const base = (/** @type {number} */ port) => ({
    bind_ip: "127.0.0.1",
    bind_port: port,
    workers: 1,
    user,
    swift_dir: conf,
  });
  const use = (/** @type {string} */ name) => ({ use: `egg:swift#${name}` });
  const write = (/** @type {string} */ name, /** @type {string} */ text) =>
    writeFileSync(join(conf, name), text);
  write("launch.py", LAUNCHER);
  write(
    "swift.conf",
    ini({
      "swift-hash": { swift_hash_path_suffix: "soak" },
      "storage-policy:0": { name: "one", default: "yes" },
    }),
  );
  const pipeline =
    "catch_errors gatekeeper healthcheck cache listing_formats s3api tempauth copy slo dlo versioned_writes proxy-server";
  const filters = Object.fromEntries(FILTERS.map((name) => [`filter:${name}`, use(name)]));
  write(
    "proxy.conf",
    ini({
      DEFAULT: base(ports.proxy),
      "pipeline:main": { pipeline },
      "app:proxy-server": { ...use("proxy"), account_autocreate: "true" },
      "filter:s3api": { ...use("s3api"), location: "us-east-1", max_upload_part_num: 10_000 },
      "filter:tempauth": { ...use("tempauth"), user_soak_writer: "soak-secret .admin" },
      "filter:slo": { ...use("slo"), max_manifest_segments: 10_000 },
      "filter:cache": { ...use("memcache"), memcache_servers: `127.0.0.1:${ports.cache}` },
      ...filters,
    }),
  );
  for (const role of ROLES) {
    /** @type {Record<string, Record<string, string | number>>} */
    const settings = {
      DEFAULT: { ...base(ports[role]), devices: data, mount_check: "false" },
      "pipeline:main": { pipeline: `${role}-server` },
      [`app:${role}-server`]: use(role),
    };
    write(`${role}.conf`, ini(settings));
  }
}

/** @param {string} conf @param {Ports} ports */
function buildRings(conf, ports) {
  const script = "import sys; from swift.cli.ringbuilder import main; main(['ring'] + sys.argv[1:])";
  for (const role of ROLES) {
    const steps = [
      ["create", "4", "1", "1"],
      ["add", `r1z1-127.0.0.1:${ports[role]}/disk`, "1"],
      ["rebalance"],
    ];
    for (const step of steps) {
      const { status, stderr } = spawnSync(PYTHON, ["-c", script, `${role}.builder`, ...step], { cwd: conf });
      // 1 is a warning: one device can't be spread over zones.
      if (status !== 0 && status !== 1) throw new Error(`Swift's ring of ${role}: ${stderr}`);
    }
  }
}

/** @param {string} path @param {number} uid @param {number} gid */
function giveAway(path, uid, gid) {
  chownSync(path, uid, gid);
  for (const entry of readdirSync(path, { withFileTypes: true })) {
    if (entry.isDirectory()) giveAway(join(path, entry.name), uid, gid);
    else chownSync(join(path, entry.name), uid, gid);
  }
}

/** @param {string} name @param {"-u" | "-g"} which @returns {number} */
function idOf(name, which) {
  const { status, stdout } = spawnSync("id", [which, name], { encoding: "utf8" });
  if (status !== 0) throw new Error(`The user ${name} of Debian's package does not exist.`);
  return Number(stdout);
}

/**
 * @param {string} folder emptied by nobody: what is in it is used again
 * @returns {Promise<import("../storage/s3").S3Config>} of a bucket that does not exist yet
 */
export async function up(folder) {
  const root = resolve(folder);
  const [conf, data, logs] = ["conf", "data", "logs"].map((name) => join(root, name));
  const state = join(root, "ports.json");
  const ids = isRoot() ? { uid: idOf(SERVICE_USER, "-u"), gid: idOf(SERVICE_USER, "-g") } : undefined;
  if (!existsSync(state)) {
    for (const made of [conf, join(data, "disk"), logs]) mkdirSync(made, { recursive: true });
    /** @type {Ports} */
    const fresh = {
      proxy: await freePort(),
      account: await freePort(),
      container: await freePort(),
      object: await freePort(),
      cache: await freePort(),
    };
    writeSettings(
      conf,
      data,
      fresh,
      isRoot() ? SERVICE_USER : String(spawnSync("id", ["-un"]).stdout).trim(),
    );
    buildRings(conf, fresh);
    writeFileSync(state, JSON.stringify(fresh));
    if (ids) giveAway(root, ids.uid, ids.gid);
  }
  /** @type {Ports} */
  const ports = JSON.parse(readFileSync(state, "utf8"));
  /** @type {{ command: string, args: string[] }[]} */
  const commands = [...ROLES, "proxy"].map((role) => ({
    command: PYTHON,
    args: [join(conf, "launch.py"), join(conf, `${role}.conf`), `${role}-server`],
  }));
  const memcached = findCommand("memcached");
  if (memcached) {
    commands.unshift({
      command: memcached,
      args: ["-l", "127.0.0.1", "-p", String(ports.cache), "-m", "32"],
    });
  }
  const pids = commands.map(({ command, args }) => {
    const log = openSync(join(logs, "swift.log"), "a");
    const child = spawn(command, args, {
      cwd: root,
      detached: true,
      stdio: ["ignore", log, log],
      env: { ...process.env, HOME: root, PYTHONDONTWRITEBYTECODE: "1", LANG: "C.UTF-8" },
      ...ids,
    });
    child.unref();
    closeSync(log);
    return child.pid;
  });
  writeFileSync(join(root, "pids.json"), JSON.stringify(pids));
  const wanted = [ports.proxy, ports.account, ports.container, ports.object];
  for (let second = 0; ; second++) {
    const up = await Promise.all(wanted.map(answers));
    if (up.every(Boolean)) break;
    if (second === START_SECONDS)
      throw new Error(`Swift did not come up in ${START_SECONDS} s, see ${logs}.`);
    await sleep(1000);
  }
  return {
    driver: "s3",
    endpoint: `http://127.0.0.1:${ports.proxy}`,
    region: "us-east-1",
    bucket: "twinpass-soak",
    accessKeyId: "soak:writer",
    secretAccessKey: "soak-secret",
    forcePathStyle: true,
  };
}

/** Ends the process groups that "up" started in this folder, and no others. @param {string} folder @param {NodeJS.Signals} signal */
export async function end(folder, signal) {
  const file = join(resolve(folder), "pids.json");
  /** @type {number[]} */
  const pids = existsSync(file) ? JSON.parse(readFileSync(file, "utf8")) : [];
  const send = (/** @type {NodeJS.Signals | 0} */ what) =>
    pids.filter((pid) => {
      try {
        process.kill(-pid, what);
        return true;
      } catch {
        return false;
      }
    });
  send(signal);
  for (let tries = 0; send(0).length > 0 && tries < 50; tries++) await sleep(100);
  send("SIGKILL");
  writeFileSync(file, "[]");
}

const [, script, command, folder] = process.argv;
if (script === import.meta.filename && folder !== undefined) {
  if (command === "up") process.stdout.write(`${JSON.stringify(await up(folder))}\n`);
  else if (command === "kill") await end(folder, "SIGKILL");
  else if (command === "down") await end(folder, "SIGTERM");
}
