import { randomUUID } from "node:crypto";
import { eq, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { revisions } from "@/db/tables";
import { computeChangeSet } from "@/lib/jobs/calibration/compute-change-set";
import { computeCoverage } from "@/lib/jobs/calibration/compute-coverage";
import { readRevisionImage } from "@/lib/jobs/calibration/read-image";
import { readKeptDescription } from "@/lib/jobs/calibration/settle-description";
import { judgeRun } from "@/lib/jobs/judge-run";
import type { Ctx } from "@/lib/services/ctx";
import { addRevision } from "@/lib/services/revisions/create";
import type { CreateRevision } from "@/lib/services/revisions/schema";
import type { ObjectStore } from "@/storage/port";
import { createMember, createProgrammeRow, createWorkspaceRow } from "@/tests/support/factories";
import { type SmallImage, smallA2l, smallHex } from "@/tests/support/small-calibration";
import { uploadBytes } from "@/tests/support/upload-bytes";

export interface CalibrationScene {
  db: Queryable;
  store: ObjectStore;
  workspaceId: string;
  programmeId: string;
  calibrator: Ctx;
  otherCalibrator: Ctx;
  tester: Ctx;
  lead: Ctx;
  reader: Ctx;
  admin: Ctx;
}

/** A programme without revisions, and somebody of each role. */
export async function createCalibrationScene(db: Queryable, store: ObjectStore): Promise<CalibrationScene> {
  const workspaceId = await createWorkspaceRow(db);
  const member = (role: Parameters<typeof createMember>[1]["roles"][number]) =>
    createMember(db, { workspaceId, roles: [role], store });
  const lead = await member("lead");
  const programmeId = await createProgrammeRow(db, { workspaceId, createdBy: lead.userId });
  return {
    db,
    store,
    workspaceId,
    programmeId,
    lead,
    calibrator: await member("calibrator"),
    otherCalibrator: await member("calibrator"),
    tester: await member("tester"),
    reader: await member("reader"),
    admin: await member("admin"),
  };
}

/** Adds a revision from an image of our own, as the page does. @param a2l null: without a description */
export async function addSmallRevision(
  scene: CalibrationScene,
  image: SmallImage,
  {
    parentId = null,
    a2l = smallA2l(),
    ...text
  }: { parentId?: string | null; a2l?: Buffer | null } & Partial<
    Pick<CreateRevision, "intendedUse" | "touchesEmissionOrSafety">
  > = {},
): Promise<string> {
  const { calibrator, programmeId } = scene;
  const uploadId = await uploadBytes(calibrator, "image", "small.hex", smallHex(image));
  const files = a2l ? [await uploadBytes(calibrator, "description", "small.a2l", a2l)] : [];
  const { revisionId } = await addRevision(
    calibrator,
    {
      programmeId,
      parentId,
      uploadId,
      descriptionUploadIds: files,
      title: "small",
      note: "",
      changeReason: "a reason",
      intendedUse: "road",
      touchesEmissionOrSafety: false,
      ...text,
    },
    randomUUID(),
  );
  return revisionId;
}

/** Puts a revision into a state without the steps that lead there. */
export async function setState(
  { db }: Pick<CalibrationScene, "db">,
  revisionId: string,
  set: Partial<typeof revisions.$inferInsert>,
): Promise<void> {
  await db.update(revisions).set(set).where(eq(revisions.id, revisionId));
}

const HANDLERS: Record<
  string,
  (system: Pick<CalibrationScene, "db" | "store">, data: never) => Promise<void>
> = {
  "judge-run": judgeRun,
  "read-description": readKeptDescription,
  "read-image": readRevisionImage,
  "compute-change-set": computeChangeSet,
  "compute-coverage": computeCoverage,
};

/** Does every job that waits, in the order of the worker's queues, until none is left. @returns their names */
export async function doJobs(scene: Pick<CalibrationScene, "db" | "store">): Promise<string[]> {
  const done: string[] = [];
  const order = Object.keys(HANDLERS);
  for (;;) {
    const { rows } = await scene.db.execute<{ id: string; name: string; data: never }>(sql`
      select id, name, data from pgboss.job where state < 'active' and name <> 'compute-comparison'`);
    const [next] = rows.sort((a, b) => order.indexOf(a.name) - order.indexOf(b.name));
    if (!next) return done;
    await HANDLERS[next.name](scene, next.data);
    await scene.db.execute(sql`update pgboss.job set state = 'completed' where id = ${next.id}`);
    done.push(next.name);
  }
}
