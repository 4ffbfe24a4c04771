import { selectLedger, selectLedgerHead, selectLedgerStretch } from "@/db/queries/ledger";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { firstBrokenLink } from "@/lib/services/ledger/entry";
import { loadProgramme } from "@/lib/services/programmes/load";

const PAGE = 50;
/** A filtered page checks the whole stretch between its first and last entry, up to so many entries. */
const STRETCH_MAX = 5_000;

/** What a check of the shown stretch found. */
export type ChainCheck =
  | { state: "holds"; fromSeq: number; toSeq: number; reachesHead: boolean }
  | { state: "broken"; atSeq: number }
  | { state: "empty" };

async function checkChain(ctx: Ctx, newestSeq: number, oldestSeq: number): Promise<ChainCheck> {
  const { workspaceId } = ctx;
  const fromSeq = Math.max(1, oldestSeq, newestSeq - STRETCH_MAX + 1);
  const stretch = await selectLedgerStretch(ctx.db, { workspaceId, fromSeq, toSeq: newestSeq });
  const broken = firstBrokenLink(stretch);
  if (broken !== null) return { state: "broken", atSeq: broken };
  const last = stretch.at(-1);
  if (stretch.length !== newestSeq - fromSeq + 1 || last === undefined)
    return { state: "broken", atSeq: fromSeq };
  const head = await selectLedgerHead(ctx.db, { workspaceId });
  const reachesHead = head?.seq === last.seq;
  if (reachesHead && head.sha256 !== last.sha256) return { state: "broken", atSeq: last.seq };
  return { state: "holds", fromSeq, toSeq: last.seq, reachesHead };
}

/**
 * A page of the workspace's ledger, newest first, and whether the chain holds over its stretch.
 * @param args `beforeSeq`: only entries before this number (keyset paging); `programmeId`: of one programme only
 * @throws ForbiddenError for anyone but leads and admins; NotFoundError for another workspace's programme
 */
export async function readLedger(ctx: Ctx, args: { beforeSeq?: number; programmeId?: string }) {
  authorise(ctx, "ledger.view");
  if (args.programmeId) await loadProgramme(ctx, args.programmeId);
  const found = await selectLedger(ctx.db, { workspaceId: ctx.workspaceId, ...args, limit: PAGE + 1 });
  const entries = found.slice(0, PAGE);
  const [first, last] = [entries.at(0), entries.at(-1)];
  return {
    entries,
    /** Pass as `beforeSeq` for the next page; null on the last. */
    nextBeforeSeq: found.length > PAGE && last ? last.seq : null,
    chain: first && last ? await checkChain(ctx, first.seq, last.seq) : ({ state: "empty" } as const),
  };
}

/** The newest entries of one programme, for its own page. @throws ForbiddenError for readers */
export async function readProgrammeHistory(ctx: Ctx, args: { programmeId: string; limit: number }) {
  authorise(ctx, "history.view");
  return await selectLedger(ctx.db, { workspaceId: ctx.workspaceId, ...args });
}
