import type { Queryable } from "@/db/client";
import { insertMembership, updateRoles } from "@/db/queries/members";
import { savePassphrase } from "@/db/queries/people";
import { users } from "@/db/tables";
import { hashPassphrase } from "@/lib/auth/passphrase";
import { DEMO_PASSPHRASE } from "@/lib/demo";
import type { Role } from "@/lib/policy/actor";
import { type Ctx, mintCtx } from "@/lib/services/ctx";
import { createWorkspace } from "@/lib/services/workspaces/create";
import type { ObjectStore } from "@/storage/port";

/** Invented people of an invented workshop. The first one makes the workspace. */
const PEOPLE = {
  rafa: { name: "Rafa Quillon", roles: ["admin"] },
  mia: { name: "Mia Torvald", roles: ["calibrator"] },
  sam: { name: "Sam Okabe", roles: ["tester"] },
  ana: { name: "Ana Lindqvarn", roles: ["lead"] },
  jo: { name: "Jo Ferrande", roles: ["lead", "calibrator"] },
  noor: { name: "Noor Castelain", roles: ["reader"] },
} as const satisfies Record<string, { name: string; roles: Role[] }>;
export type DemoPerson = keyof typeof PEOPLE;

/** Makes workspace, people, memberships and signing passphrases. @returns each person's context */
export async function seedPeople(db: Queryable, store: ObjectStore): Promise<Record<DemoPerson, Ctx>> {
  const scryptHash = await hashPassphrase(DEMO_PASSPHRASE);
  const ids: Partial<Record<DemoPerson, string>> = {};
  for (const [key, { name }] of Object.entries(PEOPLE)) {
    const email = `${key}@demo.example`;
    const [row] = await db.insert(users).values({ name, email, sample: true }).returning({ id: users.id });
    await savePassphrase(db, { userId: row.id, scryptHash });
    ids[key as DemoPerson] = row.id;
  }
  const idOf = (key: DemoPerson): string => ids[key] ?? "";
  const founder = { userId: idOf("rafa"), userName: PEOPLE.rafa.name, db, store };
  const { workspaceId } = await createWorkspace(founder, { name: "Ninebark Lane Workshop", sample: true });
  // Who makes a workspace holds every role; in the story the founder only looks after people.
  await updateRoles(db, { workspaceId, userId: idOf("rafa"), roles: [...PEOPLE.rafa.roles] });
  const contexts: Partial<Record<DemoPerson, Ctx>> = {};
  for (const [key, { name, roles }] of Object.entries(PEOPLE)) {
    const userId = idOf(key as DemoPerson);
    if (key !== "rafa") await insertMembership(db, { workspaceId, userId, roles: [...roles] });
    contexts[key as DemoPerson] = mintCtx({ userId, userName: name, workspaceId, roles, db, store });
  }
  return contexts as Record<DemoPerson, Ctx>;
}
