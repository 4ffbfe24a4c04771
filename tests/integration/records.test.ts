import { eq } from "drizzle-orm";
import { describe, expect, vi } from "vitest";
import { decisions, programmeShares, revisions } from "@/db/tables";
import { ForbiddenError, NotFoundError } from "@/lib/errors";
import { withTransaction } from "@/lib/services/ctx";
import { getRecord } from "@/lib/services/decisions/load-record";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { recordDecision } from "@/lib/services/decisions/record";
import { recordDigest, recordHolds } from "@/lib/services/decisions/record-digest";
import { turnDownRevision } from "@/lib/services/decisions/send-back";
import { test } from "@/tests/support/database";
import {
  createCandidate,
  createScene,
  NEVER_MET,
  seenBy,
  seenForSendBack,
} from "@/tests/support/decision-scene";
import { createMember, createRevisionRow, createWorkspaceRow } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

// Hashing takes half a second a signature on purpose; here what is stored is the passphrase itself.
vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => given === stored,
}));

const WAIVED = [{ gateId: NEVER_MET.id, reason: "known from the last road day, taken again next week" }];

/** Every leaf of a value with its path, so that each can be changed in turn. */
function leaves(value: unknown, path: (string | number)[] = []): (string | number)[][] {
  if (value instanceof Date || value === null || typeof value !== "object") return [path];
  return Object.entries(value).flatMap(([key, member]) => leaves(member, [...path, key]));
}

function withChange(value: unknown, [key, ...rest]: (string | number)[]): unknown {
  if (key === undefined) {
    if (value instanceof Date) return new Date(value.getTime() + 1);
    if (typeof value === "number") return value + 1;
    if (typeof value === "boolean") return !value;
    return `${value}x`;
  }
  const copy = Array.isArray(value) ? [...value] : { ...(value as object) };
  const members = copy as Record<string | number, unknown>;
  members[key] = withChange(members[key], rest);
  return copy;
}

describe("a record", () => {
  test("has a digest that changes with every single field of it, waivers and evidence too", async ({
    database: { db },
  }) => {
    const scene = await createScene(db, { gates: [NEVER_MET] });
    await promoteRevision(scene.lead, {
      ...(await seenBy(scene.lead, scene.candidateId)),
      waivers: WAIVED,
    });
    const [row] = await db.select().from(decisions);
    const { waivers, holds } = await getRecord(scene.lead, row.id);
    expect(holds).toBe(true);
    const { recordSha256, ...content } = row;
    const record = { ...content, waivers };
    expect(recordDigest(record)).toBe(recordSha256);
    const paths = leaves(record);
    expect(paths.length).toBeGreaterThan(60);
    const digests = paths.map((path) => recordDigest(withChange(record, path) as typeof record));
    for (const [index, digest] of digests.entries())
      expect(digest, String(paths[index])).not.toBe(recordSha256);
    expect(recordHolds({ ...row, reason: "another reason" }, waivers)).toBe(false);
    expect(recordHolds(row, [])).toBe(false);
  });

  test("names the record before it, across programmes of the workspace", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const first = await promoteRevision(scene.lead, await seenBy(scene.lead, scene.candidateId));
    const nextId = await createCandidate(scene, 3);
    await turnDownRevision(scene.lead, await seenForSendBack(scene.lead, nextId));
    const rows = await db.select().from(decisions).orderBy(decisions.recordNumber);
    expect(rows.map((row) => [row.recordNumber, row.previousRecordSha256])).toEqual([
      [1, null],
      [2, first.recordSha256],
    ]);
  });

  test("of an adoption as found is written by the same hand", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const revisionId = await createRevisionRow(db, {
      workspaceId: scene.workspaceId,
      programmeId: scene.programmeId,
      number: 9,
      authorId: scene.author.userId,
    });
    const recorded = await withTransaction(scene.lead, (tx, inner) =>
      recordDecision(tx, inner, {
        kind: "as_found",
        programmeId: scene.programmeId,
        revisionId,
        fromRevisionId: null,
        reason: "read twice over the socket, both reads equal",
        reauthMethod: "passphrase",
      }),
    );
    const record = await getRecord(scene.lead, recorded.decisionId);
    expect(record).toMatchObject({ holds: true, compared: null, from: null });
    expect(record.decision).toMatchObject({ kind: "as_found", recordNumber: 1 });
  });

  test("shows the figures it rests on only while they have the digest that was signed", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { decisionId } = await promoteRevision(scene.lead, await seenBy(scene.lead, scene.candidateId));
    const record = await getRecord(scene.lead, decisionId);
    expect(record.compared?.result.sides.A?.n).toBe(2);
    expect(record.notTested.join(" ")).toContain("Other gears than 3.");
    expect(record.notTested.join(" ")).toContain("below 2\u202f000 and above 6\u202f000");
    await db.execute("update comparison_results set result = jsonb_set(result, '{sides,A,n}', '7')");
    expect((await getRecord(scene.lead, decisionId)).compared).toBeNull();
  });

  test("is seen by readers of a shared programme when something stands after it, by admins always, by strangers never", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { workspaceId, programmeId } = scene;
    const promoted = await promoteRevision(scene.lead, await seenBy(scene.lead, scene.candidateId));
    const nextId = await createCandidate(scene, 3);
    const turnedDown = await turnDownRevision(scene.lead, await seenForSendBack(scene.lead, nextId));
    const reader = await createMember(db, { workspaceId, roles: ["reader"], store: noStore });
    const admin = await createMember(db, { workspaceId, roles: ["admin"], store: noStore });
    const elsewhere = await createWorkspaceRow(db);
    const stranger = await createMember(db, { workspaceId: elsewhere, roles: ["lead"], store: noStore });

    await expect(getRecord(reader, promoted.decisionId)).rejects.toBeInstanceOf(ForbiddenError);
    await db.insert(programmeShares).values({
      workspaceId,
      programmeId,
      userId: reader.userId,
      expiresOn: "2999-01-01",
      sharedBy: scene.lead.userId,
    });
    const seen = await getRecord(reader, promoted.decisionId);
    expect(seen.chain.map((entry) => entry.kind)).toEqual(["promote"]);
    await expect(getRecord(reader, turnedDown.decisionId)).rejects.toBeInstanceOf(ForbiddenError);
    expect((await getRecord(admin, turnedDown.decisionId)).chain).toHaveLength(2);
    await expect(getRecord(stranger, promoted.decisionId)).rejects.toBeInstanceOf(NotFoundError);
    expect((await db.select().from(revisions).where(eq(revisions.id, nextId)))[0].state).toBe("turned_down");
  });
});
