import type { Transaction } from "@/db/client";
import { lockLedgerHead } from "@/db/queries/ledger";
import { type CitingRecord, selectCitingRecords } from "@/db/queries/run-analyses";
import { ConflictError } from "@/lib/errors";
import { logger } from "@/lib/logger";
import type { Ctx } from "@/lib/services/ctx";

/** A hold asks for more evidence and ends nothing: its record keeps its own, and the runs may still be put right. */
const isFinal = ({ kind }: CitingRecord) => kind !== "hold";

const numbersOf = (citing: readonly CitingRecord[]) => [
  ...new Set(citing.filter(isFinal).map((row) => row.recordNumber)),
];

/** Why a run can't change any more, or null while no final decision rests on it. The page's buttons print the same sentence. */
export function citedSentence(what: string, citing: readonly CitingRecord[]): string | null {
  const records = numbersOf(citing);
  if (records.length === 0) return null;
  return `${what} is evidence of the final decision in record ${records.join(", ")} and can't change any more. A new decision can rest on other runs.`;
}

/**
 * Nothing that a decision rests on changes, but for a hold. Holds the ledger's head from here on, as a decision does, so that none can
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
  const sentence = citedSentence(what, citing);
  if (sentence === null) return;
  logger().warn({ event: "security.denied", code: "run_cited", workspaceId, userId: ctx.userId });
  throw new ConflictError("run_cited", sentence, { records: numbersOf(citing) });
}
