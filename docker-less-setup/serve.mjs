import { mkdirSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { appSettings, migrate, seedDemo, startApp } from "./app.mjs";
import { ensureBuild } from "./build.mjs";
import { demandFreePort, demandWritable, parsePort } from "./machine.mjs";
import { ensureNodePackages, ensurePostgres } from "./packages.mjs";
import { startCluster } from "./postgres.mjs";
import { alreadyRunning, SetupProblem } from "./problems.mjs";
import { createStopList, takeLock } from "./processes.mjs";
import { loadSecrets } from "./secrets.mjs";

const STANDARD_PORT = 3000;
const DIST_DIR = ".next";

/** `npm start`: from a clone on a bare machine to a served product, and everything stopped again at the end. */
export async function serve() {
  const startedAt = Date.now();
  const seconds = () => ((Date.now() - startedAt) / 1000).toFixed(1);
  const say = (/** @type {string} */ line) => console.log(`[${seconds().padStart(5)} s] ${line}`);
  const stops = createStopList({ say });
  stops.handleSignals(() => 0);
  // A terminal that is closed takes no more lines; stopping goes on without it.
  process.stdout.on("error", () => undefined);
  try {
    const address = await bringUp({ say, stops });
    if (stops.isStopping()) return;
    say(`Twinpass is ready. Open ${address}`);
    say("Ctrl-C stops it, its worker and its database.");
  } catch (error) {
    if (stops.isStopping()) return;
    const known = error instanceof SetupProblem;
    console.error(`\n${known ? error.message : error instanceof Error ? error.stack : String(error)}`);
    await stops.stopAll();
    process.exit(1);
  }
}

/**
 * @param {{ say: (line: string) => void, stops: ReturnType<typeof createStopList> }} options
 * @returns {Promise<string>} the address that answers
 */
async function bringUp({ say, stops }) {
  const root = dirname(dirname(fileURLToPath(import.meta.url)));
  const dataFolder = join(root, ".data");
  const logs = join(dataFolder, "log");
  const place = { root, logs, say };
  const port = parsePort(process.env.PORT, STANDARD_PORT);
  const address = `http://localhost:${port}`;

  demandWritable(root);
  // Others may pass through to the database's folder, and see nothing else.
  mkdirSync(dataFolder, { recursive: true, mode: 0o711 });
  mkdirSync(logs, { recursive: true, mode: 0o700 });
  const lock = takeLock(join(dataFolder, "start.lock"), address);
  if ("holder" in lock) {
    throw new SetupProblem(alreadyRunning({ pid: lock.holder.pid, address: lock.holder.note }));
  }
  stops.add(lock.release);
  await demandFreePort(port);
  if (process.env.DATABASE_URL)
    say("DATABASE_URL of your shell is set aside: npm start uses a private database.");

  await ensurePostgres(place);
  const secrets = loadSecrets(dataFolder);

  say("Starting PostgreSQL (private, 127.0.0.1 only, in .data/pg)");
  const cluster = await startCluster({
    folder: join(dataFolder, "pg"),
    logFile: join(logs, "postgres.log"),
    passwords: secrets.passwords,
    durable: true,
  });
  stops.add(cluster.stop);

  await ensureNodePackages(place);
  const settings = appSettings({
    port,
    dataFolder,
    distDir: DIST_DIR,
    secrets,
    cluster,
    outside: process.env,
  });
  await migrate({ root, settings, cluster, logs });
  await ensureBuild({
    root,
    distDir: DIST_DIR,
    actionsKey: secrets.actionsKey,
    logFile: join(logs, "build.log"),
    say,
  });
  await seedDemo({ root, settings, cluster, logs, say });

  await demandFreePort(port);
  say(`Starting web (port ${port}) and worker`);
  await startApp({ root, settings, logs, say, stops });
  return settings.AUTH_URL ?? address;
}
