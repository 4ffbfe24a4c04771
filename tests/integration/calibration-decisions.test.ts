import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, vi } from "vitest";
import type { Queryable } from "@/db/client";
import { changeSets, decisions, gatePlans, ledger, programmes, secondAgreements } from "@/db/tables";
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from "@/lib/errors";
import type { Gate } from "@/lib/gates/plan";
import { saveRelevanceMarks } from "@/lib/services/calibration-settings/save-marks";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import type { Ctx } from "@/lib/services/ctx";
import { agreeAsSecondLead } from "@/lib/services/decisions/agree";
import { getDecisionDesk } from "@/lib/services/decisions/load-desk";
import { getRecord } from "@/lib/services/decisions/load-record";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { gateStatus } from "@/lib/services/gates/status";
import {
  addSmallRevision,
  type CalibrationScene,
  createCalibrationScene,
  doJobs,
  setState,
} from "@/tests/support/calibration-scene";
import { test } from "@/tests/support/database";
import { createSigner, PASSPHRASE, seenBy } from "@/tests/support/decision-scene";
import type { SmallImage } from "@/tests/support/small-calibration";
import { createTestStore } from "@/tests/support/store";

vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => given === stored,
  hashPassphrase: async (text: string) => text,
}));

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

const GATES: Gate[] = [
  { id: "integrity", kind: "integrity", level: "must" },
  { id: "declaration", kind: "declaration", level: "must" },
  { id: "touched", kind: "touched", level: "must", allowed: null, uncovered: false },
];

interface DecisionScene extends CalibrationScene {
  otherLead: Ctx;
  before: string;
  after: string;
}

/** What stands, and a candidate in review that raises the limiter; the limiter's function is marked. */
async function candidate(
  db: Queryable,
  {
    image = { limit: 7000 },
    declares = true,
    use = "road",
  }: { image?: SmallImage; declares?: boolean; use?: "road" | "closed_course" } = {},
): Promise<DecisionScene> {
  const base = await createCalibrationScene(db, files.store);
  const { workspaceId, programmeId, calibrator } = base;
  const signing = { workspaceId, roles: ["lead" as const], store: files.store };
  const lead = await createSigner(db, signing);
  const otherLead = await createSigner(db, signing);
  await db.insert(gatePlans).values({
    workspaceId,
    programmeId,
    version: 1,
    plan: { plan: 1, gates: GATES },
    createdBy: lead.userId,
  });
  const marks = [{ set: "function" as const, name: "limiter", relevance: "safety" as const, note: "" }];
  await saveRelevanceMarks(lead, { programmeId, basedOnVersion: 0, marks });
  const before = await addSmallRevision(base, {});
  const stated = { intendedUse: use, touchesEmissionOrSafety: declares } as const;
  const after = await addSmallRevision(base, image, { parentId: before, ...stated });
  await setState(base, before, { state: "promoted", asFound: true, stoodFrom: new Date() });
  await db.update(programmes).set({ standingRevisionId: before }).where(eq(programmes.id, programmeId));
  await setState(base, after, {
    state: "in_review",
    submitterId: calibrator.userId,
    submittedAt: new Date(),
    gatePlanVersion: 1,
  });
  return { ...base, lead, otherLead, before, after };
}

const stateOf = async (scene: DecisionScene) =>
  Object.fromEntries(
    (await gateStatus(scene.lead, { revisionId: scene.after })).results.map(({ id, state }) => [id, state]),
  );
const agreeing = async (ctx: Ctx, revisionId: string) => ({
  revisionId,
  touchedSha256: (await getDecisionDesk(ctx, revisionId)).calibration.touchedSha256 ?? "0".repeat(64),
  reason: "checked against the limits of the engine",
  passphrase: PASSPHRASE,
});
const DOCUMENT = { document: "Report 17/2030", issuer: "Test house North" };

describe("gates on the calibration", () => {
  test("have too little until the change set is there, then say what it shows", async ({ tx }) => {
    const scene = await candidate(tx, { declares: true });
    expect(await stateOf(scene)).toEqual({
      integrity: "too_little",
      declaration: "too_little",
      touched: "too_little",
    });
    await doJobs(scene);
    expect(await stateOf(scene)).toEqual({ integrity: "met", declaration: "met", touched: "met" });
  });

  test("a marked function against a declaration that says no is told, and blocks", async ({ tx }) => {
    const scene = await candidate(tx, { declares: false, image: { limit: 7000, spare: 1 } });
    await doJobs(scene);
    expect(await stateOf(scene)).toEqual({ integrity: "met", declaration: "not_met", touched: "not_met" });
    const { contradiction } = await getRevisionChanges(scene.calibrator, scene.after);
    expect(contradiction).toMatch(/R2 is declared to touch nothing.*limiter \(1 changed\), safety-relevant/);
    await expect(promoteRevision(scene.lead, await seenBy(scene.lead, scene.after))).rejects.toThrow(
      /Not met and not waived/,
    );
  });
});

describe("a promotion", () => {
  test("of marked functions for the road names a document, which the record prints", async ({ tx }) => {
    const scene = await candidate(tx);
    await doJobs(scene);
    const desk = await getDecisionDesk(scene.lead, scene.after);
    expect(desk.calibration).toMatchObject({
      needsApproval: true,
      touched: [{ name: "limiter", relevance: "safety", characteristics: ["rpm_limit"] }],
    });
    const input = await seenBy(scene.lead, scene.after);
    await expect(promoteRevision(scene.lead, input)).rejects.toThrow(InvalidInputError);
    await expect(
      promoteRevision(scene.lead, { ...input, approval: { ...DOCUMENT, issuer: " " } }),
    ).rejects.toThrow();
    const { decisionId } = await promoteRevision(scene.lead, { ...input, approval: DOCUMENT });
    const record = await getRecord(scene.lead, decisionId);
    const [row] = await tx.select().from(changeSets).where(eq(changeSets.revisionBId, scene.after));
    expect(record.holds).toBe(true);
    expect(record.decision.evidence.calibration).toMatchObject({
      changeSetId: row.id,
      inputSha256: row.inputSha256,
      resultSha256: row.resultSha256,
      touched: [{ name: "limiter", relevance: "safety", characteristics: ["rpm_limit"] }],
      approval: DOCUMENT,
      secondLead: null,
    });
  });

  test("or rests on a second lead, who is neither author nor the one who promotes", async ({ tx }) => {
    const scene = await candidate(tx);
    const { lead, otherLead, after } = scene;
    await doJobs(scene);
    await agreeAsSecondLead(lead, await agreeing(lead, after));
    await expect(agreeAsSecondLead(lead, await agreeing(lead, after))).rejects.toThrow(
      /agreed to exactly this/,
    );
    await expect(promoteRevision(lead, await seenBy(lead, after))).rejects.toThrow(/second lead/);
    const { decisionId } = await promoteRevision(otherLead, await seenBy(otherLead, after));
    expect((await getRecord(lead, decisionId)).decision.evidence.calibration).toMatchObject({
      approval: null,
      secondLead: {
        id: lead.userId,
        name: lead.userName,
        reason: "checked against the limits of the engine",
      },
    });
    const entries = await tx.select().from(ledger).where(eq(ledger.workspaceId, scene.workspaceId));
    expect(entries.map(({ event }) => event)).toContain("decision.agreed");
  });

  test("takes one as well where bytes without a description may belong to what is marked", async ({ tx }) => {
    const scene = await candidate(tx, { image: { gain: 90, spare: 1 } });
    const { lead, otherLead, after } = scene;
    await doJobs(scene);
    const waivers = [{ gateId: "touched", reason: "for the sake of this very test" }];
    const bare = { ...(await seenBy(lead, after)), waivers };
    await expect(promoteRevision(lead, bare)).rejects.toThrow(/bytes without a description/);
    const agreed = async () => (await getDecisionDesk(lead, after)).calibration.agreements.length;
    await agreeAsSecondLead(otherLead, await agreeing(otherLead, after));
    expect(await agreed()).toBe(1);
    // Another mark: the bytes may belong to that one too, which nobody has agreed to.
    const { programmeId } = scene;
    const further = { set: "function" as const, name: "air", relevance: "emission" as const, note: "" };
    await saveRelevanceMarks(lead, { programmeId, basedOnVersion: 1, marks: [further] });
    expect(await agreed()).toBe(0);
    await agreeAsSecondLead(otherLead, await agreeing(otherLead, after));
    const { decisionId } = await promoteRevision(lead, { ...(await seenBy(lead, after)), waivers });
    expect((await getRecord(lead, decisionId)).decision.evidence.calibration).toMatchObject({
      touched: [],
      secondLead: { id: otherLead.userId },
    });
  });

  test("needs neither off the road, nor where nothing marked is touched", async ({ tx }) => {
    const closed = await candidate(tx, { use: "closed_course" });
    const plain = await candidate(tx, { image: { gain: 90 }, declares: false });
    await doJobs(closed);
    for (const { lead, after } of [closed, plain]) {
      const { decisionId } = await promoteRevision(lead, await seenBy(lead, after));
      expect((await getRecord(lead, decisionId)).decision.evidence.calibration).toMatchObject({
        approval: null,
        secondLead: null,
      });
    }
  });

  test("is refused while nobody can tell what changed, and when what was seen has moved", async ({ tx }) => {
    const scene = await candidate(tx);
    const { lead, after, programmeId } = scene;
    const waivers = GATES.map(({ id }) => ({ gateId: id, reason: "for the sake of this very test" }));
    const early = { ...(await seenBy(lead, after)), approval: DOCUMENT };
    await expect(promoteRevision(lead, { ...early, waivers })).rejects.toThrow(/not worked out yet/);
    await doJobs(scene);
    await expect(promoteRevision(lead, early)).rejects.toThrow(/has moved since you opened this page/);
    const input = { ...(await seenBy(lead, after)), approval: DOCUMENT };
    await saveRelevanceMarks(lead, { programmeId, basedOnVersion: 1, marks: [] });
    await expect(promoteRevision(lead, input)).rejects.toThrow(ConflictError);
    expect(await tx.select().from(decisions).where(eq(decisions.revisionId, after))).toEqual([]);
  });

  test("is refused when the stored image has lost its fingerprint", async ({ tx }) => {
    const scene = await candidate(tx, { use: "closed_course" });
    await doJobs(scene);
    const input = await seenBy(scene.lead, scene.after);
    const gone = { ...files.store, get: () => Promise.reject(new NotFoundError("object_not_found", "gone")) };
    await expect(promoteRevision({ ...scene.lead, store: gone }, input)).rejects.toMatchObject({
      code: "image_damaged",
    });
    await promoteRevision(scene.lead, input);
  });

  test("has the others set against what stands from then on", async ({ tx }) => {
    const scene = await candidate(tx, { use: "closed_course" });
    const { lead, after, before } = scene;
    const third = await addSmallRevision(scene, { gain: 80 }, { parentId: before });
    await doJobs(scene);
    await promoteRevision(lead, await seenBy(lead, after));
    expect(await getRevisionChanges(lead, third)).toMatchObject({
      state: "computing",
      against: { id: after },
    });
    await doJobs(scene);
    expect((await getRevisionChanges(lead, third)).changes?.characteristics).toHaveLength(2);
  });
});

describe("a second lead's agreement", () => {
  test("holds for exactly what was seen", async ({ tx }) => {
    const scene = await candidate(tx);
    const { lead, otherLead, after } = scene;
    await doJobs(scene);
    const stale = await agreeing(lead, after);
    await agreeAsSecondLead(lead, stale);
    // The same values, but marked by another name: the lead agreed to something else.
    await saveRelevanceMarks(lead, {
      programmeId: scene.programmeId,
      basedOnVersion: 1,
      marks: [{ set: "characteristic", name: "rpm_limit", relevance: "safety", note: "" }],
    });
    expect((await getDecisionDesk(otherLead, after)).calibration.agreements).toEqual([]);
    await expect(agreeAsSecondLead(otherLead, stale)).rejects.toThrow(/not what you saw/);
    await expect(promoteRevision(otherLead, await seenBy(otherLead, after))).rejects.toThrow(/second lead/);
  });

  test("is refused by role, for strangers, on wrong passphrase, and where nothing marked is touched", async ({
    tx,
  }) => {
    const scene = await candidate(tx);
    const { lead, after, workspaceId, tester, calibrator, reader, admin } = scene;
    await doJobs(scene);
    const input = await agreeing(lead, after);
    for (const ctx of [tester, calibrator, reader, admin])
      await expect(agreeAsSecondLead(ctx, input)).rejects.toThrow(ForbiddenError);
    await expect(agreeAsSecondLead(lead, { ...input, passphrase: "wrong" })).rejects.toThrow(ForbiddenError);
    const elsewhere = await createCalibrationScene(tx, files.store);
    const stranger = await createSigner(tx, {
      workspaceId: elsewhere.workspaceId,
      roles: ["lead"],
      store: files.store,
    });
    await expect(agreeAsSecondLead(stranger, input)).rejects.toThrow(NotFoundError);
    const archive = (archivedAt: Date | null) =>
      tx.update(programmes).set({ archivedAt }).where(eq(programmes.id, scene.programmeId));
    await archive(new Date());
    await expect(agreeAsSecondLead(lead, input)).rejects.toMatchObject({ code: "programme_archived" });
    await archive(null);
    await setState(scene, after, { submitterId: lead.userId });
    await expect(agreeAsSecondLead(lead, input)).rejects.toThrow(ForbiddenError);
    const plain = await candidate(tx, { image: { gain: 90 } });
    await doJobs(plain);
    const nothing = agreeAsSecondLead(plain.lead, await agreeing(plain.lead, plain.after));
    await expect(nothing).rejects.toMatchObject({ code: "nothing_to_agree" });
    const kept = await tx
      .select()
      .from(secondAgreements)
      .where(eq(secondAgreements.workspaceId, workspaceId));
    expect(kept).toEqual([]);
  });
});
