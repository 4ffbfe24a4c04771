import { and, asc, between, desc, eq, lt, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { ledger, ledgerHeads } from "@/db/tables";

export type LedgerRow = typeof ledger.$inferSelect;

/** Takes the head's lock, so that entries of one workspace are written one after the other. Also tells the database's time. */
export async function lockLedgerHead(tx: Queryable, { workspaceId }: { workspaceId: string }) {
  await tx
    .insert(ledgerHeads)
    .values({ workspaceId, seq: 0, sha256: "0".repeat(64) })
    .onConflictDoNothing();
  const [head] = await tx
    .select({
      seq: ledgerHeads.seq,
      sha256: ledgerHeads.sha256,
      now: sql<string>`to_char(date_trunc('milliseconds', clock_timestamp()) at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`,
    })
    .from(ledgerHeads)
    .where(eq(ledgerHeads.workspaceId, workspaceId))
    .for("update");
  return head;
}

/** Writes one entry and moves the head. */
export async function insertLedgerEntry(tx: Queryable, row: LedgerRow): Promise<void> {
  await tx.insert(ledger).values(row);
  await tx
    .update(ledgerHeads)
    .set({ seq: row.seq, sha256: row.sha256 })
    .where(eq(ledgerHeads.workspaceId, row.workspaceId));
}

/** Newest entries first, `limit` of them, before a sequence number when given. */
export async function selectLedger(
  db: Queryable,
  args: { workspaceId: string; beforeSeq?: number; programmeId?: string; subjectId?: string; limit: number },
): Promise<LedgerRow[]> {
  return await db
    .select()
    .from(ledger)
    .where(
      and(
        eq(ledger.workspaceId, args.workspaceId),
        args.beforeSeq === undefined ? undefined : lt(ledger.seq, args.beforeSeq),
        args.programmeId === undefined ? undefined : eq(ledger.programmeId, args.programmeId),
        args.subjectId === undefined ? undefined : eq(ledger.subjectId, args.subjectId),
      ),
    )
    .orderBy(desc(ledger.seq))
    .limit(args.limit);
}

/** Entries from one number to another, oldest first. */
export async function selectLedgerStretch(
  db: Queryable,
  args: { workspaceId: string; fromSeq: number; toSeq: number },
): Promise<LedgerRow[]> {
  return await db
    .select()
    .from(ledger)
    .where(and(eq(ledger.workspaceId, args.workspaceId), between(ledger.seq, args.fromSeq, args.toSeq)))
    .orderBy(asc(ledger.seq));
}

export async function selectLedgerHead(db: Queryable, { workspaceId }: { workspaceId: string }) {
  const [head] = await db
    .select({ seq: ledgerHeads.seq, sha256: ledgerHeads.sha256 })
    .from(ledgerHeads)
    .where(eq(ledgerHeads.workspaceId, workspaceId));
  return head ?? null;
}
