import { selectLedger, selectLedgerHead, selectLedgerStretch } from "@/db/queries/ledger";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { firstBrokenLink } from "@/lib/services/ledger/entry";
import { loadProgramme } from "@/lib/services/programmes/load";

const PAGE = 50;
/** What the first entry of a chain names as the one before. */
const FIRST_LINK = "0".repeat(64);
/** A filtered page checks the whole stretch between its first and last entry, up to so many entries. */
const STRETCH_MAX = 5_000;

/** What a check of the shown stretch found. */
export type ChainCheck =
  | { state: "holds"; fromSeq: number; toSeq: number; reachesHead: boolean }
  | { state: "broken"; atSeq: number }
  | { state: "empty" };

interface Shown {
  newestSeq: number;
  oldestSeq: number;
  /** Head of the chain as it was before the entries were read. */
  head: { seq: number; sha256: string } | null;
  /** The page begins at the newest entry there is, and ends at the first. */
  fromNewest: boolean;
  toFirst: boolean;
}

async function checkChain(ctx: Ctx, shown: Shown): Promise<ChainCheck> {
  const { workspaceId } = ctx;
  const { newestSeq, head } = shown;
  if (shown.fromNewest && head && head.seq > newestSeq) return { state: "broken", atSeq: newestSeq };
  if (shown.toFirst && shown.oldestSeq !== 1) return { state: "broken", atSeq: shown.oldestSeq };
  const fromSeq = Math.max(1, shown.oldestSeq, newestSeq - STRETCH_MAX + 1);
  const stretch = await selectLedgerStretch(ctx.db, { workspaceId, fromSeq, toSeq: newestSeq });
  const broken = firstBrokenLink(stretch);
  if (broken !== null) return { state: "broken", atSeq: broken };
  if (stretch.length !== newestSeq - fromSeq + 1) return { state: "broken", atSeq: fromSeq };
  if (fromSeq === 1 && stretch.at(0)?.previousSha256 !== FIRST_LINK) return { state: "broken", atSeq: 1 };
  const atHead = stretch.find((entry) => entry.seq === head?.seq);
  if (atHead && atHead.sha256 !== head?.sha256) return { state: "broken", atSeq: atHead.seq };
  return { state: "holds", fromSeq, toSeq: newestSeq, reachesHead: atHead !== undefined };
}

/**
 * A page of the workspace's ledger, newest first, and whether the chain holds over its stretch.
 * @param args `beforeSeq`: only entries before this number (keyset paging); `programmeId`: of one programme only
 * @throws ForbiddenError for anyone but leads and admins; NotFoundError for another workspace's programme
 */
export async function readLedger(ctx: Ctx, args: { beforeSeq?: number; programmeId?: string }) {
  authorise(ctx, "ledger.view");
  if (args.programmeId) await loadProgramme(ctx, args.programmeId);
  const head = await selectLedgerHead(ctx.db, { workspaceId: ctx.workspaceId });
  const found = await selectLedger(ctx.db, { workspaceId: ctx.workspaceId, ...args, limit: PAGE + 1 });
  const entries = found.slice(0, PAGE);
  const [first, last] = [entries.at(0), entries.at(-1)];
  const isWhole = args.programmeId === undefined;
  const hasMore = found.length > PAGE;
  return {
    entries,
    /** Pass as `beforeSeq` for the next page; null on the last. */
    nextBeforeSeq: hasMore && last ? last.seq : null,
    chain:
      first && last
        ? await checkChain(ctx, {
            newestSeq: first.seq,
            oldestSeq: last.seq,
            head,
            fromNewest: isWhole && args.beforeSeq === undefined,
            toFirst: isWhole && !hasMore,
          })
        : ({ state: "empty" } as const),
  };
}

/** The newest entries of one programme, for its own page. @throws ForbiddenError for readers */
export async function readProgrammeHistory(ctx: Ctx, args: { programmeId: string; limit: number }) {
  authorise(ctx, "history.view");
  return await selectLedger(ctx.db, { workspaceId: ctx.workspaceId, ...args });
}
