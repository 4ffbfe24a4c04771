import type { Transaction } from "@/db/client";
import { insertLedgerEntry, lockLedgerHead } from "@/db/queries/ledger";
import type { Ctx } from "@/lib/services/ctx";
import { ledgerDigest } from "@/lib/services/ledger/entry";

export interface LedgerEvent {
  /** Past-tense name as in authorisation.csv, e.g. `revision.created`. */
  event: string;
  subjectType:
    | "workspace"
    | "member"
    | "programme"
    | "revision"
    | "road_day"
    | "run"
    | "comparison"
    | "decision"
    | "passphrase";
  subjectId: string | null;
  programmeId?: string | null;
  /** Old and new values, digests, the reason. Never a secret, never an address of a person. */
  data: Record<string, unknown>;
}

/**
 * Writes one entry of the workspace's ledger in the caller's transaction: the change and its entry commit together or not at all.
 * The chain's head is locked, so entries of one workspace follow one another; the time is the database's.
 * @returns the database's time of the entry
 */
export async function appendLedger(
  tx: Transaction,
  ctx: Ctx,
  event: LedgerEvent,
): Promise<{ seq: number; at: Date }> {
  const { workspaceId } = ctx;
  const head = await lockLedgerHead(tx, { workspaceId });
  const covered = {
    workspaceId,
    seq: head.seq + 1,
    at: new Date(head.now),
    actorId: ctx.userId,
    actorName: ctx.userName,
    event: event.event,
    subjectType: event.subjectType,
    subjectId: event.subjectId,
    programmeId: event.programmeId ?? null,
    // As the database will give it back: JSON without undefined members.
    data: JSON.parse(JSON.stringify(event.data)) as Record<string, unknown>,
    requestId: ctx.requestId,
    previousSha256: head.sha256,
  };
  await insertLedgerEntry(tx, { ...covered, sha256: ledgerDigest(covered) });
  return { seq: covered.seq, at: covered.at };
}
