import { eq, sql } from "drizzle-orm";
import { describe, expect, vi } from "vitest";
import { selectOlderDecisions } from "@/db/queries/analysis-versions";
import { comparisonResults, runAnalyses, runs } from "@/db/tables";
import { digestOf } from "@/lib/canonical-json";
import { renewOutdated } from "@/lib/jobs/renew-outdated";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";
import { getAnalysisMoves } from "@/lib/services/analysis/get-moves";
import { getComparison } from "@/lib/services/comparisons/load";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { test } from "@/tests/support/database";
import { createScene, type Scene, seenBy, storeResult } from "@/tests/support/decision-scene";
import { createMember } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";
import { hasPendingJob } from "@/tests/support/pending-job";

vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => given === stored,
}));

const OLD = "0.9.0";

/** Turns the scene's stored result into one that an older version computed; nothing else of its input moves. */
async function age({ db, comparisonId }: Pick<Scene, "db" | "comparisonId">): Promise<void> {
  const [row] = await db
    .select()
    .from(comparisonResults)
    .where(eq(comparisonResults.comparisonId, comparisonId));
  const input = { ...row.input, analysisVersion: OLD };
  await db
    .update(comparisonResults)
    .set({ input, inputSha256: digestOf(input), analysisVersion: OLD })
    .where(eq(comparisonResults.comparisonId, comparisonId));
}

describe("a new analysis version", () => {
  test("leaves the old result in sight as what it is, and has it computed anew in the background, once", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, tester, comparisonId, workspaceId } = scene;
    expect(await renewOutdated(db)).toBe(0);
    const before = await getComparison(lead, comparisonId);
    await age(scene);
    const view = await getComparison(lead, comparisonId);
    expect(view).toMatchObject({ state: "stale", versionOnly: true, basis: { analysisVersion: OLD } });
    expect(view.result).toEqual(before.result);
    const [run] = await db.select().from(runs).limit(1);
    const verdict = { runId: run.id, workspaceId, inputSha256: "old", analysisVersion: OLD, sheetVersion: 1 };
    const result = { id: "1", usable: true, reasons: [], notes: [] };
    await db.insert(runAnalyses).values({ ...verdict, result });
    // The scene's own opening left a job behind, which would bring the result too.
    await db.execute(sql`delete from pgboss.job`);
    expect(await renewOutdated(db)).toBe(2);
    expect(await hasPendingJob(db, { name: "compute-comparison", data: { workspaceId, comparisonId } })).toBe(
      true,
    );
    expect(await hasPendingJob(db, { name: "judge-run", data: { workspaceId, runId: run.id } })).toBe(true);
    expect(await renewOutdated(db)).toBe(0);
    await storeResult(scene);
    expect(await getComparison(tester, comparisonId)).toMatchObject({ state: "ready", versionOnly: false });
    expect(await db.select().from(comparisonResults)).toHaveLength(2);
  });

  test("is not tried again for a day where it failed for good, and fills the queue a slice at a time", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    await age(scene);
    const [{ id: runId }] = await db.select().from(runs).limit(1);
    const verdict = { runId, workspaceId: scene.workspaceId, inputSha256: "old", sheetVersion: 1 };
    const result = { id: "1", usable: true, reasons: [], notes: [] };
    await db.insert(runAnalyses).values({ ...verdict, analysisVersion: OLD, result });
    await db.execute(sql`delete from pgboss.job`);
    expect(await renewOutdated(db, 1)).toBe(1);
    expect(await renewOutdated(db, 1)).toBe(1);
    expect(await renewOutdated(db, 1)).toBe(0);
    await db.execute(sql`update pgboss.job set state = 'failed', completed_on = now() - interval '23 hours'`);
    expect(await renewOutdated(db)).toBe(0);
    // The queue's housekeeping moves failed jobs there.
    await db.execute(sql`insert into pgboss.archive select job.*, now() from pgboss.job`);
    await db.execute(sql`delete from pgboss.job`);
    expect(await renewOutdated(db)).toBe(0);
    await db.execute(sql`update pgboss.archive set completed_on = now() - interval '25 hours'`);
    expect(await renewOutdated(db)).toBe(2);
  });

  test("shows what it moves, comparison by comparison, gates included", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const { lead, programmeId, comparisonId } = scene;
    expect(await getAnalysisMoves(lead, programmeId)).toMatchObject({
      version: ANALYSIS_VERSION,
      comparisons: [],
      untouched: 1,
      decisions: [],
    });
    await age(scene);
    const waiting = await getAnalysisMoves(lead, programmeId);
    expect(waiting.comparisons).toMatchObject([{ state: "being computed", oldVersion: OLD, moves: null }]);
    await storeResult(scene);
    // What the older version had said: another peak on side A, and a loss where there is a gain now.
    const [old] = await db.select().from(comparisonResults).where(eq(comparisonResults.analysisVersion, OLD));
    const { result } = old;
    const A = result?.sides.A;
    if (!result?.delta || !A?.peak) throw new Error("the scene has no result");
    await db
      .update(comparisonResults)
      .set({
        result: {
          ...result,
          sides: { ...result.sides, A: { ...A, peak: { ...A.peak, engine_nm: 290 } } },
          delta: { ...result.delta, regions: [{ from_rpm: 2000, to_rpm: 3000, verdict: "loss" }] },
        },
      })
      .where(eq(comparisonResults.analysisVersion, OLD));
    const { comparisons, untouched } = await getAnalysisMoves(lead, programmeId);
    expect(untouched).toBe(0);
    expect(comparisons).toMatchObject([
      { comparisonId, state: "told", labels: { a: "R1", b: "R2" }, isNullTest: false, gates: [] },
    ]);
    const moves = comparisons[0].moves;
    expect(moves?.figures.find(({ what }) => what === "Peak torque, side A")).toMatchObject({
      before: { value: 290 },
      after: { value: 300 },
    });
    expect(moves?.regions).toMatchObject({ before: [{ verdict: "loss" }], after: [{ verdict: "gain" }] });
  });

  test("is not blamed for what a changed run moved", async ({ database: { db } }) => {
    const scene = await createScene(db);
    await age(scene);
    await db.update(runs).set({ gear: 4 }).where(eq(runs.number, 3));
    expect((await getComparison(scene.lead, scene.comparisonId)).versionOnly).toBe(false);
    expect((await getAnalysisMoves(scene.lead, scene.programmeId)).comparisons).toMatchObject([
      { state: "other input", moves: null },
    ]);
  });

  test("names the decisions that rest on the older one, whose records stay sealed", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { lead, candidateId, programmeId } = scene;
    await age(scene);
    await storeResult(scene);
    await promoteRevision(lead, await seenBy(lead, candidateId));
    expect((await getAnalysisMoves(lead, programmeId)).decisions).toEqual([]);
    const later = await createScene(db);
    const seen = await seenBy(later.lead, later.candidateId);
    await promoteRevision(later.lead, seen);
    // Decisions are append-only for the runtime role, so the version that it was taken on is asked of the query itself.
    const { workspaceId } = later;
    const older = await selectOlderDecisions(db, {
      workspaceId,
      programmeId: later.programmeId,
      analysisVersion: "9.9.9",
    });
    expect(older).toMatchObject([{ kind: "promote", revisionNumber: 2, analysisVersion: ANALYSIS_VERSION }]);
  });

  test("is not shown to readers and admins, nor across workspaces", async ({ database: { db } }) => {
    const { workspaceId, programmeId } = await createScene(db);
    const stranger = await createScene(db);
    for (const role of ["reader", "admin"] as const) {
      const ctx = await createMember(db, { workspaceId, roles: [role], store: noStore });
      await expect(getAnalysisMoves(ctx, programmeId)).rejects.toMatchObject({ status: 403 });
    }
    await expect(getAnalysisMoves(stranger.lead, programmeId)).rejects.toMatchObject({ status: 404 });
  });
});
