import { selectSetting } from "@/db/queries/calibration-settings";
import { selectComparableRevisions } from "@/db/queries/change-sets";
import { selectLookedAt } from "@/db/queries/looked-at";
import { type RevisionRow, selectRevision, selectStanding } from "@/db/queries/revisions";
import { withoutChecksums } from "@/lib/calibration/changes/uncovered/without-checksums";
import { axisQuantities, linksInUse, suggestedLinks } from "@/lib/calibration/coverage/suggest-links";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";
import { isReaderOnly, RELEASED_STATES } from "@/lib/policy/released";
import { contradictionOf } from "@/lib/services/change-sets/contradiction";
import { coverageNow } from "@/lib/services/change-sets/coverage-now";
import { currentChangeSet } from "@/lib/services/change-sets/current-input";
import { imageIntegrity } from "@/lib/services/change-sets/image-integrity";
import { digestsOf } from "@/lib/services/change-sets/looked-at";
import { loadPair } from "@/lib/services/change-sets/pair";
import { ownReading } from "@/lib/services/change-sets/revision-reading";
import type { RevisionChangesView } from "@/lib/services/change-sets/schema";
import { shownDescription } from "@/lib/services/change-sets/shown-description";
import type { Ctx } from "@/lib/services/ctx";
import { noRevision } from "@/lib/services/revisions/load";

const UNDECIDED = new Set<RevisionRow["state"]>(["draft", "validating", "in_review"]);

/** What a revision is compared with when nobody chose: what stands while nothing is decided on it, else its parent. */
async function usualCounterpart(
  ctx: Ctx,
  revision: RevisionRow,
  standingId: string | null,
): Promise<string | null> {
  const { workspaceId, db } = ctx;
  const usual =
    UNDECIDED.has(revision.state) && standingId !== null && standingId !== revision.id
      ? standingId
      : revision.parentId;
  if (usual === null || !isReaderOnly(ctx)) return usual;
  const row = await selectRevision(db, { workspaceId, revisionId: usual });
  return row && RELEASED_STATES.has(row.state) ? usual : null;
}

async function choicesOf(
  ctx: Ctx,
  { id, programmeId }: RevisionRow,
): Promise<RevisionChangesView["choices"]> {
  const { workspaceId, db } = ctx;
  const rows = await selectComparableRevisions(db, { workspaceId, programmeId });
  const readerOnly = isReaderOnly(ctx);
  return rows
    .filter((row) => row.id !== id && (!readerOnly || RELEASED_STATES.has(row.state)))
    .map(({ id, number, title }) => ({ id, number, title }));
}

/** What holds for a revision's own image, whatever it is compared with. */
async function imageFacts({ db, workspaceId }: Ctx, revision: RevisionRow, regionsVersion: number) {
  const place = { workspaceId, revisionId: revision.id, regionsVersion };
  const { fingerprintHolds, regions: integrity } = await imageIntegrity(db, place);
  const reading = await ownReading(db, revision);
  return { fingerprintHolds, integrity, epk: reading?.summary.epk ?? null };
}

type Compared = Pick<
  RevisionChangesView,
  | "state"
  | "failure"
  | "changeSetId"
  | "changes"
  | "checksumBytes"
  | "coverage"
  | "lookedAt"
  | "contradiction"
  | "inputQuantities"
>;

const NOTHING: Compared = {
  state: "nothing_to_compare",
  failure: null,
  changeSetId: null,
  changes: null,
  checksumBytes: 0,
  coverage: { state: "not_asked", failure: null, result: null, moved: false },
  lookedAt: [],
  contradiction: null,
  inputQuantities: [],
};

async function compared(
  ctx: Ctx,
  args: {
    revision: RevisionRow;
    before: RevisionRow;
    marks: RevisionChangesView["marks"];
    regions: readonly ChecksumRegion[];
  },
): Promise<Compared> {
  const { db, workspaceId, userId } = ctx;
  const { revision, before, marks, regions } = args;
  const row = await currentChangeSet(db, { workspaceId, a: before, b: revision });
  if (!row?.result)
    return {
      ...NOTHING,
      state: row?.state ?? "not_asked",
      failure: row?.failure ?? null,
      changeSetId: row?.id ?? null,
    };
  const changes = withoutChecksums(row.result, regions);
  const coverage = await coverageNow(db, row);
  const looked = await selectLookedAt(db, { workspaceId, userId, revisionId: revision.id });
  const known = digestsOf(changes);
  const links = linksInUse(changes, { chosen: coverage.input.links, columns: coverage.columns });
  return {
    state: "ready",
    failure: null,
    changeSetId: row.id,
    changes,
    checksumBytes: row.result.uncoveredBytes - changes.uncoveredBytes,
    coverage: coverage.shown,
    lookedAt: looked.filter((digest) => known.has(digest)),
    contradiction: contradictionOf(changes, marks, revision),
    inputQuantities: axisQuantities(changes).map((quantity) => ({
      ...quantity,
      link: links.find((link) => link.quantity === quantity.quantity) ?? null,
      suggestions: suggestedLinks(quantity, coverage.columns),
    })),
  };
}

/**
 * What a revision changes against another of its programme: against what stands while nothing is decided on it, else against its
 * parent, or against the one asked for.
 * @throws NotFoundError for another workspace's; ForbiddenError, for a reader unless the programme is shared and both are released
 */
export async function getRevisionChanges(
  ctx: Ctx,
  revisionId: string,
  againstId?: string,
): Promise<RevisionChangesView> {
  const { db, workspaceId } = ctx;
  const revision = await selectRevision(db, { workspaceId, revisionId });
  if (!revision) throw noRevision();
  const { programmeId } = revision;
  const standing = await selectStanding(db, { workspaceId, programmeId });
  const asked = againstId ?? (await usualCounterpart(ctx, revision, standing?.id ?? null));
  const { before } = await loadPair(ctx, { revision, againstId: asked }, "revision.compare_images");
  const { content: marks } = await selectSetting(db, { workspaceId, programmeId, kind: "relevance_marks" });
  const regions = await selectSetting(db, { workspaceId, programmeId, kind: "checksum_regions" });
  return {
    revision: { id: revision.id, number: revision.number, title: revision.title, programmeId },
    against: before && {
      id: before.id,
      number: before.number,
      title: before.title,
      stands: before.id === standing?.id,
      isParent: before.id === revision.parentId,
    },
    choices: await choicesOf(ctx, revision),
    marks,
    descriptions: {
      before: before && (await shownDescription(db, before)),
      after: await shownDescription(db, revision),
    },
    ...(await imageFacts(ctx, revision, regions.version)),
    ...(before && before.id !== revision.id
      ? await compared(ctx, { revision, before, marks, regions: regions.content })
      : NOTHING),
  };
}
