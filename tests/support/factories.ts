import { randomUUID } from "node:crypto";
import type { Queryable } from "@/db/client";
import {
  blobs,
  gatePlans,
  memberships,
  programmes,
  revisions,
  roadDays,
  users,
  vehicleSheets,
  workspaces,
} from "@/db/tables";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import type { Role } from "@/lib/policy/actor";
import { type Ctx, mintCtx } from "@/lib/services/ctx";
import type { ObjectStore } from "@/storage/port";

/** Every made thing has a name of its own, so that tests never meet. */
const unique = (what: string) => `${what} ${randomUUID().slice(0, 8)}`;

/** An invented compact car; figures are made up for tests. */
export const SHEET: VehicleSheetFigures = {
  label: "test hatch",
  engine: "spark ignition",
  aspiration: "turbo",
  drive: "FWD",
  displacementL: 2,
  massPartsKg: [{ part: "car as weighed, driver and fuel", value: 1486, uncertainty: 10 }],
  tyre: "225/40 R18",
  rollingCircumferenceM: null,
  gearRatios: [3.62, 2.11, 1.44, 1.09, 0.88, 0.73],
  finalDrive: 3.75,
  speedAtRpm: { gear: 3, rpm: 3000, speedKmh: 64.6 },
  idleRpm: 800,
  redlineRpm: 6600,
  engineInertiaKgm2: { value: 0.175, uncertainty: 0.02 },
  wheelInertiaKgm2: { value: 4.3, uncertainty: 0.4 },
  meshEfficiency: { value: 0.955, uncertainty: 0.01 },
  fuelQuantityMgPerLCycle: null,
};

export async function createPerson(
  db: Queryable,
  name = unique("Person"),
): Promise<{ id: string; name: string; email: string }> {
  const email = `${randomUUID()}@example.org`;
  const [row] = await db.insert(users).values({ name, email }).returning({ id: users.id });
  return { id: row.id, name, email };
}

export async function createWorkspaceRow(db: Queryable, name = unique("Workspace")): Promise<string> {
  const [row] = await db.insert(workspaces).values({ name }).returning({ id: workspaces.id });
  return row.id;
}

/** A member of a workspace with the given roles, and the context in which they act. */
export async function createMember(
  db: Queryable,
  {
    workspaceId,
    roles,
    store,
    name,
  }: { workspaceId: string; roles: Role[]; store: ObjectStore; name?: string },
): Promise<Ctx> {
  const person = await createPerson(db, name);
  await db.insert(memberships).values({ workspaceId, userId: person.id, roles });
  return mintCtx({ userId: person.id, userName: person.name, workspaceId, roles, db, store });
}

/** A programme with sheet version 1 and, when given, gate plan version 1. */
export async function createProgrammeRow(
  db: Queryable,
  {
    workspaceId,
    createdBy,
    plan,
  }: { workspaceId: string; createdBy: string; plan?: typeof gatePlans.$inferInsert.plan },
): Promise<string> {
  const [row] = await db
    .insert(programmes)
    .values({ workspaceId, name: unique("Programme"), createdBy })
    .returning({ id: programmes.id });
  await db
    .insert(vehicleSheets)
    .values({ workspaceId, programmeId: row.id, version: 1, figures: SHEET, createdBy });
  if (plan)
    await db.insert(gatePlans).values({ workspaceId, programmeId: row.id, version: 1, plan, createdBy });
  return row.id;
}

/** A revision whose image row names bytes that need not exist in the store. */
export async function createRevisionRow(
  db: Queryable,
  values: Pick<typeof revisions.$inferInsert, "workspaceId" | "programmeId" | "number" | "authorId"> &
    Partial<typeof revisions.$inferInsert>,
): Promise<string> {
  const sha256 = values.imageSha256 ?? randomUUID().replaceAll("-", "").repeat(2);
  await db
    .insert(blobs)
    .values({ workspaceId: values.workspaceId, sha256, sizeBytes: 4 })
    .onConflictDoNothing();
  const [row] = await db
    .insert(revisions)
    .values({
      title: unique("Revision"),
      imageFileName: "image.hex",
      imageBytes: 4,
      imageSummary: { container: "intel-hex", identity: sha256, segments: [], problems: [] },
      changeReason: "a reason",
      intendedUse: "closed_course",
      touchesEmissionOrSafety: false,
      ...values,
      imageSha256: sha256,
    })
    .returning({ id: revisions.id });
  return row.id;
}

export async function createRoadDayRow(
  db: Queryable,
  { workspaceId, programmeId, createdBy }: { workspaceId: string; programmeId: string; createdBy: string },
): Promise<string> {
  const [row] = await db
    .insert(roadDays)
    .values({
      workspaceId,
      programmeId,
      createdBy,
      day: "2030-01-01",
      zone: "UTC",
      stripName: unique("Strip"),
      driver: "A driver",
      recorder: "A recorder",
      tempC: 17.5,
      pressureHpa: 1003,
      humidityPct: 58,
      checklist: [],
    })
    .returning({ id: roadDays.id });
  return row.id;
}
