import { selectUser } from "@/db/queries/people";
import {
  selectDecisionsOfRevision,
  selectRevision,
  selectRunsOfRevision,
  selectStanding,
} from "@/db/queries/revisions";
import { isReaderOnly, RELEASED_STATES, RELEASING_KINDS } from "@/lib/policy/released";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";
import { missingForDecision } from "@/lib/services/revisions/ask-for-decision";
import { noRevision } from "@/lib/services/revisions/load";
import { missingForValidating } from "@/lib/services/revisions/start-validating";

/** Everything the revision page shows. @throws NotFoundError for another workspace's, ForbiddenError for an unshared reader */
export async function getRevision(ctx: Ctx, revisionId: string) {
  const { workspaceId, db } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { programme, granted } = await loadProgramme(ctx, revision.programmeId);
  authorise(ctx, "revision.view", { granted: granted && RELEASED_STATES.has(revision.state) });
  const [author, parent, standing, runs, decisions] = await Promise.all([
    selectUser(db, { userId: revision.authorId }),
    revision.parentId ? selectRevision(db, { workspaceId, revisionId: revision.parentId }) : null,
    selectStanding(db, { workspaceId, programmeId: revision.programmeId }),
    selectRunsOfRevision(db, { workspaceId, revisionId }),
    selectDecisionsOfRevision(db, { workspaceId, revisionId }),
  ]);
  const readerOnly = isReaderOnly(ctx);
  const shownParent = readerOnly && parent && !RELEASED_STATES.has(parent.state) ? null : parent;
  return {
    revision,
    authorName: author?.name ?? "somebody",
    programme,
    /** Null without a parent, and for a reader where the parent was never released. */
    parent: shownParent && { id: shownParent.id, number: shownParent.number, title: shownParent.title },
    standing,
    runs,
    decisions: readerOnly ? decisions.filter(({ kind }) => RELEASING_KINDS.has(kind)) : decisions,
    missing: {
      validating: missingForValidating(revision),
      decision: revision.state === "validating" ? await missingForDecision(db, revision) : [],
    },
  };
}
