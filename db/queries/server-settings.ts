import { sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";

/** A setting of the PostgreSQL server as its own text, e.g. "on". */
export async function selectServerSetting(db: Queryable, { name }: { name: string }): Promise<string | null> {
  const { rows } = await db.execute<{ value: string | null }>(
    sql`select current_setting(${name}, true) as value`,
  );
  return rows[0]?.value ?? null;
}
