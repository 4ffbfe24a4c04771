import { existsSync, mkdirSync, readFileSync, statSync } from "node:fs";
import { get } from "node:http";
import { join } from "node:path";
import { SetupProblem, stepFailed } from "./problems.mjs";
import { runStep, superviseService } from "./processes.mjs";

const ANSWERS_WITHIN_MS = 60_000;
const POLL_MS = 100;
const GRACE_MS = 20_000;
const TYPESCRIPT = ["--conditions=react-server", "--import", "tsx"];
const SEED = "db/seed/demo.ts";

/** Settings that a person may set in the environment; all others are made here. See lib/env.ts. */
const FROM_OUTSIDE = [
  "AUTH_URL",
  "DEMO_MODE",
  ...["MAIL_FROM", "MAIL_FOLDER", "SMTP_URL"],
  ...["STORAGE_DRIVER", "STORAGE_ROOT"],
  ...[
    "S3_ENDPOINT",
    "S3_REGION",
    "S3_BUCKET",
    "S3_ACCESS_KEY_ID",
    "S3_SECRET_ACCESS_KEY",
    "S3_FORCE_PATH_STYLE",
  ],
];

/** @typedef {Record<string, string>} Settings */

/**
 * @param {{ port: number, dataFolder: string, distDir: string, secrets: import("./secrets.mjs").Secrets,
 *   cluster: import("./postgres.mjs").Cluster, outside: Record<string, string | undefined> }} facts
 * @returns {Settings} the settings of lib/env.ts for web and worker, without the owner's database address
 */
export function appSettings({ port, dataFolder, distDir, secrets, cluster, outside }) {
  const chosen = FROM_OUTSIDE.flatMap((name) => (outside[name] ? [[name, outside[name]]] : []));
  return {
    AUTH_URL: `http://localhost:${port}`,
    DEMO_MODE: "1",
    MAIL_FOLDER: join(dataFolder, "mail"),
    STORAGE_DRIVER: "filesystem",
    STORAGE_ROOT: join(dataFolder, "objects"),
    ...Object.fromEntries(chosen),
    NODE_ENV: "production",
    NEXT_DIST_DIR: distDir,
    NEXT_TELEMETRY_DISABLED: "1",
    PORT: String(port),
    DATABASE_URL: cluster.url("app"),
    AUTH_SECRET: secrets.authSecret,
    STORAGE_LINK_SECRET: secrets.storageLinkSecret,
    NEXT_SERVER_ACTIONS_ENCRYPTION_KEY: secrets.actionsKey,
  };
}

/** Environment of a child: this one's, with the settings, and never an owner's address that happens to be about. */
function childEnvironment(/** @type {Settings} */ settings) {
  const { DATABASE_OWNER_URL: _, ...inherited } = process.env;
  return { ...inherited, ...settings };
}

/**
 * Brings the database to the newest state, as its owner.
 * @param {{ root: string, settings: Settings, cluster: import("./postgres.mjs").Cluster, logs: string }} options
 */
export async function migrate({ root, settings, cluster, logs }) {
  await runStep("Updating the database", process.execPath, [...TYPESCRIPT, "db/migrate.ts"], {
    cwd: root,
    env: { ...childEnvironment(settings), DATABASE_OWNER_URL: cluster.url("owner") },
    logFile: join(logs, "migrate.log"),
  });
}

/**
 * Fills an empty database with the demo workspace, in demo mode only.
 * @param {{ root: string, settings: Settings, cluster: import("./postgres.mjs").Cluster, logs: string,
 *   say: (line: string) => void }} options
 */
export async function seedDemo({ root, settings, cluster, logs, say }) {
  if (settings.DEMO_MODE !== "1" || !existsSync(join(root, SEED))) return;
  if (cluster.sql("select exists(select from workspaces);", "twinpass") === "t") return;
  say("Making the demo workspace");
  await runStep("Making the demo workspace", process.execPath, [...TYPESCRIPT, SEED], {
    cwd: root,
    env: childEnvironment(settings),
    logFile: join(logs, "seed.log"),
  });
}

/**
 * Starts web and worker, each started again if it ends by itself, and waits until the web process answers.
 * @param {{ root: string, settings: Settings, logs: string, say: (line: string) => void,
 *   stops: { add: (stop: () => Promise<void>) => void } }} options
 * @throws SetupProblem when it does not answer within a minute or ends before
 */
export async function startApp({ root, settings, logs, say, stops }) {
  for (const folder of [settings.MAIL_FOLDER, settings.STORAGE_ROOT]) {
    if (folder) mkdirSync(folder, { recursive: true, mode: 0o700 });
  }
  const common = { cwd: root, env: childEnvironment(settings), graceMs: GRACE_MS, say };
  const next = join(root, "node_modules/next/dist/bin/next");
  const port = Number(settings.PORT);
  const webLog = join(logs, "web.log");
  const saidBefore = existsSync(webLog) ? statSync(webLog).size : 0;
  const worker = superviseService({
    ...common,
    name: "worker",
    command: [process.execPath, ...TYPESCRIPT, "lib/jobs/worker.ts"],
    logFile: join(logs, "worker.log"),
  });
  stops.add(worker.stop);
  const web = superviseService({
    ...common,
    name: "web",
    command: [process.execPath, next, "start", "-H", "127.0.0.1", "-p", String(port)],
    logFile: webLog,
  });
  stops.add(web.stop);

  const giveUpAt = Date.now() + ANSWERS_WITHIN_MS;
  while (!(await answers(port))) {
    if (web.restarts() > 0 || Date.now() > giveUpAt) {
      const log = readFileSync(webLog).subarray(saidBefore).toString("utf8");
      throw new SetupProblem(stepFailed({ step: "The web process", code: null, log, logFile: webLog }));
    }
    await new Promise((resolve) => setTimeout(resolve, POLL_MS));
  }
  return { web, worker };
}

/** @param {number} port @returns {Promise<boolean>} whether something answers HTTP there without a server error */
function answers(port) {
  return new Promise((resolve) => {
    const request = get(
      { host: "127.0.0.1", port, path: "/", headers: { host: `localhost:${port}` } },
      (response) => {
        response.resume();
        resolve((response.statusCode ?? 500) < 500);
      },
    );
    request.once("error", () => resolve(false));
    request.setTimeout(5_000, () => request.destroy());
  });
}
