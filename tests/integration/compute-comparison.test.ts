import { createHash } from "node:crypto";
import { eq } from "drizzle-orm";
import { describe, expect, onTestFinished } from "vitest";
import { EFFECTS, hill } from "@/db/seed/demo-effects";
import { driveRoadDay } from "@/db/seed/demo-logs";
import { blobs, comparisonResults, comparisons, runs } from "@/db/tables";
import { computeComparison, giveUpComputing } from "@/lib/jobs/compute-comparison";
import { getComparison } from "@/lib/services/comparisons/load";
import { openComparison } from "@/lib/services/comparisons/open";
import { gateStatus } from "@/lib/services/gates/status";
import { blobKey } from "@/storage/keys";
import type { ObjectStore } from "@/storage/port";
import { type TestDatabase, test } from "@/tests/support/database";
import { createRunRow, createScene, type Scene } from "@/tests/support/decision-scene";
import { createTestStore } from "@/tests/support/store";

/** What the candidate truly does in the simulated car: 5 % more torque from 2,300 to 4,700 per minute, nothing elsewhere. */
const TRUTH = { share: 0.05, fromRpm: 2300, toRpm: 4700 };
/** Within this far of an end of the hill its edge is still rising. */
const EDGE_RPM = 350;

async function keep(scene: Scene, store: ObjectStore, bytes: Buffer): Promise<string> {
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  await scene.db
    .insert(blobs)
    .values({ workspaceId: scene.workspaceId, sha256, sizeBytes: bytes.length })
    .onConflictDoNothing();
  const key = blobKey(scene.workspaceId, sha256);
  await store.create(
    key,
    (async function* () {
      yield bytes;
    })(),
    { sizeBytes: bytes.length, sha256 },
  );
  return sha256;
}

/** A scene whose runs are those of a simulated road day, waiting to be computed. */
async function driven({ db }: TestDatabase, twinsPerSide = 4) {
  const { store, drop } = createTestStore();
  onTestFinished(drop);
  const scene = await createScene(db);
  await db.delete(comparisonResults);
  await db.delete(comparisons);
  await db.delete(runs);
  const day = driveRoadDay({
    twinsPerSide,
    effectA: EFFECTS.asFound,
    effectB: { ...EFFECTS.asFound, gain: hill(TRUTH.share, TRUTH.fromRpm, TRUTH.toRpm) },
    tempC: 16,
    seed: 11,
  });
  for (const run of day) {
    await createRunRow(scene, {
      number: run.order,
      revisionId: run.side === "A" ? scene.standingId : scene.candidateId,
      leg: run.leg,
      logSha256: await keep(scene, store, run.csv),
      tempC: run.tempC,
      pressureHpa: run.pressureHpa,
      humidityPct: run.humidityPct,
    });
  }
  const opened = await openComparison(scene.tester, {
    revisionAId: scene.standingId,
    revisionBId: scene.candidateId,
  });
  const job = { workspaceId: scene.workspaceId, comparisonId: opened.comparisonId };
  return { scene, store, job, system: { db, store } };
}

const results = ({ db }: Scene) => db.select().from(comparisonResults);

describe("computing a comparison", () => {
  test("finds the gain that the simulated car truly has, and claims nothing where it has none", {
    timeout: 60_000,
  }, async ({ database }) => {
    const { scene, job, system } = await driven(database);
    expect(await getComparison(scene.lead, job.comparisonId)).toMatchObject({
      state: "waiting",
      recomputing: true,
      result: null,
    });
    await computeComparison(system, job);
    const view = await getComparison(scene.lead, job.comparisonId);
    expect(view).toMatchObject({ state: "ready", failure: null });
    expect(view.runs.map((run) => run.outcome)).toEqual(Array(16).fill("used"));
    const delta = view.result?.delta;
    const gains = delta?.regions.filter((region) => region.verdict === "gain") ?? [];
    expect(gains.length).toBeGreaterThan(0);
    for (const gain of gains) {
      expect(gain.from_rpm).toBeGreaterThanOrEqual(TRUTH.fromRpm - EDGE_RPM);
      expect(gain.to_rpm).toBeLessThanOrEqual(TRUTH.toRpm + EDGE_RPM);
    }
    expect(delta?.regions.filter((region) => region.verdict === "loss")).toEqual([]);
    const inside = delta?.rpm.findIndex((rpm) => rpm >= 3500) ?? -1;
    expect(delta?.low_pct[inside]).toBeLessThan(100 * TRUTH.share);
    expect(delta?.high_pct[inside]).toBeGreaterThan(100 * TRUTH.share);
    const gates = await gateStatus(scene.lead, { revisionId: scene.candidateId });
    expect(gates.results.map((gate) => gate.state)).toEqual(["met"]);
  });

  test("gives the same numbers to the last digit, and leaves a result that is there alone", {
    timeout: 60_000,
  }, async ({ database }) => {
    const { scene, job, system } = await driven(database, 3);
    await computeComparison(system, job);
    const [first] = await results(scene);
    await computeComparison(system, job);
    expect(await results(scene)).toEqual([first]);
    await scene.db.delete(comparisonResults);
    await computeComparison(system, job);
    const [second] = await results(scene);
    expect(second.inputSha256).toBe(first.inputSha256);
    expect(JSON.stringify(second.result)).toBe(JSON.stringify(first.result));
  });

  test("refuses a log that can't be read by its reason and goes on with the others", {
    timeout: 60_000,
  }, async ({ database }) => {
    const { scene, store, job, system } = await driven(database, 3);
    const logSha256 = await keep(scene, store, Buffer.from("Time [s],Wheel speed undriven [km/h]\n"));
    await createRunRow(scene, { revisionId: scene.candidateId, number: 20, logSha256 });
    await computeComparison(system, job);
    const view = await getComparison(scene.lead, job.comparisonId);
    expect(view.state).toBe("ready");
    const broken = view.runs.find((run) => run.number === 20);
    expect(broken).toMatchObject({ outcome: "refused" });
    expect(broken?.why.join(" ")).not.toBe("");
    expect(view.result?.sides.B?.n).toBe(6);
  });

  test("says in a plain sentence what is missing while a side has no run", async ({ database }) => {
    const { scene, job, system } = await driven(database, 1);
    await scene.db.update(runs).set({ setAsideAt: new Date() }).where(eq(runs.revisionId, scene.candidateId));
    await computeComparison(system, job);
    const view = await getComparison(scene.lead, job.comparisonId);
    expect(view).toMatchObject({ state: "failed", result: null });
    expect(view.failure).toBe(
      "Side B has no run that counts yet. Attach runs; then it is computed by itself.",
    );
    const gates = await gateStatus(scene.lead, { revisionId: scene.candidateId });
    expect(gates.results.map((gate) => gate.state)).toEqual(["too_little"]);
  });

  test("fails with a sentence when a stored log is gone, and comes good on the next try", {
    timeout: 60_000,
  }, async ({ database }) => {
    const { scene, store, job, system } = await driven(database, 3);
    const [run] = await scene.db.select().from(runs).where(eq(runs.number, 1));
    const key = blobKey(scene.workspaceId, run.logSha256);
    const { body } = await store.get(key);
    const chunks: Uint8Array[] = [];
    for await (const chunk of body as AsyncIterable<Uint8Array>) chunks.push(chunk);
    await store.remove(key);
    await expect(computeComparison(system, job)).rejects.toThrow();
    const view = await getComparison(scene.lead, job.comparisonId);
    expect(view.state).toBe("failed");
    expect(view.failure).toMatch(/^The log of run 1 can't be had from the store: .+\.$/);
    await keep(scene, store, Buffer.concat(chunks));
    await computeComparison(system, job);
    expect((await getComparison(scene.lead, job.comparisonId)).state).toBe("ready");
  });

  test("given up by the queue tells whoever waits; a comparison that is not there is nobody's work", async ({
    database,
  }) => {
    const { scene, job, system } = await driven(database, 1);
    await giveUpComputing(system, job);
    expect(await getComparison(scene.lead, job.comparisonId)).toMatchObject({ state: "failed" });
    const nowhere = { ...job, comparisonId: scene.candidateId };
    await computeComparison(system, nowhere);
    await giveUpComputing(system, nowhere);
    expect(await results(scene)).toHaveLength(1);
  });
});
