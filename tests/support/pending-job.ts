import { sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import type { Job } from "@/lib/jobs/enqueue";

/** Whether a job with exactly this data waits, is in work or will be tried again. */
export async function hasPendingJob(db: Queryable, { name, data }: Job): Promise<boolean> {
  const { rows } = await db.execute<{ pending: boolean }>(
    sql`select exists(select from pgboss.job where name = ${name} and state < 'completed' and data = ${JSON.stringify(data)}::jsonb) as pending`,
  );
  return rows[0]?.pending ?? false;
}
