import { and, desc, eq } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { users, vehicleSheets } from "@/db/tables";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";

interface Place {
  workspaceId: string;
  programmeId: string;
}

/** One version of a sheet; the newest when none is named. */
export async function selectVehicleSheet(
  db: Queryable,
  { workspaceId, programmeId, version }: Place & { version?: number },
) {
  const [row] = await db
    .select({
      version: vehicleSheets.version,
      figures: vehicleSheets.figures,
      createdAt: vehicleSheets.createdAt,
      createdByName: users.name,
    })
    .from(vehicleSheets)
    .innerJoin(users, eq(users.id, vehicleSheets.createdBy))
    .where(
      and(
        eq(vehicleSheets.workspaceId, workspaceId),
        eq(vehicleSheets.programmeId, programmeId),
        version === undefined ? undefined : eq(vehicleSheets.version, version),
      ),
    )
    .orderBy(desc(vehicleSheets.version))
    .limit(1);
  return row ?? null;
}

/** Versions of a sheet, newest first, without their figures. */
export async function selectVehicleSheetVersions(db: Queryable, { workspaceId, programmeId }: Place) {
  return await db
    .select({
      version: vehicleSheets.version,
      createdAt: vehicleSheets.createdAt,
      createdByName: users.name,
    })
    .from(vehicleSheets)
    .innerJoin(users, eq(users.id, vehicleSheets.createdBy))
    .where(and(eq(vehicleSheets.workspaceId, workspaceId), eq(vehicleSheets.programmeId, programmeId)))
    .orderBy(desc(vehicleSheets.version));
}

/** Adds a version. @returns false when somebody else has just added it */
export async function insertVehicleSheet(
  tx: Queryable,
  values: Place & { version: number; figures: VehicleSheetFigures; createdBy: string },
): Promise<boolean> {
  const made = await tx
    .insert(vehicleSheets)
    .values(values)
    .onConflictDoNothing({ target: [vehicleSheets.programmeId, vehicleSheets.version] })
    .returning({ version: vehicleSheets.version });
  return made.length > 0;
}
