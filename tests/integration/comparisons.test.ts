import { and, eq, sql } from "drizzle-orm";
import Papa from "papaparse";
import { describe, expect } from "vitest";
import { comparisonResults, comparisons, ledger, programmeShares, runs, vehicleSheets } from "@/db/tables";
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from "@/lib/errors";
import { exportComparison } from "@/lib/services/comparisons/export-csv";
import { getComparison, getComparisonState } from "@/lib/services/comparisons/load";
import { changeSettings, openComparison, recomputeComparison } from "@/lib/services/comparisons/open";
import { refreshResultsOf } from "@/lib/services/comparisons/refresh";
import { withTransaction } from "@/lib/services/ctx";
import { gateStatus } from "@/lib/services/gates/status";
import { test } from "@/tests/support/database";
import { createRunRow, createScene, type Scene, storeResult } from "@/tests/support/decision-scene";
import {
  createMember,
  createProgrammeRow,
  createRevisionRow,
  createRoadDayRow,
  createWorkspaceRow,
  SHEET,
} from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

const runAt = (scene: Scene, number: number) =>
  and(eq(runs.workspaceId, scene.workspaceId), eq(runs.number, number));

async function jobs({ db }: Scene): Promise<number> {
  const { rows } = await db.execute<{ n: number }>(
    sql`select count(*)::int as n from pgboss.job where name = 'compute-comparison'`,
  );
  return rows[0]?.n ?? 0;
}

describe("opening a comparison", () => {
  test("gives the same question the same comparison, and other settings another one", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, tester, standingId, candidateId, comparisonId } = scene;
    const sides = { revisionAId: standingId, revisionBId: candidateId };
    expect(await openComparison(tester, sides)).toEqual({ comparisonId, created: false });
    const other = await changeSettings(lead, { comparisonId, factor: "iso1585_si", rpmStep: 100 });
    expect(other).toMatchObject({ created: true });
    expect(other.comparisonId).not.toBe(comparisonId);
    expect(await changeSettings(tester, { comparisonId, factor: "iso1585_si", rpmStep: 100 })).toEqual({
      comparisonId: other.comparisonId,
      created: false,
    });
    const view = await getComparison(lead, comparisonId);
    expect(view.settings).toEqual({ factor: "auto", rpm_step: 50, level: 0.95, seed: 1 });
    expect(view.others.map((entry) => entry.settings.factor)).toEqual(["iso1585_si"]);
    expect(await db.select().from(ledger).where(eq(ledger.event, "compare.saved"))).toHaveLength(2);
    // The gates rest on the standard settings whatever else was opened.
    expect((await gateStatus(lead, { revisionId: candidateId })).comparisonId).toBe(comparisonId);
  });

  test("by eight people at once makes one row", async ({ database: { db } }) => {
    const scene = await createScene(db);
    await db.delete(comparisonResults);
    await db.delete(comparisons);
    const sides = { revisionAId: scene.standingId, revisionBId: scene.candidateId };
    const opened = await Promise.all(Array.from({ length: 8 }, () => openComparison(scene.tester, sides)));
    expect(new Set(opened.map((answer) => answer.comparisonId)).size).toBe(1);
    expect(opened.filter((answer) => answer.created)).toHaveLength(1);
  });

  test("is refused across programmes, with itself, to readers and admins, and does not exist for strangers", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { workspaceId, standingId, candidateId, lead, comparisonId } = scene;
    const other = await createScene(db);
    const sides = { revisionAId: standingId, revisionBId: candidateId };
    await expect(openComparison(lead, { ...sides, revisionBId: standingId })).rejects.toThrow();
    await expect(openComparison(lead, { ...sides, revisionBId: other.candidateId })).rejects.toBeInstanceOf(
      NotFoundError,
    );
    await expect(openComparison(other.lead, sides)).rejects.toBeInstanceOf(NotFoundError);
    await expect(getComparison(other.lead, comparisonId)).rejects.toBeInstanceOf(NotFoundError);
    await expect(getComparisonState(other.lead, comparisonId)).rejects.toBeInstanceOf(NotFoundError);
    await expect(recomputeComparison(other.lead, { comparisonId })).rejects.toBeInstanceOf(NotFoundError);
    await expect(exportComparison(other.lead, comparisonId)).rejects.toBeInstanceOf(NotFoundError);
    await expect(gateStatus(other.lead, { revisionId: candidateId })).rejects.toBeInstanceOf(NotFoundError);
    for (const role of ["reader", "admin"] as const) {
      const ctx = await createMember(db, { workspaceId, roles: [role], store: noStore });
      await expect(openComparison(ctx, sides)).rejects.toBeInstanceOf(ForbiddenError);
      await expect(getComparison(ctx, comparisonId)).rejects.toBeInstanceOf(ForbiddenError);
    }
    const otherProgrammeId = await createProgrammeRow(db, { workspaceId, createdBy: lead.userId });
    const foreignId = await createRevisionRow(db, {
      workspaceId,
      programmeId: otherProgrammeId,
      number: 1,
      authorId: lead.userId,
    });
    await expect(openComparison(lead, { ...sides, revisionBId: foreignId })).rejects.toBeInstanceOf(
      InvalidInputError,
    );
  });
});

describe("a result", () => {
  test("belongs to exact inputs: it turns stale with what moved, and the gates with it", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, comparisonId, candidateId } = scene;
    const before = await getComparison(lead, comparisonId);
    expect(before).toMatchObject({ state: "ready", moved: [] });

    await createRunRow(scene, { revisionId: candidateId, number: 5 });
    await db.update(runs).set({ setAsideAt: sql`now()`, setAsideReason: "traffic" }).where(runAt(scene, 2));
    await db.update(runs).set({ gear: 4 }).where(runAt(scene, 3));
    await db.insert(vehicleSheets).values({
      workspaceId: scene.workspaceId,
      programmeId: scene.programmeId,
      version: 2,
      figures: { ...SHEET, redlineRpm: 6500 },
      createdBy: lead.userId,
    });
    const stale = await getComparison(lead, comparisonId);
    expect(stale).toMatchObject({ state: "stale", recomputing: false });
    expect(stale.moved).toEqual([
      "Run 5 counts now and did not then.",
      "Run 2 was set aside.",
      "Run 3 was changed: gear.",
      "The vehicle sheet went from version 1 to 2.",
    ]);
    expect(stale.inputSha256).not.toBe(before.inputSha256);
    expect(stale.result).toEqual(before.result);
    const gates = await gateStatus(lead, { revisionId: candidateId });
    expect(gates).toMatchObject({ stale: true, comparisonId });
    expect(gates.results.map((gate) => gate.state)).toEqual(["stale"]);

    await recomputeComparison(lead, { comparisonId });
    expect(await getComparisonState(lead, comparisonId)).toMatchObject({ state: "stale", recomputing: true });
    await storeResult(scene);
    expect(await getComparison(lead, comparisonId)).toMatchObject({ state: "ready", moved: [] });
    expect((await gateStatus(lead, { revisionId: candidateId })).stale).toBe(false);
  });

  test("comes back at once when the input becomes what it was", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const before = await getComparison(scene.lead, scene.comparisonId);
    await db.update(runs).set({ setAsideAt: sql`now()` }).where(runAt(scene, 2));
    expect((await getComparison(scene.lead, scene.comparisonId)).state).toBe("stale");
    await db.update(runs).set({ setAsideAt: null }).where(runAt(scene, 2));
    const after = await getComparison(scene.lead, scene.comparisonId);
    expect(after).toMatchObject({ state: "ready", inputSha256: before.inputSha256 });
  });

  test("leaves out road days with one side only while there is one with both, and takes all where there is none", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { workspaceId, programmeId, lead, tester, comparisonId, standingId, candidateId } = scene;
    const otherDay = await createRoadDayRow(db, { workspaceId, programmeId, createdBy: tester.userId });
    const alone = { roadDayId: otherDay, driveOrder: 1 };
    await createRunRow(scene, { revisionId: standingId, number: 5, ...alone });
    const view = await getComparison(lead, comparisonId);
    expect(view.state).toBe("ready");
    expect(view.runs.map((line) => [line.number, line.outcome])).toEqual([
      [1, "used"],
      [2, "used"],
      [3, "used"],
      [4, "used"],
      [5, "left out"],
    ]);
    // Driven on one count over both days: the second goes on after the four places of the first.
    expect(view.runs.map((line) => line.order)).toEqual([1, 2, 3, 4, 5]);
    expect(view.runs[4].why.join(" ")).toContain("Side B has no run on this road day");

    await createRunRow(scene, { revisionId: candidateId, number: 6, ...alone, driveOrder: 2 });
    expect((await getComparison(lead, comparisonId)).moved).toEqual([
      "Runs 5 and 6 count now and did not then.",
    ]);

    await db.update(runs).set({ setAsideAt: sql`now()` }).where(runAt(scene, 6));
    const onlyA = and(
      eq(runs.workspaceId, workspaceId),
      eq(runs.roadDayId, scene.roadDayId),
      eq(runs.revisionId, standingId),
    );
    await db.update(runs).set({ setAsideAt: sql`now()` }).where(onlyA);
    const apart = await getComparison(lead, comparisonId);
    // Side A on one day, side B on the other: no day is shared, so all that is left counts.
    expect(apart.runs.filter((line) => line.outcome !== "set aside").map((line) => line.number)).toEqual([
      2, 3, 5,
    ]);
    expect(apart.runs.some((line) => line.outcome === "left out")).toBe(false);
    expect(apart.moved).toEqual(["Run 5 counts now and did not then.", "Runs 1 and 4 were set aside."]);
  });

  test("lists every run: what counts, what was refused and what was set aside, with the reason", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    await db
      .update(runs)
      .set({ setAsideAt: sql`now()`, setAsideReason: "a lorry in the way", resultWasVisible: true })
      .where(runAt(scene, 2));
    await storeResult(scene);
    const { runs: lines, conditions } = await getComparison(scene.lead, scene.comparisonId);
    expect(lines.map((line) => [line.number, line.side, line.outcome])).toEqual([
      [1, "A", "used"],
      [2, "B", "set aside"],
      [3, "B", "used"],
      [4, "A", "used"],
    ]);
    expect(lines[1].why).toEqual(["a lorry in the way.", "Its result could be seen then."]);
    expect(conditions.A.runs).toBe(2);
    expect(conditions.B.runs).toBe(1);
    expect(conditions.A.massKg).toEqual({ min: 1486, mean: 1486, max: 1486 });
  });

  test("of a shared programme is seen by a reader once both sides are released", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { workspaceId, programmeId, comparisonId, lead } = scene;
    const reader = await createMember(db, { workspaceId, roles: ["reader"], store: noStore });
    await db.insert(programmeShares).values({
      workspaceId,
      programmeId,
      userId: reader.userId,
      expiresOn: "2999-01-01",
      sharedBy: lead.userId,
    });
    await expect(getComparison(reader, comparisonId)).rejects.toBeInstanceOf(ForbiddenError);
    await db.execute(sql`update revisions set state = 'superseded' where id = ${scene.candidateId}`);
    expect((await getComparison(reader, comparisonId)).state).toBe("ready");
    await db.execute(sql`update programme_shares set expires_on = '2020-01-01'`);
    await expect(getComparison(reader, comparisonId)).rejects.toBeInstanceOf(ForbiddenError);
  });
});

describe("refreshing", () => {
  test("queues every comparison that uses the revision, in the caller's transaction", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, candidateId, comparisonId } = scene;
    await changeSettings(lead, { comparisonId, factor: "none", rpmStep: 50 });
    const before = await jobs(scene);
    const undone = withTransaction(lead, async (tx, inner) => {
      await refreshResultsOf(tx, inner, { revisionId: candidateId });
      throw new Error("undone");
    });
    await expect(undone).rejects.toThrow("undone");
    expect(await jobs(scene)).toBe(before);
    await withTransaction(lead, (tx, inner) => refreshResultsOf(tx, inner, { revisionId: candidateId }));
    expect(await jobs(scene)).toBe(before + 2);
    const workspaceId = await createWorkspaceRow(db);
    await withTransaction(lead, (tx) => refreshResultsOf(tx, { workspaceId }, { revisionId: candidateId }));
    expect(await jobs(scene)).toBe(before + 2);
  });
});

describe("the grid as a file", () => {
  test("has units in its header, points as decimal marks, and is noted in the ledger", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { fileName, csv } = await exportComparison(scene.lead, scene.comparisonId);
    expect(fileName).toMatch(/^R1-R2-[0-9a-f]{8}\.csv$/);
    const [header, ...rows] = csv.trimEnd().split("\r\n");
    expect(Papa.parse<string[]>(header).data[0].every((title) => /\[.+\]$/.test(title))).toBe(true);
    expect(rows).toHaveLength(5);
    expect(rows[0].split(",")[0]).toBe("2000");
    expect(await db.select().from(ledger).where(eq(ledger.event, "compare.exported"))).toHaveLength(1);
  });

  test("is refused while the result is stale", async ({ database: { db } }) => {
    const scene = await createScene(db);
    await createRunRow(scene, { revisionId: scene.candidateId, number: 5 });
    await expect(exportComparison(scene.lead, scene.comparisonId)).rejects.toBeInstanceOf(ConflictError);
  });
});
