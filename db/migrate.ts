import { existsSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { drizzle } from "drizzle-orm/node-postgres";
import { migrate } from "drizzle-orm/node-postgres/migrator";
import { Client } from "pg";
import { installQueue } from "@/db/job-queue";
import { env } from "@/lib/env";

const MIGRATIONS = fileURLToPath(new URL("./migrations", import.meta.url));
const GRANTS = fileURLToPath(new URL("./migrations-grants.sql", import.meta.url));
/** Any fixed number: all migrating processes of one database ask for the same one. */
const ONE_AT_A_TIME = 20_261_201;

/**
 * Brings a database to the newest state: tables, job queue, then what the runtime role may do. May run again and again;
 * a second process waits for the first.
 * @param ownerUrl connection address of the role that owns the tables
 * @param from migrations folder and SQL of the grants; the product's own unless told
 * @throws the database's error; the tables are then as they were before
 */
export async function migrateDatabase(
  ownerUrl: string,
  from: { migrations?: string; grants?: string } = {},
): Promise<void> {
  const { migrations = MIGRATIONS, grants = GRANTS } = from;
  if (!existsSync(`${migrations}/meta/_journal.json`)) {
    throw new Error("The folder db/migrations holds no journal: make it with npm run db:generate.");
  }
  const client = new Client({ connectionString: ownerUrl, connectionTimeoutMillis: 10_000 });
  await client.connect();
  try {
    await client.query("select pg_advisory_lock($1)", [ONE_AT_A_TIME]);
    await client.query("set client_min_messages = warning");
    await migrate(drizzle(client), { migrationsFolder: migrations });
    await installQueue(ownerUrl);
    await client.query(readFileSync(grants, "utf8"));
  } finally {
    await client.end();
  }
}

async function main(): Promise<void> {
  const { DATABASE_OWNER_URL } = env();
  if (DATABASE_OWNER_URL === undefined)
    throw new Error("DATABASE_OWNER_URL is missing: migrations run as the owner.");
  await migrateDatabase(DATABASE_OWNER_URL);
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  main().catch((error: unknown) => {
    console.error(error instanceof Error ? error.message : error);
    process.exitCode = 1;
  });
}
