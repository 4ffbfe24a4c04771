import type { Transaction } from "@/db/client";
import { lockLedgerHead } from "@/db/queries/ledger";
import { selectCitingRecords } from "@/db/queries/run-analyses";
import { ConflictError } from "@/lib/errors";
import { logger } from "@/lib/logger";
import type { Ctx } from "@/lib/services/ctx";

/** Why a run can't change any more, or null while no decision rests on it. The page's buttons print the same sentence. */
export function citedSentence(what: string, recordNumbers: readonly number[]): string | null {
  if (recordNumbers.length === 0) return null;
  const records = [...new Set(recordNumbers)].join(", ");
  return `${what} is evidence of record ${records} and can't change any more. A new decision can rest on other runs.`;
}

/**
 * Nothing that a decision rests on changes. Holds the ledger's head from here on, as a decision does, so that none can
 * come between this look and the change. Lock the run rows before.
 * @param what how the sentence calls it, e.g. "Run 12"
 * @throws ConflictError `run_cited`
 */
export async function refuseCited(
  tx: Transaction,
  ctx: Pick<Ctx, "workspaceId" | "userId" | "requestId">,
  what: string,
  runIds: readonly string[],
): Promise<void> {
  const { workspaceId } = ctx;
  await lockLedgerHead(tx, { workspaceId });
  const citing = await selectCitingRecords(tx, { workspaceId, runIds });
  const records = citing.map((row) => row.recordNumber);
  const sentence = citedSentence(what, records);
  if (sentence === null) return;
  logger().warn({ event: "security.denied", code: "run_cited", workspaceId, userId: ctx.userId });
  throw new ConflictError("run_cited", sentence, { records });
}
