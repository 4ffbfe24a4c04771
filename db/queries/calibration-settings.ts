import { and, desc, eq } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import type { CalibrationSettings } from "@/db/schema/change-sets";
import { calibrationSettings, users } from "@/db/tables";

export type SettingKind = keyof CalibrationSettings;
interface Place<Kind extends SettingKind> {
  workspaceId: string;
  programmeId: string;
  kind: Kind;
}

const at = ({ workspaceId, programmeId, kind }: Place<SettingKind>) =>
  and(
    eq(calibrationSettings.workspaceId, workspaceId),
    eq(calibrationSettings.programmeId, programmeId),
    eq(calibrationSettings.kind, kind),
  );

/** The newest version of a kind; version 0 and nothing in it where none was saved. */
export async function selectSetting<Kind extends SettingKind>(
  db: Queryable,
  place: Place<Kind>,
): Promise<{ version: number; content: CalibrationSettings[Kind] }> {
  const [row] = await db
    .select({ version: calibrationSettings.version, content: calibrationSettings.content })
    .from(calibrationSettings)
    .where(at(place))
    .orderBy(desc(calibrationSettings.version))
    .limit(1);
  if (!row) return { version: 0, content: [] };
  // The pairing of kind and content is kept by insertSetting's type.
  return row as { version: number; content: CalibrationSettings[Kind] };
}

/** One version of a kind; null where there is no such version. */
export async function selectSettingVersion<Kind extends SettingKind>(
  db: Queryable,
  place: Place<Kind> & { version: number },
): Promise<{ version: number; content: CalibrationSettings[Kind] } | null> {
  const [row] = await db
    .select({ version: calibrationSettings.version, content: calibrationSettings.content })
    .from(calibrationSettings)
    .where(and(at(place), eq(calibrationSettings.version, place.version)));
  // As above: a row of this kind holds this kind's content.
  return (row as { version: number; content: CalibrationSettings[Kind] } | undefined) ?? null;
}

/** Versions of a kind, newest first, without their content. */
export async function selectSettingVersions(db: Queryable, place: Place<SettingKind>) {
  return await db
    .select({
      version: calibrationSettings.version,
      createdAt: calibrationSettings.createdAt,
      createdByName: users.name,
    })
    .from(calibrationSettings)
    .innerJoin(users, eq(users.id, calibrationSettings.createdBy))
    .where(at(place))
    .orderBy(desc(calibrationSettings.version));
}

/** Adds a version. @returns false when somebody else has just added it */
export async function insertSetting<Kind extends SettingKind>(
  tx: Queryable,
  values: Place<Kind> & { version: number; content: CalibrationSettings[Kind]; createdBy: string },
): Promise<boolean> {
  const made = await tx
    .insert(calibrationSettings)
    .values(values)
    .onConflictDoNothing({
      target: [calibrationSettings.programmeId, calibrationSettings.kind, calibrationSettings.version],
    })
    .returning({ version: calibrationSettings.version });
  return made.length > 0;
}
