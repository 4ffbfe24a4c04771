import { eq } from "drizzle-orm";
import { describe, expect } from "vitest";
import { comparisonResults, programmes } from "@/db/tables";
import { STARTING_SD_PCT } from "@/lib/compare/plan/plan-scatter";
import type { RepeatabilityResult } from "@/lib/measure/types";
import { getPlan, getRepeatability } from "@/lib/services/plans/get";
import { test } from "@/tests/support/database";
import { createScene, type Scene } from "@/tests/support/decision-scene";
import { createMember } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

/** Gives the scene's stored result a scatter, as a computation would have. */
async function storeScatter({ db, comparisonId, roadDayId }: Scene): Promise<RepeatabilityResult> {
  const scatter: RepeatabilityResult = {
    road_day: roadDayId,
    runs: 12,
    df: 8,
    sd_point_pct: 0.6,
    sd_range_pct: 0.4,
    range_rpm: 1000,
    closure: { twins: 6, rms_pct: 0.5, largest_pct: 0.9 },
  };
  const [row] = await db
    .select()
    .from(comparisonResults)
    .where(eq(comparisonResults.comparisonId, comparisonId));
  const result = row.result;
  if (!result?.delta) throw new Error("the scene has no result");
  const delta = { ...result.delta, band: { critical_value: 3.5, df: 8, smoothing_pct: 0.2 } };
  await db
    .update(comparisonResults)
    .set({ result: { ...result, delta, repeatability: [scatter] } })
    .where(eq(comparisonResults.comparisonId, comparisonId));
  return scatter;
}

describe("the plan before driving", () => {
  test("starts with assumed scatter and says so, then rests on the programme's own", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { tester, programmeId } = scene;
    const before = await getPlan(tester, programmeId, {});
    expect(before).toMatchObject({ days: 0, neededBetween: null });
    expect(before.basis.smoothingPct).toBeNull();
    expect(before.basis.range).toEqual({ sdPct: STARTING_SD_PCT.range, df: null });
    await storeScatter(scene);
    const after = await getPlan(tester, programmeId, {});
    expect(after).toMatchObject({
      days: 1,
      basis: {
        range: { sdPct: 0.4, df: 8 },
        point: { sdPct: 0.6, df: 8 },
        places: { comparisons: 1 },
        smoothingPct: 0.2,
      },
    });
    expect(after.needed.range).toBeLessThan(before.needed.range ?? 0);
    expect(after.neededBetween?.most.range).toBeGreaterThanOrEqual(after.needed.range ?? 99);
  });

  test("reads the address, keeps what makes no sense out and says so", async ({ database: { db } }) => {
    const { tester, programmeId } = await createScene(db);
    const plan = await getPlan(tester, programmeId, {
      wanted: "2,5",
      strip: "about a mile",
      fuel: "9999",
      twins: "5",
    });
    expect(plan.query).toMatchObject({
      wantedPct: 2.5,
      twins: 5,
      drive: { stripM: 2000, litresPer100Km: 35 },
    });
    expect(Object.keys(plan.query.errors).sort()).toEqual(["fuel", "strip"]);
    expect(plan.query.texts.strip).toBe("about a mile");
    expect(plan.chosen.twins).toBe(5);
    expect(plan.card.runs).toBe(20);
    expect((await getPlan(tester, programmeId, { twins: "99" })).query.twins).toBeNull();
  });

  test("offers no road day to a calibrator, nor for an archived programme", async ({ database: { db } }) => {
    const { author, tester, programmeId } = await createScene(db);
    expect((await getPlan(author, programmeId, {})).mayOpenRoadDay.ok).toBe(false);
    expect((await getPlan(tester, programmeId, {})).mayOpenRoadDay.ok).toBe(true);
    await db.update(programmes).set({ archivedAt: new Date() }).where(eq(programmes.id, programmeId));
    expect((await getPlan(tester, programmeId, {})).mayOpenRoadDay.ok).toBe(false);
  });
});

describe("the workshop's own scatter", () => {
  test("is told strip by strip, road days without a result too", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const { lead, programmeId, roadDayId } = scene;
    expect((await getRepeatability(lead, programmeId)).strips).toMatchObject([
      { point: null, days: [{ roadDayId, figures: null, isNullTest: false }] },
    ]);
    const figures = await storeScatter(scene);
    const [strip] = (await getRepeatability(lead, programmeId)).strips;
    expect(strip.point).toEqual({ sdPct: 0.6, df: 8 });
    expect(strip.days).toMatchObject([
      { figures, nullTest: null, comparison: { id: scene.comparisonId, a: 1, b: 2 } },
    ]);
  });

  test("and the plan are for testers, calibrators and leads, and exist in their own workspace only", async ({
    database: { db },
  }) => {
    const { workspaceId, programmeId } = await createScene(db);
    const stranger = await createScene(db);
    for (const role of ["reader", "admin"] as const) {
      const ctx = await createMember(db, { workspaceId, roles: [role], store: noStore });
      await expect(getPlan(ctx, programmeId, {})).rejects.toMatchObject({ status: 403 });
      await expect(getRepeatability(ctx, programmeId)).rejects.toMatchObject({ status: 403 });
    }
    await expect(getPlan(stranger.lead, programmeId, {})).rejects.toMatchObject({ status: 404 });
    await expect(getRepeatability(stranger.lead, programmeId)).rejects.toMatchObject({ status: 404 });
  });
});
