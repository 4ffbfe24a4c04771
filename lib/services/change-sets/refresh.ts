import type { Transaction } from "@/db/client";
import {
  openChangeSet,
  type SideRow,
  selectPairsOf,
  selectSides,
  selectUndecided,
} from "@/db/queries/change-sets";
import { selectStanding } from "@/db/queries/revisions";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { changeSetInputSha256 } from "@/lib/services/change-sets/current-input";
import type { Ctx } from "@/lib/services/ctx";

type Place = Pick<Ctx, "workspaceId">;

/** Marks the change set from A to B as being computed and has it computed, unless it is there already. @returns its id */
export async function openPair(
  tx: Transaction,
  { workspaceId }: Place,
  { a, b }: { a: SideRow; b: SideRow },
  { background = false } = {},
): Promise<string> {
  const { changeSetId, isOpen } = await openChangeSet(tx, {
    workspaceId,
    programmeId: b.programmeId,
    revisionAId: a.id,
    revisionBId: b.id,
    inputSha256: changeSetInputSha256(a, b),
    readerVersion: READER_VERSION,
  });
  const data = { workspaceId, changeSetId };
  if (isOpen) await enqueueJob(tx, { name: "compute-change-set", data }, { background });
  return changeSetId;
}

/** Opens each pair whose revisions are there, once. */
export async function openPairs(
  tx: Transaction,
  place: Place,
  pairs: readonly { revisionAId: string; revisionBId: string }[],
  options: { background?: boolean } = {},
): Promise<void> {
  const revisionIds = [...new Set(pairs.flatMap((pair) => [pair.revisionAId, pair.revisionBId]))];
  if (revisionIds.length === 0) return;
  const sides = await selectSides(tx, { workspaceId: place.workspaceId, revisionIds });
  const byId = new Map(sides.map((side) => [side.id, side]));
  const asked = new Set<string>();
  for (const { revisionAId, revisionBId } of pairs) {
    const [a, b] = [byId.get(revisionAId), byId.get(revisionBId)];
    const name = `${revisionAId} ${revisionBId}`;
    if (!a || !b || a.id === b.id || asked.has(name)) continue;
    asked.add(name);
    await openPair(tx, place, { a, b }, options);
  }
}

/**
 * Has the image of a revision read, and its change sets worked out, once the caller's transaction commits: against its parent, against
 * what stands, and every pair that somebody asked for before.
 */
export async function refreshChangeSetsOf(
  tx: Transaction,
  place: Place,
  { revisionId }: { revisionId: string },
): Promise<void> {
  const { workspaceId } = place;
  const [revision] = await selectSides(tx, { workspaceId, revisionIds: [revisionId] });
  if (!revision) return;
  await enqueueJob(tx, { name: "read-image", data: { workspaceId, revisionId } });
  const standing = await selectStanding(tx, { workspaceId, programmeId: revision.programmeId });
  const before = [revision.parentId, standing?.id].filter((id) => id !== null && id !== undefined);
  const earlier = await selectPairsOf(tx, { workspaceId, revisionId });
  await openPairs(tx, place, [
    ...before.map((revisionAId) => ({ revisionAId, revisionBId: revisionId })),
    ...earlier,
  ]);
}

/** Has every revision that nothing was decided on compared with what stands now. */
export async function refreshAgainstStanding(
  tx: Transaction,
  place: Place,
  { programmeId }: { programmeId: string },
): Promise<void> {
  const undecided = await selectUndecided(tx, { workspaceId: place.workspaceId, programmeId });
  const pairs = undecided.flatMap(({ id, standingId }) =>
    standingId === null ? [] : [{ revisionAId: standingId, revisionBId: id }],
  );
  await openPairs(tx, place, pairs);
}
