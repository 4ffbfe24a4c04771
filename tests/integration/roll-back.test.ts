import { createHash } from "node:crypto";
import { eq, sql } from "drizzle-orm";
import { describe, expect, onTestFinished, vi } from "vitest";
import { blobs, decisions, ledger, mailQueue, programmes, revisions } from "@/db/tables";
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from "@/lib/errors";
import type { Ctx } from "@/lib/services/ctx";
import { getRollBackDesk, previewRollBack } from "@/lib/services/decisions/load-roll-back";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { rollBack } from "@/lib/services/decisions/roll-back";
import type { RollBackInput } from "@/lib/services/decisions/schema";
import { blobKey } from "@/storage/keys";
import { test } from "@/tests/support/database";
import {
  createCandidate,
  createScene,
  createSigner,
  NEVER_MET,
  PASSPHRASE,
  type Scene,
  seenBy,
} from "@/tests/support/decision-scene";
import { createRevisionRow, createWorkspaceRow } from "@/tests/support/factories";
import { createTestStore } from "@/tests/support/store";

// Hashing takes half a second a signature on purpose; here what is stored is the passphrase itself.
vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => given === stored,
}));

async function* onePiece(bytes: Uint8Array) {
  yield bytes;
}

const WAIVED = [{ gateId: "evidence.days", reason: "nothing was driven for this test of the way back" }];

/** R1 as found, R2 and R3 promoted one after the other; R3 stands. */
async function threeStood(scene: Scene): Promise<{ thirdId: string }> {
  await promoteRevision(scene.lead, await seenBy(scene.lead, scene.candidateId));
  const thirdId = await createCandidate(scene, 3);
  await promoteRevision(scene.lead, { ...(await seenBy(scene.lead, thirdId)), waivers: WAIVED });
  return { thirdId };
}

function backTo(scene: Scene, from: string, to: string, number: number): RollBackInput {
  return {
    programmeId: scene.programmeId,
    toRevisionId: to,
    standingRevisionId: from,
    typedNumber: `R${number}`,
    reason: "knock at full load on the way home",
    passphrase: PASSPHRASE,
  };
}

async function standing({ db, programmeId }: Scene) {
  const rows = await db
    .select({ number: revisions.number, state: revisions.state })
    .from(revisions)
    .where(eq(revisions.programmeId, programmeId))
    .orderBy(revisions.number);
  const [programme] = await db.select().from(programmes).where(eq(programmes.id, programmeId));
  return { states: rows.map((row) => row.state), standingId: programme.standingRevisionId };
}

describe("rolling back", () => {
  test("goes to an earlier promoted revision and then to the image as found, each as a record of its own", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, candidateId, standingId } = scene;
    const { thirdId } = await threeStood(scene);
    const before = await db.select().from(decisions).orderBy(decisions.recordNumber);

    const first = await rollBack(lead, backTo(scene, thirdId, candidateId, 2));
    expect(await standing(scene)).toEqual({
      states: ["superseded", "promoted", "rolled_back"],
      standingId: candidateId,
    });
    const [left] = await db.select().from(revisions).where(eq(revisions.id, thirdId));
    expect(left.stoodUntil).toEqual(first.decidedAt);

    await rollBack(lead, backTo(scene, candidateId, standingId, 1));
    expect(await standing(scene)).toEqual({
      states: ["promoted", "rolled_back", "rolled_back"],
      standingId,
    });

    const after = await db.select().from(decisions).orderBy(decisions.recordNumber);
    expect(after.slice(0, 2)).toEqual(before);
    expect(after.map((row) => row.kind)).toEqual(["promote", "promote", "roll_back", "roll_back"]);
    expect(after[3]).toMatchObject({ fromRevisionId: candidateId, revisionId: standingId });
    expect(after[3].evidence).toMatchObject({ fromNumber: 2, revision: { number: 1 } });
    const entries = await db.select().from(ledger).where(eq(ledger.event, "decision.rolled_back"));
    expect(entries).toHaveLength(2);
    const mails = await db.select().from(mailQueue);
    expect(mails.filter((mail) => mail.subject.includes("R1 stands again"))).toHaveLength(3);
  });

  test("asks no gate, and its author may do it: safety comes first", async ({ database: { db } }) => {
    const scene = await createScene(db, { gates: [NEVER_MET] });
    const waivers = [{ gateId: NEVER_MET.id, reason: "nothing was driven for this test of the way back" }];
    await promoteRevision(scene.lead, { ...(await seenBy(scene.lead, scene.candidateId)), waivers });
    const roles = ["calibrator", "lead"] as const;
    await db.execute(
      sql`update memberships set roles = '{calibrator,lead}' where user_id = ${scene.author.userId}`,
    );
    const author: Ctx = { ...scene.author, roles };
    await rollBack(author, backTo(scene, scene.candidateId, scene.standingId, 1));
    expect((await standing(scene)).standingId).toBe(scene.standingId);
  });

  test("never goes to a barred one, to one that never stood, or to what stands", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, candidateId, standingId } = scene;
    const { thirdId } = await threeStood(scene);
    const draftId = await createCandidate(scene, 4, { state: "draft" });
    await db
      .update(revisions)
      .set({ barredAt: sql`now()`, barredReason: "it hurt an engine" })
      .where(eq(revisions.id, candidateId));
    await expect(rollBack(lead, backTo(scene, thirdId, candidateId, 2))).rejects.toThrow(/it hurt an engine/);
    await expect(rollBack(lead, backTo(scene, thirdId, draftId, 4))).rejects.toThrow(/never stood/);
    await expect(rollBack(lead, backTo(scene, thirdId, thirdId, 3))).rejects.toThrow(/stands already/);
    expect((await standing(scene)).standingId).toBe(thirdId);

    const desk = await getRollBackDesk(lead, scene.programmeId);
    expect(desk.earlier.map((row) => [row.number, row.barredReason])).toEqual([
      [2, "it hurt an engine"],
      [1, null],
    ]);
    await expect(previewRollBack(lead, desk, draftId)).rejects.toThrow(NotFoundError);
    await rollBack(lead, backTo(scene, thirdId, standingId, 1));
  });

  test("shows beforehand which bytes change back, and a damaged file keeps nobody from it", async ({
    database: { db },
  }) => {
    const { store, drop } = createTestStore();
    onTestFinished(drop);
    const scene = await createScene(db);
    const keep = async (text: string) => {
      const bytes = Buffer.from(text);
      const sha256 = createHash("sha256").update(bytes).digest("hex");
      const { workspaceId } = scene;
      await db.insert(blobs).values({ workspaceId, sha256, sizeBytes: bytes.length }).onConflictDoNothing();
      await store.create(blobKey(workspaceId, sha256), onePiece(bytes), { sizeBytes: bytes.length, sha256 });
      return sha256;
    };
    // Intel HEX by hand: four bytes at 0x0100; checksum = two's complement of the sum of the other bytes of the line.
    const first = await keep(":0401000001020304F1\n:00000001FF\n");
    const second = await keep(":0401000001AABB0491\n:00000001FF\n");
    const damaged = await keep(":0401000001AABB0400\n:00000001FF\n");
    const lead = { ...scene.lead, store };
    const asHex = (number: number, imageSha256: string) =>
      createRevisionRow(db, {
        workspaceId: scene.workspaceId,
        programmeId: scene.programmeId,
        number,
        authorId: scene.author.userId,
        state: "superseded",
        stoodFrom: new Date("2030-01-01T08:00:00Z"),
        stoodUntil: new Date("2030-01-02T08:00:00Z"),
        imageSha256,
      });
    const earlierId = await asHex(11, first);
    const damagedId = await asHex(12, damaged);
    const nowId = await createCandidate(scene, 13, { imageSha256: second });
    await promoteRevision(lead, { ...(await seenBy(lead, nowId)), waivers: WAIVED });

    const desk = await getRollBackDesk(lead, scene.programmeId);
    const preview = await previewRollBack(lead, desk, earlierId);
    expect(preview).toMatchObject({
      sameBytes: false,
      difference: { ranges: 1, bytes: 2, first: [{ address: 0x0101, length: 2 }] },
    });
    const broken = await previewRollBack(lead, desk, damagedId);
    expect(broken.difference).toEqual({ failure: expect.stringMatching(/\.$/) });
    await rollBack(lead, backTo(scene, nowId, damagedId, 12));
    expect((await standing(scene)).standingId).toBe(damagedId);
  });

  test("is refused when another revision stands than the lead saw, or the number or reason is missing", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, candidateId, standingId } = scene;
    const { thirdId } = await threeStood(scene);
    await expect(rollBack(lead, backTo(scene, candidateId, standingId, 1))).rejects.toThrow(/R3 stands now/);
    const wrongNumber = backTo(scene, thirdId, standingId, 2);
    await expect(rollBack(lead, wrongNumber)).rejects.toBeInstanceOf(InvalidInputError);
    const blank = { ...backTo(scene, thirdId, standingId, 1), reason: " " };
    await expect(rollBack(lead, blank)).rejects.toThrow();
    const guess = { ...backTo(scene, thirdId, standingId, 1), passphrase: "guess" };
    await expect(rollBack(lead, guess)).rejects.toBeInstanceOf(ForbiddenError);
    expect((await standing(scene)).standingId).toBe(thirdId);
  });

  test("takes the role lead, and does not exist for another workspace", async ({ database: { db } }) => {
    const scene = await createScene(db);
    await promoteRevision(scene.lead, await seenBy(scene.lead, scene.candidateId));
    const back = backTo(scene, scene.candidateId, scene.standingId, 1);
    for (const ctx of [scene.author, scene.tester])
      await expect(rollBack(ctx, back)).rejects.toBeInstanceOf(ForbiddenError);
    const workspaceId = await createWorkspaceRow(db);
    const stranger = await createSigner(db, { workspaceId, roles: ["lead"] });
    await expect(rollBack(stranger, back)).rejects.toBeInstanceOf(NotFoundError);
    await expect(getRollBackDesk(stranger, scene.programmeId)).rejects.toBeInstanceOf(NotFoundError);
    // A target of another programme of the same workspace does not exist there either.
    const other = await createScene(db);
    const foreign = { ...back, toRevisionId: other.standingId };
    await expect(rollBack(scene.lead, foreign)).rejects.toBeInstanceOf(NotFoundError);
    await expect(rollBack(scene.lead, { ...back, standingRevisionId: other.standingId })).rejects.toThrow(
      ConflictError,
    );
  });
});
