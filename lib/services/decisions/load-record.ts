import { selectResult } from "@/db/queries/comparisons";
import {
  type DecisionRow,
  selectDecision,
  selectDecisionsOfProgramme,
  selectWaivers,
} from "@/db/queries/decisions";
import { selectUser } from "@/db/queries/people";
import { isShared, selectProgramme } from "@/db/queries/programmes";
import { selectRevision } from "@/db/queries/revisions";
import type { ComparisonInput } from "@/db/schema/comparisons";
import { digestOf } from "@/lib/canonical-json";
import { NotFoundError } from "@/lib/errors";
import type { CampaignResult } from "@/lib/measure/types";
import { isReaderOnly, RELEASING_KINDS } from "@/lib/policy/released";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { notTested } from "@/lib/services/decisions/not-tested";
import { type RecordWaiver, recordHolds } from "@/lib/services/decisions/record-digest";

type Chain = Awaited<ReturnType<typeof selectDecisionsOfProgramme>>;

/** Everything the record page shows. */
export interface RecordView {
  decision: DecisionRow;
  waivers: RecordWaiver[];
  programme: { id: string; name: string };
  revision: { id: string; number: number; title: string; stands: boolean };
  from: { id: string; number: number; title: string } | null;
  authorName: string;
  submitterName: string | null;
  /** Whether the record's digest, computed anew from what is stored, is the one that was signed. */
  holds: boolean;
  /** What the comparison said, checked against the digest in the record; null when there was none or it differs. */
  compared: { input: ComparisonInput; result: CampaignResult } | null;
  notTested: string[];
  /** Records of the programme, newest first. */
  chain: Chain;
}

async function loadCompared(ctx: Ctx, { evidence }: DecisionRow): Promise<RecordView["compared"]> {
  const { comparisonId, comparisonInputSha256: inputSha256, resultSha256 } = evidence;
  if (!comparisonId || !inputSha256) return null;
  const row = await selectResult(ctx.db, { workspaceId: ctx.workspaceId, comparisonId, inputSha256 });
  if (!row?.result || digestOf(row.result) !== resultSha256) return null;
  return { input: row.input, result: row.result };
}

/**
 * A decision's record with its evidence.
 * @throws NotFoundError for another workspace's; ForbiddenError for a reader without a share
 */
export async function getRecord(ctx: Ctx, decisionId: string): Promise<RecordView> {
  const { db, workspaceId, userId } = ctx;
  const decision = await selectDecision(db, { workspaceId, decisionId });
  const missing = () => new NotFoundError("no_record", "There is no such record.");
  if (!decision) throw missing();
  const { programmeId } = decision;
  const granted =
    RELEASING_KINDS.has(decision.kind) && (await isShared(db, { workspaceId, programmeId, userId }));
  authorise(ctx, "decision.view", { granted });
  const programme = await selectProgramme(db, { workspaceId, programmeId });
  const revision = await selectRevision(db, { workspaceId, revisionId: decision.revisionId });
  if (!programme || !revision) throw missing();
  const from = decision.fromRevisionId
    ? await selectRevision(db, { workspaceId, revisionId: decision.fromRevisionId })
    : null;
  const author = await selectUser(db, { userId: decision.authorId });
  const submitter = decision.submitterId ? await selectUser(db, { userId: decision.submitterId }) : null;
  const waivers = await selectWaivers(db, { workspaceId, decisionId });
  const compared = await loadCompared(ctx, decision);
  const chain = await selectDecisionsOfProgramme(db, { workspaceId, programmeId });
  return {
    decision,
    waivers,
    programme: { id: programme.id, name: programme.name },
    revision: {
      id: revision.id,
      number: revision.number,
      title: revision.title,
      stands: programme.standingRevisionId === revision.id,
    },
    from: from && { id: from.id, number: from.number, title: from.title },
    authorName: author?.name ?? "somebody",
    submitterName: decision.submitterId ? (submitter?.name ?? "somebody") : null,
    holds: recordHolds(decision, waivers),
    compared,
    notTested: decision.kind === "promote" ? notTested(compared) : [],
    chain: isReaderOnly(ctx) ? chain.filter((entry) => RELEASING_KINDS.has(entry.kind)) : chain,
  };
}
