import { insertRoadDay, type RoadDayRow } from "@/db/queries/road-days";
import { selectDrivableRevisions } from "@/db/queries/runs";
import { InvalidInputError } from "@/lib/errors";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import type { NewRoadDay } from "@/lib/services/road-days/schema";

/**
 * Opens a road day with nothing of its checklist confirmed: that is done at the road side.
 * @throws ForbiddenError; NotFoundError; ConflictError `programme_archived`; InvalidInputError `not_drivable`
 */
export async function createRoadDay(ctx: Ctx, input: NewRoadDay & { sample?: boolean }): Promise<RoadDayRow> {
  authorise(ctx, "road_day.edit");
  return await withTransaction(ctx, async (tx, inner) => {
    const { programme } = await loadProgramme(inner, input.programmeId);
    refuseArchived(programme);
    const { workspaceId, userId } = inner;
    const { nullTestRevisionId } = input;
    if (nullTestRevisionId) {
      const drivable = await selectDrivableRevisions(tx, { workspaceId, programmeId: programme.id });
      if (!drivable.some((revision) => revision.id === nullTestRevisionId))
        throw new InvalidInputError(
          "not_drivable",
          "The null test needs a revision of this programme that is validating, in review or standing.",
        );
    }
    const nullTestRewrites = Boolean(nullTestRevisionId && input.nullTestRewrites);
    const values = { ...input, nullTestRewrites, workspaceId, createdBy: userId, checklist: [] };
    const row = await insertRoadDay(tx, values);
    const { programmeId, sample: _sample, ...figures } = input;
    await appendLedger(tx, inner, {
      event: "road_day.created",
      subjectType: "road_day",
      subjectId: row.id,
      programmeId,
      data: { new: figures },
    });
    return row;
  });
}
