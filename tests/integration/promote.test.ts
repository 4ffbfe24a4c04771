import { and, eq, sql } from "drizzle-orm";
import { Client } from "pg";
import { describe, expect, vi } from "vitest";
import {
  decisions,
  ledger,
  mailQueue,
  memberships,
  programmes,
  revisions,
  roadDays,
  runs,
  waivers,
} from "@/db/tables";
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from "@/lib/errors";
import type { Gate } from "@/lib/gates/plan";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { holdRevision, turnDownRevision } from "@/lib/services/decisions/send-back";
import { gateStatus } from "@/lib/services/gates/status";
import { test } from "@/tests/support/database";
import {
  createCandidate,
  createRunRow,
  createScene,
  createSigner,
  NEVER_MET,
  PASSPHRASE,
  type Scene,
  seenBy,
  seenForSendBack,
  storeResult,
} from "@/tests/support/decision-scene";
import { createWorkspaceRow } from "@/tests/support/factories";

// Hashing takes half a second a signature on purpose; here what is stored is the passphrase itself.
vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => given === stored,
}));

const REASON = "known from the last road day, taken again next week";

async function stateOf({ db, programmeId }: Scene) {
  const rows = await db
    .select({
      number: revisions.number,
      state: revisions.state,
      stoodFrom: revisions.stoodFrom,
      stoodUntil: revisions.stoodUntil,
    })
    .from(revisions)
    .where(eq(revisions.programmeId, programmeId))
    .orderBy(revisions.number);
  const [programme] = await db
    .select({ standingRevisionId: programmes.standingRevisionId })
    .from(programmes)
    .where(eq(programmes.id, programmeId));
  return { rows, standingId: programme.standingRevisionId };
}

const decisionRows = ({ db }: Scene) => db.select().from(decisions);

describe("a promotion", () => {
  test("makes the candidate stand, supersedes the other, and leaves one record, one entry and its mails", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, candidateId, standingId } = scene;
    const recorded = await promoteRevision(lead, await seenBy(lead, candidateId));

    const { rows, standingId: now } = await stateOf(scene);
    expect(now).toBe(candidateId);
    expect(rows.map((row) => row.state)).toEqual(["superseded", "promoted"]);
    expect(rows[0].stoodUntil).toEqual(recorded.decidedAt);
    expect(rows[1].stoodFrom).toEqual(recorded.decidedAt);

    const [decision] = await decisionRows(scene);
    expect(decision).toMatchObject({
      kind: "promote",
      recordNumber: 1,
      fromRevisionId: standingId,
      deciderId: lead.userId,
      selfReleased: false,
      reauthMethod: "passphrase",
    });
    expect(decision.evidence.runs.map((run) => [run.number, run.side, run.usable])).toEqual([
      [1, "A", true],
      [2, "B", true],
      [3, "B", true],
      [4, "A", true],
    ]);
    const entries = await db.select().from(ledger).where(eq(ledger.event, "decision.promoted"));
    expect(entries).toHaveLength(1);
    expect(entries[0]).toMatchObject({ subjectId: decision.id, actorId: lead.userId });
    expect(entries[0].data).toMatchObject({ recordSha256: decision.recordSha256 });
    // Author, submitter and both leads.
    const mails = await db.select().from(mailQueue);
    expect(mails).toHaveLength(4);
    expect(new Set(mails.map((mail) => mail.toAddress)).size).toBe(4);
    expect(mails[0].body).toContain(`http://localhost:3000/records/${decision.id}`);
  });

  test("is refused to the author and to the submitter while another lead is there", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const seen = await seenBy(scene.lead, scene.candidateId);
    for (const ctx of [scene.author, scene.tester]) {
      await db
        .update(memberships)
        .set({ roles: ["lead", "calibrator", "tester"] })
        .where(eq(memberships.userId, ctx.userId));
      const asLead = { ...ctx, roles: ["lead", "calibrator", "tester"] as const };
      await expect(promoteRevision(asLead, seen)).rejects.toThrow(/another lead decides/);
      await expect(
        turnDownRevision(asLead, await seenForSendBack(asLead, scene.candidateId)),
      ).rejects.toThrow(ForbiddenError);
    }
    expect(await decisionRows(scene)).toEqual([]);
  });

  test("of one's own is marked as self-released where no other lead is active", async ({
    database: { db },
  }) => {
    const scene = await createScene(db, { leads: 1 });
    const roles = ["lead", "calibrator"] as const;
    await db
      .update(memberships)
      .set({ roles: [...roles] })
      .where(eq(memberships.userId, scene.author.userId));
    await db
      .update(memberships)
      .set({ disabledAt: sql`now()` })
      .where(eq(memberships.userId, scene.lead.userId));
    const alone = { ...scene.author, roles };
    await promoteRevision(alone, await seenBy(alone, scene.candidateId));
    const [decision] = await decisionRows(scene);
    expect(decision).toMatchObject({ selfReleased: true, deciderId: alone.userId, authorId: alone.userId });
    const mails = await db.select().from(mailQueue);
    expect(mails[0].body).toContain("Self-released");
  });

  test("is refused when the role was taken away after the page was opened", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const seen = await seenBy(scene.lead, scene.candidateId);
    await db
      .update(memberships)
      .set({ roles: ["reader"] })
      .where(eq(memberships.userId, scene.lead.userId));
    await expect(promoteRevision(scene.lead, seen)).rejects.toThrow(ForbiddenError);
    await db
      .update(memberships)
      .set({ roles: ["lead"], disabledAt: sql`now()` })
      .where(eq(memberships.userId, scene.lead.userId));
    await expect(promoteRevision(scene.lead, seen)).rejects.toThrow(/no active member/);
  });

  test("needs the passphrase, the right number, and a state in review", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const { lead, candidateId, standingId } = scene;
    const seen = await seenBy(lead, candidateId);
    await expect(promoteRevision(lead, { ...seen, passphrase: "guess" })).rejects.toThrow(/passphrase/);
    await expect(promoteRevision(lead, { ...seen, typedNumber: "R3" })).rejects.toThrow(/R2/);
    await expect(promoteRevision(lead, { ...seen, reason: "  " })).rejects.toThrow();
    await expect(promoteRevision(lead, { ...seen, revisionId: standingId })).rejects.toThrow(
      /no longer in review/,
    );
    for (const state of ["draft", "validating", "turned_down", "withdrawn", "superseded"] as const) {
      await db.update(revisions).set({ state }).where(eq(revisions.id, candidateId));
      await expect(promoteRevision(lead, seen)).rejects.toThrow(ConflictError);
    }
    expect(await decisionRows(scene)).toEqual([]);
  });

  test("does not exist for another workspace's lead", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const seen = await seenBy(scene.lead, scene.candidateId);
    const elsewhere = await createWorkspaceRow(db);
    const stranger = await createSigner(db, { workspaceId: elsewhere, roles: ["lead"] });
    await expect(promoteRevision(stranger, seen)).rejects.toThrow(NotFoundError);
    const back = await seenForSendBack(scene.lead, scene.candidateId);
    await expect(holdRevision(stranger, back)).rejects.toThrow(NotFoundError);
  });
});

describe("what the lead saw", () => {
  test("must still hold: a run attached meanwhile is named and nothing is decided", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const seen = await seenBy(scene.lead, scene.candidateId);
    await createRunRow(scene, { revisionId: scene.candidateId, number: 5 });
    const refused = promoteRevision(scene.lead, seen);
    await expect(refused).rejects.toBeInstanceOf(ConflictError);
    await expect(refused).rejects.toThrow(/Run 5 counts now/);
    // Recomputed by the worker meanwhile, it still is not what the lead saw.
    await storeResult(scene);
    await expect(promoteRevision(scene.lead, seen)).rejects.toThrow(/evidence has changed/);
    await promoteRevision(scene.lead, await seenBy(scene.lead, scene.candidateId));
  });

  test("must still hold: a run set aside, a changed fact and a new vehicle sheet are named", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const seen = await seenBy(scene.lead, scene.candidateId);
    const at = (number: number) => and(eq(runs.workspaceId, scene.workspaceId), eq(runs.number, number));
    await db.update(runs).set({ setAsideAt: sql`now()`, setAsideReason: "traffic" }).where(at(2));
    await db.update(runs).set({ tempC: 21 }).where(at(3));
    await expect(promoteRevision(scene.lead, seen)).rejects.toMatchObject({
      details: { moved: ["Run 2 was set aside.", "Run 3 was changed: temperature."] },
    });
  });

  test("must still hold: another revision stands now", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const seen = await seenBy(scene.lead, scene.candidateId);
    const thirdId = await createCandidate(scene, 3);
    const third = await seenBy(scene.lead, thirdId);
    // No comparison with R3 was opened: its gate is too little, so it takes a waiver.
    const open = [{ gateId: "evidence.days", reason: REASON }];
    await promoteRevision(scene.lead, { ...third, waivers: open });
    await expect(promoteRevision(scene.otherLead, seen)).rejects.toThrow(/R3 stands now/);
  });
});

describe("a must gate that is not met", () => {
  test("blocks until it is waived with a reason, which stays on the record", async ({ database: { db } }) => {
    const scene = await createScene(db, { gates: [NEVER_MET] });
    const { lead, candidateId } = scene;
    const seen = await seenBy(lead, candidateId);
    await expect(promoteRevision(lead, seen)).rejects.toBeInstanceOf(InvalidInputError);
    const short = [{ gateId: NEVER_MET.id, reason: "because I say so" }];
    await expect(promoteRevision(lead, { ...seen, waivers: short })).rejects.toThrow(/20/);
    const other = [{ gateId: "no.such.gate", reason: REASON }];
    await expect(promoteRevision(lead, { ...seen, waivers: other })).rejects.toThrow(/nothing to waive/);

    await promoteRevision(lead, { ...seen, waivers: [{ gateId: NEVER_MET.id, reason: REASON }] });
    const [decision] = await decisionRows(scene);
    expect(decision.evidence.gates.map((gate) => gate.state)).toEqual(["waived"]);
    expect(await db.select().from(waivers)).toMatchObject([
      {
        decisionId: decision.id,
        gateId: NEVER_MET.id,
        gateState: "too_little",
        reason: REASON,
        waivedBy: lead.userId,
      },
    ]);
    expect(await db.select().from(ledger).where(eq(ledger.event, "gate.waived"))).toHaveLength(1);
  });
});

test("gates see tyre pressures and fuel of the road days driven on", async ({ database: { db } }) => {
  const tyres: Gate = {
    ...{ id: "t", kind: "conditions", level: "must", ask: "alike_tyre_pressure" },
    withinKpa: 10,
  };
  const fuel: Gate = { id: "f", kind: "conditions", level: "must", ask: "alike_fuel" };
  const scene = await createScene(db, { gates: [tyres, fuel] });
  const { lead, candidateId: revisionId, roadDayId } = scene;
  const note = (set: Partial<typeof roadDays.$inferInsert>) =>
    db.update(roadDays).set(set).where(eq(roadDays.id, roadDayId));
  const states = async () => (await gateStatus(lead, { revisionId })).results.map((gate) => gate.state);
  await note({ tyrePressureFrontKpa: null, tyrePressureRearKpa: 230, fuelNote: "" });
  expect(await states()).toEqual(["too_little", "too_little"]);
  await note({ tyrePressureFrontKpa: 240, fuelNote: "98 octane" });
  expect(await states()).toEqual(["met", "met"]);
});

describe("holding and turning down", () => {
  test("hold sends back to validating, turn down ends it; nothing else stands then", async ({
    database: { db },
  }) => {
    const scene = await createScene(db, { gates: [NEVER_MET] });
    const { lead, candidateId, standingId } = scene;
    await holdRevision(lead, await seenForSendBack(lead, candidateId));
    const [held] = await db.select().from(revisions).where(eq(revisions.id, candidateId));
    expect(held).toMatchObject({ state: "validating", submitterId: null, gatePlanVersion: null });

    await db
      .update(revisions)
      .set({ state: "in_review", submitterId: scene.tester.userId, gatePlanVersion: 1 })
      .where(eq(revisions.id, candidateId));
    await turnDownRevision(lead, await seenForSendBack(lead, candidateId));
    const { rows, standingId: now } = await stateOf(scene);
    expect(rows.map((row) => row.state)).toEqual(["promoted", "turned_down"]);
    expect(now).toBe(standingId);
    expect((await decisionRows(scene)).map((row) => row.kind)).toEqual(["hold", "turn_down"]);
    // Who asked is kept on the record even though the revision forgets it.
    expect((await decisionRows(scene))[0].submitterId).toBe(scene.tester.userId);
    expect((await decisionRows(scene))[0].evidence).not.toHaveProperty("stale");
  });

  test("is refused when a run came, or a result, since the lead looked", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const { lead, candidateId } = scene;
    const fresh = await seenForSendBack(lead, candidateId);
    await createRunRow(scene, { revisionId: candidateId, number: 5 });
    for (const send of [holdRevision, turnDownRevision])
      await expect(send(lead, fresh)).rejects.toMatchObject({
        code: "evidence_moved",
        message: expect.stringContaining("Run 5 counts now and did not then."),
      });
    const stale = await seenForSendBack(lead, candidateId);
    await expect(holdRevision(lead, { ...stale, comparisonId: null })).rejects.toThrow(
      /another one than you/,
    );
    await storeResult(scene);
    await expect(holdRevision(lead, stale)).rejects.toThrow(/another result than you saw/);
    expect(await decisionRows(scene)).toEqual([]);
  });

  test("of a stale comparison keeps the runs that its result was computed from, marked as stale", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, candidateId } = scene;
    const [gone] = await db.select().from(runs).where(eq(runs.number, 3));
    await db
      .update(runs)
      .set({
        ...{ setAsideAt: new Date(), setAsideBy: lead.userId, setAsideReason: "a gust from the left" },
        resultWasVisible: true,
      })
      .where(eq(runs.id, gone.id));
    await createRunRow(scene, { revisionId: candidateId, number: 5 });
    await holdRevision(lead, await seenForSendBack(lead, candidateId));
    const [{ evidence }] = await decisionRows(scene);
    expect(evidence.stale).toBe(true);
    expect(evidence.runs.map((run) => [run.number, run.side, run.leftOut])).toEqual([
      [1, "A", null],
      [2, "B", null],
      [3, "B", null],
      [4, "A", null],
    ]);
    expect(evidence.runs[2].testerName).toBe(scene.tester.userName);
  });
});

describe("a decision is whole or not there", () => {
  test("when its mail can't be queued, nothing has happened", async ({ database: { db, ownerUrl } }) => {
    const scene = await createScene(db);
    const seen = await seenBy(scene.lead, scene.candidateId);
    const owner = new Client({ connectionString: ownerUrl });
    await owner.connect();
    await owner.query("alter table mail_queue add constraint no_mail check (false) not valid");
    const before = await db.select().from(ledger);
    await expect(promoteRevision(scene.lead, seen)).rejects.toThrow();
    expect(await decisionRows(scene)).toEqual([]);
    expect(await db.select().from(ledger)).toHaveLength(before.length);
    expect((await stateOf(scene)).rows.map((row) => row.state)).toEqual(["promoted", "in_review"]);
    await owner.query("alter table mail_queue drop constraint no_mail");
    await owner.end();
    // The same request goes through once the fault is over, under the first record number.
    expect((await promoteRevision(scene.lead, seen)).recordNumber).toBe(1);
  });

  test("a signature row that names somebody without the right is refused by the database itself", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    await promoteRevision(scene.lead, await seenBy(scene.lead, scene.candidateId));
    const [decision] = await decisionRows(scene);
    const forged = {
      ...decision,
      id: crypto.randomUUID(),
      recordNumber: 99,
      kind: "turn_down" as const,
      deciderId: scene.author.userId,
    };
    await expect(db.insert(decisions).values(forged)).rejects.toMatchObject({
      cause: { constraint: "decisions_not_own" },
    });
    await expect(
      db.insert(decisions).values({ ...forged, kind: "promote", deciderId: scene.lead.userId }),
    ).rejects.toMatchObject({ cause: { constraint: "decisions_promoted_once" } });
    await expect(
      db.update(revisions).set({ state: "promoted" }).where(eq(revisions.id, scene.standingId)),
    ).rejects.toMatchObject({ cause: { constraint: "revisions_one_stands" } });
  });
});

test("wrong passphrases lock signing, also when each decision fails", async ({ database: { db } }) => {
  const scene = await createScene(db);
  const seen = await seenBy(scene.lead, scene.candidateId);
  for (let attempt = 0; attempt < 5; attempt++)
    await expect(promoteRevision(scene.lead, { ...seen, passphrase: "guess" })).rejects.toThrow(
      ForbiddenError,
    );
  await expect(promoteRevision(scene.lead, { ...seen, passphrase: PASSPHRASE })).rejects.toThrow(/locked/);
});
