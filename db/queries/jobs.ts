import { type SQL, sql } from "drizzle-orm";
import PgBoss from "pg-boss";
import type { Queryable } from "@/db/client";
import { JOB_CHANNEL, type JobName } from "@/db/job-queue";

/** pg-boss writes `$1`; the caller's transaction takes a template with its values. */
function template(text: string, values: readonly unknown[]): SQL {
  const chunks = text
    .split(/\$(\d+)/)
    .map((part, i) => (i % 2 === 0 ? sql.raw(part) : sql`${sql.param(values[Number(part) - 1])}`));
  return sql.join(chunks);
}

// Never started and without a connection: it only words the statement that the caller's transaction runs.
let wording: PgBoss | undefined;

/**
 * Puts a job into its queue in the caller's transaction and wakes the worker when that commits.
 * @throws Error when the queue does not exist: a job is never lost in silence
 */
export async function insertJob(
  tx: Queryable,
  { name, data, priority }: { name: JobName; data: object; priority: number },
): Promise<void> {
  wording ??= new PgBoss({ db: { executeSql: () => Promise.reject(new Error("no transaction given")) } });
  const db: PgBoss.Db = {
    executeSql: async (text, values) => ({ rows: (await tx.execute(template(text, values))).rows }),
  };
  const id = await wording.send(name, data, { db, priority });
  if (id === null) throw new Error(`There is no queue "${name}": the database is not migrated.`);
  await tx.execute(sql`select pg_notify(${JOB_CHANNEL}, ${name})`);
}

/** Runs that wait for a verdict although no job would bring one, e.g. after a restore; younger ones are left alone. */
export async function selectForgottenRuns(db: Queryable): Promise<{ workspaceId: string; runId: string }[]> {
  const { rows } = await db.execute<{ workspaceId: string; runId: string }>(sql`
    select workspace_id as "workspaceId", id as "runId" from runs
    where state = 'waiting' and created_at < now() - interval '10 minutes' and not exists (
      select from pgboss.job
      where name = 'judge-run' and state < 'completed' and data->>'runId' = runs.id::text)`);
  return rows;
}
