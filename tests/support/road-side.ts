import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import type { Queryable } from "@/db/client";
import type { Ctx } from "@/lib/services/ctx";
import { confirmChecklist } from "@/lib/services/road-days/confirm-checklist";
import { createRoadDay } from "@/lib/services/road-days/create";
import { CHECKLIST, type NewRoadDay } from "@/lib/services/road-days/schema";
import { attachRun } from "@/lib/services/runs/attach";
import { type AttachedRun, type AttachRunForm, attachRunSchema } from "@/lib/services/runs/schema";
import type { ObjectStore } from "@/storage/port";
import {
  createMember,
  createProgrammeRow,
  createRevisionRow,
  createWorkspaceRow,
} from "@/tests/support/factories";
import { uploadBytes } from "@/tests/support/upload-bytes";

/** A log of tests/golden/logs, unpacked. */
export function goldenLog(path: string): Buffer {
  return gunzipSync(readFileSync(new URL(`../golden/logs/${path}.gz`, import.meta.url)));
}

/** A usable pull of the test car. `copy` changes the fingerprint by blank lines at the end, never what it says. */
export function pullLog(copy = 0): Buffer {
  const log = goldenLog("dialects/d01_comma_bracket_units.csv");
  return Buffer.concat([log, Buffer.from("\n".repeat(copy))]);
}

export const DAY: Omit<NewRoadDay, "programmeId"> = {
  day: "2030-01-01",
  zone: "Europe/Berlin",
  stripName: "North strip",
  stripLengthM: 2400,
  driver: "A driver",
  recorder: "A recorder",
  tempC: 19,
  pressureHpa: 1004,
  humidityPct: 52,
  windNote: "",
  fuelNote: "",
  tyrePressureFrontKpa: 240,
  tyrePressureRearKpa: 240,
  massKg: null,
};

export interface RoadSide {
  workspaceId: string;
  programmeId: string;
  roadDayId: string;
  /** Stands. */
  r1: string;
  /** Validating. */
  r2: string;
  tester: Ctx;
  otherTester: Ctx;
  calibrator: Ctx;
  lead: Ctx;
}

/** A workshop with a standing revision, one that is validated, and a road day whose checklist is confirmed. */
export async function createRoadSide(db: Queryable, store: ObjectStore): Promise<RoadSide> {
  const workspaceId = await createWorkspaceRow(db);
  const member = (roles: Parameters<typeof createMember>[1]["roles"]) =>
    createMember(db, { workspaceId, roles, store });
  const [tester, otherTester, calibrator, lead] = [
    await member(["tester"]),
    await member(["tester"]),
    await member(["calibrator"]),
    await member(["lead"]),
  ];
  const programmeId = await createProgrammeRow(db, { workspaceId, createdBy: lead.userId });
  const own = { workspaceId, programmeId, authorId: calibrator.userId };
  const r1 = await createRevisionRow(db, { ...own, number: 1, state: "promoted" });
  const r2 = await createRevisionRow(db, { ...own, number: 2, state: "validating" });
  const { id: roadDayId } = await createRoadDay(tester, { ...DAY, programmeId });
  await confirmChecklist(tester, { roadDayId, confirmed: CHECKLIST.map((line) => line.item) });
  return { workspaceId, programmeId, roadDayId, r1, r2, tester, otherTester, calibrator, lead };
}

/** Uploads a log and attaches it, as the drop area does. */
export async function attachLog(
  ctx: Ctx,
  side: Pick<RoadSide, "roadDayId" | "r2">,
  log: Uint8Array,
  values: Partial<Omit<AttachRunForm, "uploadId">> = {},
  { fileName = "pull.csv", key = crypto.randomUUID() as string } = {},
): Promise<AttachedRun> {
  const uploadId = await uploadBytes(ctx, "log", fileName, log);
  const input = attachRunSchema.parse({
    uploadId,
    roadDayId: side.roadDayId,
    revisionId: side.r2,
    kind: "pull",
    leg: "out",
    driveOrder: 1,
    gear: 3,
    ...values,
  });
  return await attachRun(ctx, input, { idempotencyKey: key });
}
