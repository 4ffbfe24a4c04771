import { drizzle, type NodePgDatabase } from "drizzle-orm/node-postgres";
import { Pool } from "pg";
import * as schema from "@/db/tables";

export type Database = NodePgDatabase<typeof schema>;
export type Transaction = Parameters<Parameters<Database["transaction"]>[0]>[0];
/** What every query and verb takes: the pool or an open transaction (a nested transaction is a savepoint). */
export type Queryable = Database | Transaction;

/**
 * Opens a pool. Statements over 15 s are cancelled by the server, so that a stuck page never holds a connection for ever.
 * @param url PostgreSQL connection address of the runtime role
 * @param max connections at most
 */
export function createDatabase(
  url: string,
  max = 10,
): { db: Database; pool: Pool; close: () => Promise<void> } {
  const pool = new Pool({
    connectionString: url,
    max,
    statement_timeout: 15_000,
    connectionTimeoutMillis: 5_000,
  });
  // A backend that ends must not end the process. Idle: the next query opens a fresh connection. Between two
  // statements of a transaction: the next statement fails, and with it the transaction.
  pool.on("error", () => undefined);
  pool.on("connect", (client) => client.on("error", () => undefined));
  const db = drizzle(pool, { schema });
  return { db, pool, close: () => pool.end() };
}
