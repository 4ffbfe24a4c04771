import type { Transaction } from "@/db/client";
import type { RoadDayRow } from "@/db/queries/road-days";
import { insertRun, selectRunWithLog, selectTakenPlaces, takeRunNumber } from "@/db/queries/runs";
import { ConflictError, InvalidInputError } from "@/lib/errors";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { requireFitting } from "@/lib/services/channel-keys/apply";
import { headerOfLog } from "@/lib/services/channel-keys/run-head";
import { findOrOpen } from "@/lib/services/comparisons/question";
import { STANDARD_SETTINGS } from "@/lib/services/comparisons/schema";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { once } from "@/lib/services/idempotency";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import { loadRevisionForUpdate, requireState } from "@/lib/services/revisions/load";
import { loadRoadDay } from "@/lib/services/road-days/load";
import { openLines } from "@/lib/services/road-days/schema";
import type { AttachedRun, AttachRun } from "@/lib/services/runs/schema";
import { clearStaging, type SealedUpload, sealUpload, spendSealedUpload } from "@/lib/services/uploads/seal";

/** The road day is cleared for driving. @throws ConflictError `checklist_open` */
function requireChecklist(roadDay: RoadDayRow): void {
  const open = openLines(roadDay.checklist);
  if (open.length === 0) return;
  throw new ConflictError(
    "checklist_open",
    `The safety checklist of this road day is not confirmed yet (${open.length} of its lines are open). Confirm it on the road-day page, then attach the run.`,
    { open },
  );
}

/** The barred, the drafts and what stood before take no runs. @throws NotFoundError, ConflictError */
async function requireDrivable(tx: Transaction, ctx: Ctx, input: AttachRun, roadDay: RoadDayRow) {
  const revision = await loadRevisionForUpdate(tx, ctx, input.revisionId);
  if (revision.programmeId !== roadDay.programmeId) {
    throw new InvalidInputError(
      "other_programme",
      `R${revision.number} belongs to another programme than this road day. Choose a revision of this one.`,
    );
  }
  requireState(revision, ["validating", "in_review", "promoted"], "attach runs");
  if (revision.barredAt)
    throw new ConflictError("revision_barred", `R${revision.number} is barred. It is not driven any more.`);
  return revision;
}

/** On a null test one image is driven under two letters; elsewhere the revision alone tells the side. @throws InvalidInputError */
function requireLetter(roadDay: RoadDayRow, input: AttachRun): "A" | "B" | null {
  if (roadDay.nullTestRevisionId === null) return null;
  if (input.revisionId !== roadDay.nullTestRevisionId)
    throw new InvalidInputError(
      "null_test_one_image",
      "This road day is a null test: every run of it is driven on one image. Drive another image on a road day of its own.",
    );
  if (!input.letter)
    throw new InvalidInputError(
      "letter_missing",
      "Say which letter of the order card this run is: on a null test nothing else tells the two sides apart.",
    );
  return input.letter;
}

/** One log once a programme, one run a place. @throws ConflictError `already_attached`, `place_taken` */
async function requireNew(tx: Transaction, roadDay: RoadDayRow, input: AttachRun, sealed: SealedUpload) {
  const { workspaceId, programmeId, id: roadDayId } = roadDay;
  const same = await selectRunWithLog(tx, { workspaceId, programmeId, logSha256: sealed.sha256 });
  if (same) {
    throw new ConflictError(
      "already_attached",
      `Already attached as run ${same.number}: ${sealed.fileName} has the same fingerprint.`,
      { runId: same.id, number: same.number },
    );
  }
  const places = await selectTakenPlaces(tx, { workspaceId, roadDayId });
  const taken = places.find((place) => place.driveOrder === input.driveOrder);
  if (!taken) return;
  const next = Math.max(...places.map((place) => place.driveOrder)) + 1;
  const way = taken.state === "refused" ? "was refused: set it aside, or" : "stays:";
  throw new ConflictError(
    "place_taken",
    `Place ${input.driveOrder} of this road day is taken by run ${taken.number}, which ${way} take place ${next}, the next free one.`,
    { runId: taken.id, number: taken.number, next },
  );
}

/**
 * Makes a run of an uploaded log and has it judged: the bytes are under their fingerprint before any row names them, and
 * run, ledger entry and job commit together. The same key gives the same run again.
 * @throws ForbiddenError; NotFoundError; InvalidInputError; ConflictError `checklist_open`, `wrong_state`,
 *   `already_attached`, `place_taken` (details.number = the run in the way); InvalidInputError `key_does_not_fit`
 */
export async function attachRun(
  ctx: Ctx,
  input: AttachRun & { sample?: boolean },
  { idempotencyKey }: { idempotencyKey: string },
): Promise<AttachedRun> {
  authorise(ctx, "run.attach");
  const { uploadId } = input;
  const sealed = await sealUpload(ctx, { uploadId, purpose: "log" });
  const headerSha256 = await headerOfLog(ctx, sealed.sha256);
  const attached = await once(ctx, { key: idempotencyKey, request: input }, async (tx, inner) => {
    const { workspaceId, userId } = inner;
    const roadDay = await loadRoadDay(inner, input.roadDayId);
    const { programmeId } = roadDay;
    const { programme, sheet } = await loadProgramme(inner, programmeId);
    refuseArchived(programme);
    requireChecklist(roadDay);
    const revision = await requireDrivable(tx, inner, input, roadDay);
    const letter = requireLetter(roadDay, input);
    const key = input.channelKeyId ? await requireFitting(inner, input.channelKeyId, headerSha256) : null;
    // Its row lock also puts attachments of the workspace one after the other, so the checks below can't race.
    const number = await takeRunNumber(tx, { workspaceId });
    await requireNew(tx, roadDay, input, sealed);
    await spendSealedUpload(tx, inner, sealed);
    const { kind, leg, driveOrder, gear, note, startedAt, sample } = input;
    const run = await insertRun(tx, {
      workspaceId,
      programmeId,
      roadDayId: roadDay.id,
      revisionId: revision.id,
      number,
      kind,
      leg,
      driveOrder,
      letter,
      gear,
      note,
      startedAt: startedAt === null ? null : new Date(startedAt),
      tempC: input.tempC ?? roadDay.tempC,
      pressureHpa: input.pressureHpa ?? roadDay.pressureHpa,
      humidityPct: input.humidityPct ?? roadDay.humidityPct,
      logSha256: sealed.sha256,
      logFileName: sealed.fileName,
      logBytes: sealed.sizeBytes,
      headerSha256,
      channelKeyId: key?.id ?? null,
      testerId: userId,
      sample: sample ?? false,
    });
    await appendLedger(tx, inner, {
      event: "run.attached",
      subjectType: "run",
      subjectId: run.id,
      programmeId,
      data: {
        number,
        sha256: sealed.sha256,
        bytes: sealed.sizeBytes,
        revision: revision.number,
        imageSha256: revision.imageSha256,
        roadDayId: roadDay.id,
        kind,
        leg,
        driveOrder,
        ...(letter && { letter }),
        gear,
        vehicleSheet: sheet.version,
        ...(key && { channelKey: { name: key.name, version: key.version } }),
        clock: startedAt === null ? "the log's own" : "typed",
      },
    });
    if (letter !== null) {
      // A null test asks one question that needs no choice, so it is asked with the first run; each verdict has it computed.
      const sides = { revisionAId: revision.id, revisionBId: revision.id, nullTestRoadDayId: roadDay.id };
      await findOrOpen(tx, inner, { ...sides, settings: STANDARD_SETTINGS });
    }
    await enqueueJob(tx, { name: "judge-run", data: { workspaceId, runId: run.id } });
    return { runId: run.id, number };
  });
  await clearStaging(ctx, uploadId);
  return attached;
}
