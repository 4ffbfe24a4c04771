import { afterAll, beforeAll, describe, expect } from "vitest";
import type { Transaction } from "@/db/client";
import { selectRunsForCoverage } from "@/db/queries/coverages";
import { coverages, type runs } from "@/db/tables";
import { saveAxisLinks } from "@/lib/services/calibration-settings/save-links";
import { askForChangeSet } from "@/lib/services/change-sets/ask";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import { getChangeSetState } from "@/lib/services/change-sets/state";
import { confirmChecklist } from "@/lib/services/road-days/confirm-checklist";
import { createRoadDay } from "@/lib/services/road-days/create";
import { CHECKLIST } from "@/lib/services/road-days/schema";
import { getRun } from "@/lib/services/runs/get";
import { setRunAside } from "@/lib/services/runs/set-aside";
import {
  addSmallRevision,
  createCalibrationScene,
  doJobs,
  setState,
} from "@/tests/support/calibration-scene";
import { test } from "@/tests/support/database";
import { createRunRow, createScene } from "@/tests/support/decision-scene";
import { createRevisionRow } from "@/tests/support/factories";
import { attachLog, DAY, pullLog } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

/** A revision whose curve over engine speed changed at 4,000 and 6,000 per minute, and a road day to drive it on. */
async function scenery(tx: Transaction) {
  const scene = await createCalibrationScene(tx, files.store);
  const before = await addSmallRevision(scene, {});
  const after = await addSmallRevision(scene, { curve: [10, 20, 33, 44] }, { parentId: before });
  await setState(scene, before, { state: "promoted", asFound: true });
  await setState(scene, after, { state: "validating" });
  await doJobs(scene);
  const { programmeId, tester } = scene;
  const { id: roadDayId } = await createRoadDay(tester, { ...DAY, programmeId });
  await confirmChecklist(tester, { roadDayId, confirmed: CHECKLIST.map((line) => line.item) });
  const attach = (copy: number) =>
    attachLog(tester, { roadDayId, r2: after }, pullLog(copy), { driveOrder: copy + 1 });
  return { scene, before, after, attach };
}

describe("coverage", () => {
  test("follows the usable runs: none, computed, out of date, computed anew", async ({ tx }) => {
    const { scene, after, attach } = await scenery(tx);
    const coverage = async () => {
      const shown = await getRevisionChanges(scene.lead, after);
      // What the page polls says the same.
      const polled = await getChangeSetState(scene.lead, shown.changeSetId ?? "");
      expect(polled).toEqual({ state: shown.state, coverage: shown.coverage.state });
      return shown.coverage;
    };
    expect(await coverage()).toMatchObject({ state: "no_runs", result: null });
    const { runId } = await attach(0);
    expect(await coverage()).toMatchObject({ state: "no_runs" });
    await doJobs(scene);
    const one = await coverage();
    expect(one).toMatchObject({ state: "ready", moved: false, failure: null });
    // The pull of tests/golden/logs ends at 141.56 km/h in third gear, over 6,000 per minute: both changed points were visited.
    expect(one.result).toMatchObject({ changedCells: 2, changedVisited: 2, runs: [runId] });
    const [map] = one.result?.maps ?? [];
    expect(map).toMatchObject({ name: "advance", links: [{ channel: "engine_speed", by: "title" }] });
    const second = await attach(1);
    await doJobs(scene);
    const two = await coverage();
    expect(two.result?.runs).toHaveLength(2);
    const seconds = (of: typeof one) =>
      of.result?.maps[0]?.secondsByCell.reduce((sum, cell) => sum + cell, 0) ?? Number.NaN;
    expect(seconds(two)).toBeCloseTo(2 * seconds(one), 3);
    const { run } = await getRun(scene.tester, second.runId);
    await setRunAside(scene.tester, { runId: second.runId, rowVersion: run.rowVersion, reason: "a gust" });
    expect((await coverage()).result).toEqual(one.result);
  });

  test("is linked by hand for the whole programme, and worked out anew", async ({ tx }) => {
    const { scene, after, attach } = await scenery(tx);
    await attach(0);
    await doJobs(scene);
    const view = await getRevisionChanges(scene.calibrator, after);
    expect(view.inputQuantities).toEqual([
      {
        quantity: "engine_speed",
        text: "engine speed",
        unit: "1/min",
        link: { quantity: "engine_speed", channel: "engine_speed", by: "title" },
        suggestions: [{ quantity: "engine_speed", channel: "engine_speed", by: "title" }],
      },
    ]);
    const link = { quantity: "engine_speed", channel: "no such column", by: "hand" as const };
    await saveAxisLinks(scene.calibrator, {
      programmeId: scene.programmeId,
      basedOnVersion: 0,
      links: [link],
    });
    const waiting = (await getRevisionChanges(scene.calibrator, after)).coverage;
    expect(waiting).toMatchObject({ state: "computing", moved: true, result: view.coverage.result });
    await doJobs(scene);
    const linked = await getRevisionChanges(scene.calibrator, after);
    expect(linked.inputQuantities[0]?.link).toEqual(link);
    expect(linked.coverage).toMatchObject({
      state: "ready",
      moved: false,
      result: { changedCells: 2, changedVisited: 0, notTold: [{ name: "advance", code: "not_recorded" }] },
    });
  });

  test("that waited for runs or links of before waits no longer, and is opened again when they count again", async ({
    tx,
  }) => {
    const { scene, after, attach } = await scenery(tx);
    await attach(0);
    await doJobs(scene);
    const { programmeId, calibrator } = scene;
    const link = (channel: string) => [{ quantity: "engine_speed", channel, by: "hand" as const }];
    for (const [basedOnVersion, channel] of ["first", "second"].entries())
      await saveAxisLinks(calibrator, { programmeId, basedOnVersion, links: link(channel) });
    await doJobs(scene);
    const states = async () => (await tx.select().from(coverages)).map(({ state }) => state).sort();
    expect(await states()).toEqual(["failed", "ready", "ready"]);
    expect((await getRevisionChanges(calibrator, after)).coverage.state).toBe("ready");
    await saveAxisLinks(calibrator, { programmeId, basedOnVersion: 2, links: link("first") });
    await doJobs(scene);
    expect(await states()).toEqual(["ready", "ready", "ready"]);
  });

  test("takes usable runs of any kind, and no others", async ({ database }) => {
    const scene = await createScene(database.db);
    const revisionId = await createRevisionRow(scene.db, {
      ...{ workspaceId: scene.workspaceId, programmeId: scene.programmeId, authorId: scene.author.userId },
      ...{ number: 77, state: "validating" },
    });
    const add = (number: number, values: Partial<typeof runs.$inferInsert>) =>
      createRunRow(scene, { revisionId, number, ...values });
    const usable = [
      await add(71, { kind: "pull" }),
      await add(72, { kind: "coast-down" }),
      await add(73, { kind: "sprint" }),
    ];
    await add(74, { state: "refused" });
    await add(75, { state: "waiting" });
    await add(76, { setAsideAt: new Date(), setAsideReason: "a gust", setAsideBy: scene.tester.userId });
    const found = await selectRunsForCoverage(scene.db, { workspaceId: scene.workspaceId, revisionId });
    expect(found.map(({ id }) => id)).toEqual(usable);
  });

  test("of a pair that nobody asked for is worked out when somebody does", async ({ tx }) => {
    const { scene, before, after, attach } = await scenery(tx);
    await attach(0);
    await doJobs(scene);
    const other = await addSmallRevision(scene, { curve: [11, 20, 30, 40] }, { parentId: before });
    await doJobs(scene);
    await askForChangeSet(scene.tester, { revisionId: after, againstId: other });
    await doJobs(scene);
    const view = await getRevisionChanges(scene.tester, after, other);
    expect(view.coverage).toMatchObject({ state: "ready", result: { changedCells: 3 } });
  });
});
