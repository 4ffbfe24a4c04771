import { closeChangeSet, type SideRow, selectChangeSetHead, selectSides } from "@/db/queries/change-sets";
import type { DescriptionRow } from "@/db/queries/descriptions";
import { textDifference } from "@/lib/calibration/a2l/text-difference";
import { changeSetOf } from "@/lib/calibration/changes/change-set";
import type { ChangeSet } from "@/lib/calibration/changes/types";
import { digestOf } from "@/lib/canonical-json";
import { TwinpassError } from "@/lib/errors";
import { imageReading } from "@/lib/jobs/calibration/image-reading";
import { readFilesOf, settledDescription } from "@/lib/jobs/calibration/settle-description";
import { storable } from "@/lib/jobs/calibration/storable";
import type { System } from "@/lib/jobs/system";
import { logger } from "@/lib/logger";
import { changeSetInputSha256 } from "@/lib/services/change-sets/current-input";
import { openCoverageOf } from "@/lib/services/change-sets/refresh-coverage";
import { openCalibrationImage } from "@/lib/services/revisions/read-image";

interface ChangeSetJob {
  workspaceId: string;
  changeSetId: string;
}

const OUR_SIDE =
  "The changes could not be worked out on our side. The images are kept as they are; ask for them again, and if it fails again tell whoever runs this installation.";

/** A side with its description, as far as one was read. */
interface Side {
  row: SideRow;
  description: DescriptionRow | null;
  /** Why its own description does not serve. */
  problem: string | null;
}

async function withDescription(system: System, workspaceId: string, row: SideRow): Promise<Side> {
  const { descriptionId, number } = row;
  if (descriptionId === null) return { row, description: null, problem: null };
  const description = await settledDescription(system, { workspaceId, descriptionId });
  if (description?.state === "read") return { row, description, problem: null };
  return {
    row,
    description: null,
    problem: `The description of R${number} is not used: ${description?.failure ?? "it is not there."}`,
  };
}

async function descriptionDifference(
  system: System,
  a: Side,
  b: Side,
): Promise<ChangeSet["descriptionDifference"]> {
  if (!a.description || !b.description || a.description.id === b.description.id) return null;
  return textDifference(await readFilesOf(system, a.description), await readFilesOf(system, b.description));
}

async function compare(
  system: System,
  workspaceId: string,
  rows: { a: SideRow; b: SideRow },
): Promise<ChangeSet> {
  const a = await withDescription(system, workspaceId, rows.a);
  const b = await withDescription(system, workspaceId, rows.b);
  const where = { store: system.store, workspaceId };
  const imageA = await openCalibrationImage(where, a.row);
  const imageB = await openCalibrationImage(where, b.row);
  const byA = a.description ?? b.description;
  const byB = b.description ?? a.description;
  const before = byA && (await imageReading(system, { side: a.row, image: imageA, description: byA }));
  const after = byB && (await imageReading(system, { side: b.row, image: imageB, description: byB }));
  const changes = changeSetOf(
    { image: imageA, reading: before },
    { image: imageB, reading: after },
    {
      readBy: a.description && b.description ? "both" : a.description ? "a" : "b",
      descriptionDifference: await descriptionDifference(system, a, b),
    },
  );
  const problems = [a.problem, b.problem].filter((problem) => problem !== null);
  return storable({ ...changes, problems: [...problems, ...changes.problems] });
}

/**
 * Works out what differs between two revisions, stores it under the digest of its input, and asks for its coverage. May run any
 * number of times: a result that is there is left alone.
 * @throws what kept it from being worked out on our side, after having noted it, so that the queue tries again
 */
export async function computeChangeSet(system: System, job: ChangeSetJob): Promise<void> {
  const { db } = system;
  const { workspaceId } = job;
  const head = await selectChangeSetHead(db, job);
  if (!head || head.state === "ready") return;
  const revisionIds = [head.revisionAId, head.revisionBId];
  const sides = await selectSides(db, { workspaceId, revisionIds });
  const a = sides.find(({ id }) => id === head.revisionAId);
  const b = sides.find(({ id }) => id === head.revisionBId);
  if (!a || !b) return;
  if (changeSetInputSha256(a, b) !== head.inputSha256)
    return await closeChangeSet(db, job, {
      state: "failed",
      failure: "A description was added meanwhile. The changes are worked out anew.",
    });
  try {
    const result = await compare(system, workspaceId, { a, b });
    const resultSha256 = digestOf(result);
    await db.transaction(async (tx) => {
      await closeChangeSet(tx, job, { state: "ready", result, resultSha256 });
      if (result.readBy !== "none") await openCoverageOf(tx, { workspaceId }, head);
    });
  } catch (error) {
    logger().error({ event: "change_set.failed", ...job, err: error });
    const failure = error instanceof TwinpassError ? error.message : OUR_SIDE;
    await closeChangeSet(db, job, { state: "failed", failure });
    throw error;
  }
}

/** The last try failed too, perhaps before anything could be noted: whoever waits is told. */
export async function giveUpComparing({ db }: System, job: ChangeSetJob): Promise<void> {
  const head = await selectChangeSetHead(db, job);
  if (head?.state === "computing") await closeChangeSet(db, job, { state: "failed", failure: OUR_SIDE });
}
