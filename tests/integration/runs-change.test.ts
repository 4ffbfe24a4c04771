import { buffer } from "node:stream/consumers";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import type { Transaction } from "@/db/client";
import { ledger, memberships, programmeShares, runs } from "@/db/tables";
import { judgeRun } from "@/lib/jobs/judge-run";
import { bringRunBack } from "@/lib/services/runs/bring-back";
import { editRunNote } from "@/lib/services/runs/edit-note";
import { getRun } from "@/lib/services/runs/get";
import { listRoadDayRuns } from "@/lib/services/runs/list";
import { openRunLog } from "@/lib/services/runs/open-log";
import { setAsideRunSchema } from "@/lib/services/runs/schema";
import { setRunAside } from "@/lib/services/runs/set-aside";
import { citeRun } from "@/tests/support/cite-run";
import { test } from "@/tests/support/database";
import { createMember } from "@/tests/support/factories";
import { attachLog, createRoadSide, pullLog } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

const REASON = "a gust from the left on the way out";
const newest = async (tx: Transaction, subjectId: string) => {
  const entries = await tx.select().from(ledger).where(eq(ledger.subjectId, subjectId)).orderBy(ledger.seq);
  return entries.at(-1);
};

async function withRun(tx: Transaction) {
  const side = await createRoadSide(tx, files.store);
  const { runId } = await attachLog(side.tester, side, pullLog());
  const judge = () => judgeRun({ db: tx, store: files.store }, { workspaceId: side.workspaceId, runId });
  return { side, runId, judge };
}

describe("setting a run aside", () => {
  test("keeps it listed with reason, name and time, and says that nobody could see its result", async ({
    tx,
  }) => {
    const { side, runId } = await withRun(tx);
    await setRunAside(side.tester, { runId, rowVersion: 1, reason: REASON });
    const { run, setAsideByName } = await getRun(side.lead, runId);
    expect(run).toMatchObject({ setAsideReason: REASON, resultWasVisible: false, rowVersion: 2 });
    expect(run.setAsideAt).toBeInstanceOf(Date);
    expect(setAsideByName).toBe(side.tester.userName);
    expect((await listRoadDayRuns(side.lead, side.roadDayId)).runs).toMatchObject([
      { setAside: true, why: [REASON], next: null },
    ]);
    expect(await newest(tx, runId)).toMatchObject({
      event: "run.excluded",
      data: { number: 1, reason: REASON, resultWasVisible: false },
    });
  });

  test("says that the result could be seen once the run was judged", async ({ tx }) => {
    const { side, runId, judge } = await withRun(tx);
    await judge();
    await setRunAside(side.lead, { runId, rowVersion: 1, reason: REASON });
    expect((await getRun(side.lead, runId)).run.resultWasVisible).toBe(true);
  });

  test("is for the tester who attached it and for leads, and needs a reason", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    const input = { runId, rowVersion: 1, reason: REASON };
    for (const member of [side.otherTester, side.calibrator])
      await expect(setRunAside(member, input)).rejects.toMatchObject({ status: 403 });
    expect((await getRun(side.otherTester, runId)).acts.setAside).toContain("only the person who made it");
    expect(setAsideRunSchema.safeParse({ ...input, reason: "  bad run " }).success).toBe(false);
    expect((await getRun(side.lead, runId)).run.setAsideAt).toBeNull();
  });

  test("is refused when somebody changed the run meanwhile, and twice", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    await editRunNote(side.tester, { runId, rowVersion: 1, note: "traffic far ahead" });
    const late = setRunAside(side.lead, { runId, rowVersion: 1, reason: REASON });
    await expect(late).rejects.toMatchObject({ status: 409, code: "run_moved", details: { rowVersion: 2 } });
    await setRunAside(side.lead, { runId, rowVersion: 2, reason: REASON });
    const twice = setRunAside(side.lead, { runId, rowVersion: 3, reason: REASON });
    await expect(twice).rejects.toMatchObject({ status: 409, code: "already_set_aside" });
  });
});

describe("bringing a run back", () => {
  test("is for a lead, and not for the one who set it aside while others are there", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    await setRunAside(side.lead, { runId, rowVersion: 1, reason: REASON });
    const input = { runId, rowVersion: 2, reason: "the gust was on another run" };
    await expect(bringRunBack(side.tester, input)).rejects.toMatchObject({ status: 403 });
    await expect(bringRunBack(side.lead, input)).rejects.toMatchObject({
      status: 403,
      message: expect.stringContaining("another lead"),
    });
    expect((await getRun(side.lead, runId)).acts.bringBack).toContain("another lead");
    const { workspaceId } = side;
    const secondLead = await createMember(tx, { workspaceId, roles: ["lead"], store: files.store });
    await bringRunBack(secondLead, input);
    const { run } = await getRun(side.lead, runId);
    expect(run).toMatchObject({
      setAsideAt: null,
      setAsideReason: null,
      resultWasVisible: null,
      rowVersion: 3,
    });
    expect(await newest(tx, runId)).toMatchObject({
      event: "run.included",
      actorId: secondLead.userId,
      data: { reason: input.reason, wasSetAsideFor: REASON, resultWasVisible: false },
    });
  });

  test("is possible alone, when nobody else could do it", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    await setRunAside(side.lead, { runId, rowVersion: 1, reason: REASON });
    for (const { userId } of [side.tester, side.otherTester])
      await tx.update(memberships).set({ disabledAt: new Date() }).where(eq(memberships.userId, userId));
    await bringRunBack(side.lead, { runId, rowVersion: 2, reason: "the gust was on another run" });
    expect((await getRun(side.lead, runId)).run.setAsideAt).toBeNull();
  });

  test("is refused when its place or its log has gone to another run", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    await setRunAside(side.tester, { runId, rowVersion: 1, reason: REASON });
    const input = { runId, rowVersion: 2, reason: "it counts after all" };
    const second = await attachLog(side.tester, side, pullLog(1));
    await expect(bringRunBack(side.lead, input)).rejects.toMatchObject({ code: "place_taken" });
    await setRunAside(side.tester, { runId: second.runId, rowVersion: 1, reason: REASON });
    const third = await attachLog(side.tester, side, pullLog(), { driveOrder: 2 });
    await expect(bringRunBack(side.lead, input)).rejects.toMatchObject({
      code: "already_attached",
      details: { number: third.number },
    });
    await expect(
      bringRunBack(side.lead, { ...input, runId: third.runId, rowVersion: 1 }),
    ).rejects.toMatchObject({ code: "not_set_aside" });
  });
});

describe("a run that a decision rests on", () => {
  test("can't be changed by anybody any more, and the page says why", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    const record = await citeRun(tx, side, runId);
    const cited = { status: 409, code: "run_cited", message: expect.stringContaining(`record ${record}`) };
    await expect(setRunAside(side.lead, { runId, rowVersion: 1, reason: REASON })).rejects.toMatchObject(
      cited,
    );
    await expect(bringRunBack(side.lead, { runId, rowVersion: 1, reason: REASON })).rejects.toMatchObject(
      cited,
    );
    await expect(editRunNote(side.tester, { runId, rowVersion: 1, note: "x" })).rejects.toMatchObject(cited);
    const { acts, records } = await getRun(side.tester, runId);
    expect(records).toMatchObject([{ recordNumber: record }]);
    for (const reason of [acts.setAside, acts.editNote]) expect(reason).toContain(`record ${record}`);
  });

  test("that only holds is put right as before: note, setting aside, bringing back", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    const record = await citeRun(tx, side, runId, { kind: "hold" });
    const { acts, cited, records } = await getRun(side.tester, runId);
    expect([acts.setAside, acts.editNote, cited]).toEqual([null, null, null]);
    expect(records).toMatchObject([{ recordNumber: record }]);
    await editRunNote(side.tester, { runId, rowVersion: 1, note: "a gust on the way out" });
    await setRunAside(side.tester, { runId, rowVersion: 2, reason: REASON });
    await bringRunBack(side.lead, { runId, rowVersion: 3, reason: "the gust was on another run" });
    expect((await getRun(side.lead, runId)).run.setAsideAt).toBeNull();
  });

  test("but was left out there can still come back", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    await setRunAside(side.tester, { runId, rowVersion: 1, reason: REASON });
    await citeRun(tx, side, runId, { leftOut: REASON });
    await bringRunBack(side.lead, { runId, rowVersion: 2, reason: "the gust was on another run" });
    expect((await getRun(side.lead, runId)).run.setAsideAt).toBeNull();
  });

  test("keeps log, number and tester even from the database's own hand", async ({ tx }) => {
    const { runId } = await withRun(tx);
    const change = tx.transaction((nested) =>
      nested
        .update(runs)
        .set({ logSha256: "1".repeat(64) })
        .where(eq(runs.id, runId)),
    );
    await expect(change).rejects.toMatchObject({ cause: { code: "42501" } });
  });
});

test("the note keeps its old wording in the ledger", async ({ tx }) => {
  const { side, runId } = await withRun(tx);
  await editRunNote(side.tester, { runId, rowVersion: 1, note: "a dry road" });
  await editRunNote(side.lead, { runId, rowVersion: 2, note: "a damp road" });
  expect(await newest(tx, runId)).toMatchObject({
    event: "run.updated",
    data: { old: { note: "a dry road" }, new: { note: "a damp road" } },
  });
  await expect(editRunNote(side.otherTester, { runId, rowVersion: 3, note: "x" })).rejects.toMatchObject({
    status: 403,
  });
});

describe("the log of a run", () => {
  test("comes back byte for byte, and the ledger says who took it", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    const { run, stored } = await openRunLog(side.calibrator, runId);
    expect(Buffer.compare(await buffer(stored.body), pullLog())).toBe(0);
    expect(run.logFileName).toBe("pull.csv");
    expect(await newest(tx, runId)).toMatchObject({
      event: "run.downloaded",
      actorId: side.calibrator.userId,
    });
  });

  test("is not for readers and admins", async ({ tx }) => {
    const { side, runId } = await withRun(tx);
    const { workspaceId } = side;
    for (const role of ["reader", "admin"] as const) {
      const member = await createMember(tx, { workspaceId, roles: [role], store: files.store });
      await expect(openRunLog(member, runId)).rejects.toMatchObject({ status: 403 });
    }
  });
});

test("a reader sees runs of what is released in a programme shared with them, and no road day", async ({
  tx,
}) => {
  const { side, runId: ofCandidate } = await withRun(tx);
  const { workspaceId, programmeId, lead } = side;
  const ofStanding = await attachLog(side.tester, side, pullLog(1), { revisionId: side.r1, driveOrder: 2 });
  const reader = await createMember(tx, { workspaceId, roles: ["reader"], store: files.store });
  await expect(getRun(reader, ofStanding.runId)).rejects.toMatchObject({ status: 403 });
  const share = { workspaceId, programmeId, userId: reader.userId, sharedBy: lead.userId };
  await tx.insert(programmeShares).values({ ...share, expiresOn: "2999-01-01" });
  expect((await getRun(reader, ofStanding.runId)).run.id).toBe(ofStanding.runId);
  await expect(getRun(reader, ofCandidate)).rejects.toMatchObject({ status: 403 });
  await expect(listRoadDayRuns(reader, side.roadDayId)).rejects.toMatchObject({ status: 403 });
});
