import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { ledger, programmes, runs } from "@/db/tables";
import { confirmChecklist } from "@/lib/services/road-days/confirm-checklist";
import { createRoadDay } from "@/lib/services/road-days/create";
import { editRoadDay } from "@/lib/services/road-days/edit";
import { getRoadDay, prepareRoadDay } from "@/lib/services/road-days/get";
import { CHECKLIST, newRoadDaySchema, openLines } from "@/lib/services/road-days/schema";
import { attachRun } from "@/lib/services/runs/attach";
import { bringRunBack } from "@/lib/services/runs/bring-back";
import { editRunNote } from "@/lib/services/runs/edit-note";
import { getRun } from "@/lib/services/runs/get";
import { listRoadDayRuns } from "@/lib/services/runs/list";
import { openRunLog } from "@/lib/services/runs/open-log";
import { attachRunSchema } from "@/lib/services/runs/schema";
import { setRunAside } from "@/lib/services/runs/set-aside";
import { citeRun } from "@/tests/support/cite-run";
import { test } from "@/tests/support/database";
import { createMember } from "@/tests/support/factories";
import { hasPendingJob } from "@/tests/support/pending-job";
import { attachLog, createRoadSide, DAY, pullLog } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";
import { uploadBytes } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

const eventsOf = async (tx: Parameters<typeof createRoadSide>[0], subjectId: string) =>
  await tx.select().from(ledger).where(eq(ledger.subjectId, subjectId)).orderBy(ledger.seq);

describe("a road day", () => {
  test("is opened by testers and leads only, and not for an archived programme", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId, programmeId } = side;
    for (const role of ["reader", "calibrator", "admin"] as const) {
      const member = await createMember(tx, { workspaceId, roles: [role], store: files.store });
      await expect(createRoadDay(member, { ...DAY, programmeId })).rejects.toMatchObject({ status: 403 });
      await expect(prepareRoadDay(member, programmeId)).rejects.toMatchObject({ status: 403 });
    }
    const made = await createRoadDay(side.lead, { ...DAY, programmeId, day: "2030-01-03" });
    expect(openLines(made.checklist)).toHaveLength(CHECKLIST.length);
    expect(await eventsOf(tx, made.id)).toMatchObject([
      { event: "road_day.created", actorId: side.lead.userId },
    ]);
    expect((await prepareRoadDay(side.tester, programmeId)).last).toMatchObject({
      id: made.id,
      driver: DAY.driver,
    });
    await tx.update(programmes).set({ archivedAt: new Date() }).where(eq(programmes.id, programmeId));
    await expect(createRoadDay(side.tester, { ...DAY, programmeId })).rejects.toMatchObject({
      code: "programme_archived",
    });
  });

  test("keeps who confirmed which line and when, and lets a line be taken back", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { roadDayId } = side;
    const all = CHECKLIST.map((line) => line.item);
    const { roadDay: before } = await getRoadDay(side.lead, roadDayId);
    expect(before.checklist.every((line) => line.byName === side.tester.userName && line.at)).toBe(true);
    const without = all.filter((item) => item !== "nobody_beside");
    await confirmChecklist(side.lead, { roadDayId, confirmed: without });
    const { roadDay } = await getRoadDay(side.lead, roadDayId);
    expect(openLines(roadDay.checklist)).toEqual([expect.stringContaining("beside the road")]);
    await confirmChecklist(side.lead, { roadDayId, confirmed: all });
    const { checklist } = (await getRoadDay(side.lead, roadDayId)).roadDay;
    expect(new Map(checklist.map((line) => [line.item, line.byName]))).toEqual(
      new Map(
        all.map((item) => [item, item === "nobody_beside" ? side.lead.userName : side.tester.userName]),
      ),
    );
    expect((await eventsOf(tx, roadDayId)).map((entry) => entry.event)).toEqual([
      "road_day.created",
      ...Array(3).fill("road_day.updated"),
    ]);
  });

  test("takes weather corrections to the runs that took the old weather over, and has them judged again", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId, roadDayId } = side;
    const { runId: taken } = await attachLog(side.tester, side, pullLog(1));
    const { runId: own } = await attachLog(side.tester, side, pullLog(2), { driveOrder: 2, tempC: 25 });
    await tx.execute("delete from pgboss.job");
    const { roadDay } = await getRoadDay(side.tester, roadDayId);
    const { rowVersion } = roadDay;
    await editRoadDay(side.tester, { ...DAY, roadDayId, rowVersion, pressureHpa: 1013.2, tempC: 18.4 });
    const weather = async (runId: string) => {
      const [run] = await tx.select().from(runs).where(eq(runs.id, runId));
      return [run?.tempC, run?.pressureHpa, run?.humidityPct];
    };
    expect(await weather(taken)).toEqual([18.4, 1013.2, 52]);
    expect(await weather(own)).toEqual([25, 1004, 52]);
    for (const runId of [taken, own])
      expect(await hasPendingJob(tx, { name: "judge-run", data: { workspaceId, runId } })).toBe(true);
    expect((await eventsOf(tx, roadDayId)).at(-1)).toMatchObject({
      event: "road_day.updated",
      data: { old: { tempC: 19, pressureHpa: 1004 }, new: { tempC: 18.4, pressureHpa: 1013.2 } },
    });
  });

  test("keeps its figures once a decision other than a hold rests on one of its runs; notes may still be added", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const { roadDayId } = side;
    const { runId } = await attachLog(side.tester, side, pullLog());
    // A hold asks for more runs and ends nothing.
    await citeRun(tx, side, runId, { kind: "hold" });
    const { rowVersion: opened } = (await getRoadDay(side.tester, roadDayId)).roadDay;
    const wrong = { ...DAY, roadDayId, rowVersion: opened, tempC: 21 };
    const { rowVersion } = await editRoadDay(side.tester, wrong);
    await citeRun(tx, side, runId);
    const edit = { ...DAY, tempC: 21, roadDayId, rowVersion };
    for (const change of [{ massKg: 1520 }, { tempC: 5 }])
      await expect(editRoadDay(side.lead, { ...edit, ...change })).rejects.toMatchObject({
        status: 409,
        code: "run_cited",
      });
    const changed = await editRoadDay(side.lead, { ...edit, windNote: "calm" });
    expect(changed).toMatchObject({ windNote: "calm", rowVersion: rowVersion + 1 });
  });

  test("is not overwritten by somebody who saw it before a change", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { roadDayId } = side;
    const { rowVersion } = (await getRoadDay(side.tester, roadDayId)).roadDay;
    await editRoadDay(side.lead, { ...DAY, roadDayId, rowVersion, windNote: "calm" });
    const late = editRoadDay(side.tester, { ...DAY, roadDayId, rowVersion, windNote: "strong" });
    await expect(late).rejects.toMatchObject({
      status: 409,
      code: "road_day_moved",
      details: { now: { windNote: "calm" } },
    });
  });
});

describe("the form of a road day", () => {
  const form = { ...DAY, programmeId: crypto.randomUUID() };

  test("reads numbers with comma or point and empty boxes as not known", () => {
    const typed = { ...form, tempC: "17,5", pressureHpa: "1 003.4", humidityPct: "58", massKg: "" };
    expect(newRoadDaySchema.parse(typed)).toMatchObject({ tempC: 17.5, pressureHpa: 1003.4, massKg: null });
  });

  test.for([
    ["the driver at the recorder", { recorder: "a DRIVER" }, "recorder"],
    ["a pressure in kPa", { pressureHpa: "100.3" }, "pressureHpa"],
    ["a zone that is none", { zone: "Home" }, "zone"],
    ["no strip", { stripName: "  " }, "stripName"],
    ["no temperature", { tempC: "" }, "tempC"],
  ] as const)("refuses %s", ([, change, field]) => {
    const parsed = newRoadDaySchema.safeParse({ ...form, ...change });
    expect(parsed.error?.issues.map((issue) => issue.path.join("."))).toContain(field);
  });
});

test("another workspace's road days, runs and revisions do not exist", async ({ tx }) => {
  const side = await createRoadSide(tx, files.store);
  const stranger = await createRoadSide(tx, files.store);
  const { runId } = await attachLog(side.tester, side, pullLog());
  const { roadDayId, programmeId } = side;
  const everyRole = await createMember(tx, {
    workspaceId: stranger.workspaceId,
    roles: ["tester", "calibrator", "lead", "admin"],
    store: files.store,
  });
  const change = { runId, rowVersion: 1, reason: "not mine to change" };
  const uploadId = await uploadBytes(everyRole, "log", "a.csv", pullLog(7));
  const attach = (place: { roadDayId: string; revisionId: string }) =>
    attachRun(
      everyRole,
      attachRunSchema.parse({ uploadId, ...place, kind: "pull", leg: "out", driveOrder: 1, gear: 3 }),
      { idempotencyKey: crypto.randomUUID() },
    );
  const confirmed = CHECKLIST.map((line) => line.item);
  const tries: Record<string, () => Promise<unknown>> = {
    getRoadDay: () => getRoadDay(everyRole, roadDayId),
    listRoadDayRuns: () => listRoadDayRuns(everyRole, roadDayId),
    createRoadDay: () => createRoadDay(everyRole, { ...DAY, programmeId }),
    prepareRoadDay: () => prepareRoadDay(everyRole, programmeId),
    editRoadDay: () => editRoadDay(everyRole, { ...DAY, roadDayId, rowVersion: 1 }),
    confirmChecklist: () => confirmChecklist(everyRole, { roadDayId, confirmed }),
    "attachRun to its road day": () => attach({ roadDayId, revisionId: side.r2 }),
    "attachRun of its revision": () => attach({ roadDayId: stranger.roadDayId, revisionId: side.r2 }),
    getRun: () => getRun(everyRole, runId),
    openRunLog: () => openRunLog(everyRole, runId),
    setRunAside: () => setRunAside(everyRole, change),
    bringRunBack: () => bringRunBack(everyRole, change),
    editRunNote: () => editRunNote(everyRole, { runId, rowVersion: 1, note: "x" }),
  };
  for (const [name, attempt] of Object.entries(tries))
    await expect(attempt(), name).rejects.toMatchObject({ status: 404 });
  expect(await tx.select().from(runs).where(eq(runs.workspaceId, stranger.workspaceId))).toEqual([]);
});
