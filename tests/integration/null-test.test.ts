import { and, eq, isNotNull } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { EFFECTS } from "@/db/seed/demo-effects";
import { driveRoadDay } from "@/db/seed/demo-logs";
import { comparisons, programmes, runs } from "@/db/tables";
import { computeComparison } from "@/lib/jobs/compute-comparison";
import { judgeRun } from "@/lib/jobs/judge-run";
import { getComparison } from "@/lib/services/comparisons/load";
import { changeSettings, openComparison } from "@/lib/services/comparisons/open";
import { withTransaction } from "@/lib/services/ctx";
import { gateStatus } from "@/lib/services/gates/status";
import { getRepeatability } from "@/lib/services/plans/get";
import { missingForDecision } from "@/lib/services/revisions/ask-for-decision";
import { confirmChecklist } from "@/lib/services/road-days/confirm-checklist";
import { createRoadDay } from "@/lib/services/road-days/create";
import { getRoadDay } from "@/lib/services/road-days/get";
import { CHECKLIST } from "@/lib/services/road-days/schema";
import { listRoadDayRuns } from "@/lib/services/runs/list";
import { test } from "@/tests/support/database";
import { createMember, createRevisionRow } from "@/tests/support/factories";
import { attachLog, createRoadSide, DAY, pullLog, type RoadSide } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

/** A road day that drives R2 against itself, its checklist confirmed. */
async function nullTestDay(side: RoadSide): Promise<string> {
  const { tester, programmeId, r2 } = side;
  const { id } = await createRoadDay(tester, {
    ...DAY,
    programmeId,
    nullTestRevisionId: r2,
    plannedTwins: 2,
  });
  await confirmChecklist(tester, { roadDayId: id, confirmed: CHECKLIST.map((line) => line.item) });
  return id;
}

const nullTests = (tx: Parameters<typeof createRoadSide>[0]) =>
  tx.select().from(comparisons).where(isNotNull(comparisons.nullTestRoadDayId));

describe("a null test", () => {
  test("is opened for a revision that may be driven, of this programme", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { tester, programmeId, calibrator, workspaceId } = side;
    const draft = await createRevisionRow(tx, {
      ...{ workspaceId, programmeId, authorId: calibrator.userId },
      number: 3,
      state: "draft",
    });
    const other = await createRoadSide(tx, files.store);
    for (const nullTestRevisionId of [draft, other.r2])
      await expect(createRoadDay(tester, { ...DAY, programmeId, nullTestRevisionId })).rejects.toMatchObject({
        code: "not_drivable",
      });
    const made = await createRoadDay(tester, { ...DAY, programmeId, nullTestRewrites: true });
    expect(made).toMatchObject({ nullTestRevisionId: null, nullTestRewrites: false, plannedTwins: null });
  });

  test("takes runs of its one image only, each with its letter, and asks its question with the first", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const { tester, r1, r2 } = side;
    const roadDayId = await nullTestDay(side);
    await expect(
      attachLog(tester, { ...side, roadDayId }, pullLog(), { revisionId: r1, letter: "A" }),
    ).rejects.toMatchObject({ code: "null_test_one_image" });
    await expect(attachLog(tester, { ...side, roadDayId }, pullLog())).rejects.toMatchObject({
      code: "letter_missing",
    });
    await attachLog(tester, { ...side, roadDayId }, pullLog(1), { letter: "A" });
    await attachLog(tester, { ...side, roadDayId }, pullLog(2), { letter: "B", leg: "back", driveOrder: 2 });
    expect((await listRoadDayRuns(tester, roadDayId)).runs.map((run) => run.letter)).toEqual(["A", "B"]);
    expect(await nullTests(tx)).toMatchObject([
      { revisionAId: r2, revisionBId: r2, nullTestRoadDayId: roadDayId },
    ]);
    // On any other day a letter is nothing and is not kept.
    const { runId } = await attachLog(tester, side, pullLog(3), { letter: "B" });
    const [plain] = await tx.select().from(runs).where(eq(runs.id, runId));
    expect(plain.letter).toBeNull();
  });

  test("counts for no comparison of two images and for no decision", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { tester, lead, r1, r2, workspaceId, programmeId } = side;
    const roadDayId = await nullTestDay(side);
    const { runId } = await attachLog(tester, { ...side, roadDayId }, pullLog(), { letter: "A" });
    await tx.update(runs).set({ state: "usable" }).where(eq(runs.id, runId));
    await tx.update(programmes).set({ standingRevisionId: r1 }).where(eq(programmes.id, programmeId));
    const row = { id: r2, workspaceId, programmeId, number: 2 };
    expect((await missingForDecision(tx, row)).join(" ")).toContain("R2 has no usable run");
    const { comparisonId } = await openComparison(lead, { revisionAId: r1, revisionBId: r2 });
    expect((await getComparison(lead, comparisonId)).runs).toEqual([]);
    const [own] = await nullTests(tx);
    expect((await gateStatus(lead, { revisionId: r2 })).comparisonId).toBe(comparisonId);
    expect((await getComparison(lead, own.id)).runs).toMatchObject([
      { side: "A", outcome: "not computed yet" },
    ]);
  });

  test("is computed by the same engine, claims nothing, and stands in the workshop's own scatter", {
    timeout: 120_000,
  }, async ({ database: { db } }) => {
    const side = await createRoadSide(db, files.store);
    const { tester, lead, workspaceId, programmeId } = side;
    const roadDayId = await nullTestDay(side);
    const system = { db, store: files.store };
    const same = EFFECTS.asFound;
    // 8 runs of one simulated car: whatever is claimed between the letters would be wrong.
    for (const run of driveRoadDay({ twinsPerSide: 2, effectA: same, effectB: same, tempC: 18, seed: 21 })) {
      const values = { letter: run.side, leg: run.leg, driveOrder: run.order };
      const { runId } = await attachLog(tester, { ...side, roadDayId }, run.csv, values);
      await judgeRun(system, { workspaceId, runId });
    }
    const [{ id: comparisonId }] = await nullTests(db);
    await computeComparison(system, { workspaceId, comparisonId });
    const view = await getComparison(lead, comparisonId);
    expect(view).toMatchObject({ state: "ready", nullTestRoadDayId: roadDayId });
    expect(view.result?.sides).toMatchObject({ A: { n: 4 }, B: { n: 4 } });
    expect(view.result?.delta?.regions).toEqual([]);
    expect((await getRoadDay(tester, roadDayId)).nullTest).toMatchObject({ comparisonId, state: "ready" });
    const { strips } = await getRepeatability(tester, programmeId);
    const day = strips.flatMap((strip) => strip.days).find((entry) => entry.roadDayId === roadDayId);
    expect(day).toMatchObject({
      isNullTest: true,
      nullTest: { verdict: "claims nothing" },
      figures: { runs: 8, df: 4, closure: { twins: 4 } },
    });
    // The simulator scatters the level of its runs by 0.4 %, besides gusts and noise.
    expect(day?.figures?.sd_point_pct).toBeGreaterThan(0.15);
    expect(day?.figures?.sd_point_pct).toBeLessThan(2);
    const other = await changeSettings(lead, { comparisonId, factor: "none", rpmStep: 100 });
    expect(other.created).toBe(true);
    expect((await getComparison(lead, other.comparisonId)).nullTestRoadDayId).toBe(roadDayId);
  });

  test("is not for readers, and no comparison of an image with itself exists without its road day", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const { tester, workspaceId, r2 } = side;
    const roadDayId = await nullTestDay(side);
    await attachLog(tester, { ...side, roadDayId }, pullLog(), { letter: "A" });
    const [own] = await nullTests(tx);
    const reader = await createMember(tx, { workspaceId, roles: ["reader"], store: files.store });
    await expect(getComparison(reader, own.id)).rejects.toMatchObject({ status: 403 });
    const { id: _, createdAt: __, ...values } = own;
    const bare = { ...values, nullTestRoadDayId: null, settingsSha256: "other" };
    await expect(
      withTransaction(tester, async (inner) => {
        await inner.insert(comparisons).values(bare);
      }),
    ).rejects.toMatchObject({ cause: { constraint: "comparisons_two_sides" } });
    const twice = tx
      .select()
      .from(comparisons)
      .where(and(eq(comparisons.revisionAId, r2)));
    expect(await twice).toHaveLength(1);
  });
});
