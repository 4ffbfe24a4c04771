import { gzipSync } from "node:zlib";
import { and, desc, eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import type { Transaction } from "@/db/client";
import { runAnalyses, runs } from "@/db/tables";
import { giveUpJudging, judgeRun } from "@/lib/jobs/judge-run";
import { ANALYSIS_VERSION } from "@/lib/measure/analysis-version";
import { openComparison } from "@/lib/services/comparisons/open";
import { openComparisonInput } from "@/lib/services/comparisons/schema";
import { editRoadDay } from "@/lib/services/road-days/edit";
import { getRun } from "@/lib/services/runs/get";
import { listRoadDayRuns } from "@/lib/services/runs/list";
import { setRunAside } from "@/lib/services/runs/set-aside";
import { openUpload } from "@/lib/services/uploads/begin";
import { saveVehicleSheet } from "@/lib/services/vehicle-sheets/save";
import { blobKey } from "@/storage/keys";
import { test } from "@/tests/support/database";
import { SHEET } from "@/tests/support/factories";
import { hasPendingJob } from "@/tests/support/pending-job";
import { attachLog, createRoadSide, DAY, goldenLog, pullLog, type RoadSide } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

const system = (tx: Transaction) => ({ db: tx, store: files.store });

async function attachAndJudge(tx: Transaction, side: RoadSide, log: Uint8Array, fileName = "pull.csv") {
  const { runId } = await attachLog(side.tester, side, log, {}, { fileName });
  await judgeRun(system(tx), { workspaceId: side.workspaceId, runId });
  return runId;
}

describe("judging a run", () => {
  test("finds a good pull usable, with what its page shows", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const runId = await attachAndJudge(tx, side, pullLog());
    const { run, verdict, next } = await getRun(side.tester, runId);
    expect(run.state).toBe("usable");
    expect(next).toBeNull();
    expect(verdict).toMatchObject({ sheetVersion: 1, analysisVersion: ANALYSIS_VERSION });
    const { result, traces } = verdict ?? {};
    expect(result?.reasons).toEqual([]);
    // Truth of this log (tests/golden/README.md): 41.16 s long, engine speed up to 6,595 per minute.
    expect(traces?.timeS.at(-1)).toBeCloseTo(41.16, 1);
    const rpm = traces?.channels.find((channel) => channel.channel === "engine_speed")?.values ?? [];
    expect(Math.max(...rpm.map((value) => value ?? 0))).toBe(6595);
    expect(result?.segments?.pull).toBeDefined();
    expect(result?.segments?.coast).toBeDefined();
    expect(result?.peak?.engine_kw).toBeGreaterThan(0);
    expect(result?.curve?.rpm.length).toBeGreaterThan(10);
    const list = await listRoadDayRuns(side.tester, side.roadDayId);
    expect(list).toMatchObject({ waiting: 0, runs: [{ verdict: "usable", why: [] }] });
    expect(list.runs[0]?.peakKw).toBe(result?.peak?.engine_kw);
  });

  // Codes from the list beside the simulated broken logs, written before the reader was.
  const BROKEN = {
    "b02_header_only.csv": "no_data_rows",
    "b03_no_time.csv": "no_time_column",
    "b04_time_all_equal.csv": "time_not_increasing",
    "b05_text_in_numbers.csv": "non_numeric_values",
    "b06_two_samples.csv": "too_few_samples",
    "b07_binary_junk.csv": "not_text",
    "b08_no_speed.csv": "no_speed_channel",
    "b09_speed_all_zero.csv": "speed_all_zero",
    "b10_nan_flood.csv": "too_many_missing",
  };
  for (const [file, code] of Object.entries(BROKEN)) {
    test(`refuses ${file} with ${code} and a next step`, async ({ tx }) => {
      const side = await createRoadSide(tx, files.store);
      const runId = await attachAndJudge(tx, side, goldenLog(`broken/${file}`), file);
      const { run, verdict, next } = await getRun(side.tester, runId);
      expect(run.state).toBe("refused");
      expect(verdict?.result.reasons[0]?.code).toBe(code);
      const [line] = (await listRoadDayRuns(side.tester, side.roadDayId)).runs;
      expect(line?.why).toEqual(verdict?.result.reasons.map((reason) => reason.message));
      expect(line?.why[0]?.length).toBeGreaterThan(20);
      expect(line?.next).toBe(next);
      expect(next).not.toContain("Look at the reason");
    });
  }

  test("refuses b01_empty.csv before it is sent, and packed as empty_file", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const empty = {
      purpose: "log" as const,
      fileName: "b01_empty.csv",
      sizeBytes: 0,
      sha256: "0".repeat(64),
    };
    await expect(openUpload(side.tester, empty)).rejects.toThrow("0 bytes");
    expect(goldenLog("broken/b01_empty.csv")).toHaveLength(0);
    const runId = await attachAndJudge(tx, side, gzipSync(Buffer.alloc(0)), "b01_empty.csv.gz");
    const { verdict } = await getRun(side.tester, runId);
    expect(verdict?.result.reasons.map((reason) => reason.code)).toEqual(["empty_file"]);
  });

  test("twice keeps one verdict; a new vehicle sheet adds one beside the old", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId, programmeId } = side;
    const runId = await attachAndJudge(tx, side, pullLog());
    const all = () =>
      tx.select().from(runAnalyses).where(eq(runAnalyses.runId, runId)).orderBy(desc(runAnalyses.createdAt));
    await judgeRun(system(tx), { workspaceId, runId });
    const [first, ...more] = await all();
    expect(more).toEqual([]);

    const figures = { ...SHEET, massPartsKg: [{ part: "as tested", value: 1600, uncertainty: 10 }] };
    await tx.execute("delete from pgboss.job");
    await saveVehicleSheet(side.lead, { programmeId, basedOnVersion: 1, figures });
    expect(await hasPendingJob(tx, { name: "judge-run", data: { workspaceId, runId } })).toBe(true);
    await judgeRun(system(tx), { workspaceId, runId });
    const after = await all();
    expect(after).toHaveLength(2);
    const heavier = after.find((row) => row.sheetVersion === 2);
    expect(after.find((row) => row.sheetVersion === 1)).toEqual(first);
    expect(heavier?.inputSha256).not.toBe(first?.inputSha256);
    // A heavier car that accelerates the same way has more power: force is mass times acceleration.
    expect(heavier?.result.peak?.engine_kw).toBeGreaterThan(first?.result.peak?.engine_kw ?? Infinity);
  });

  test("of weather that was typed wrong and put right again is the verdict of the right one", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId, roadDayId } = side;
    const runId = await attachAndJudge(tx, side, pullLog());
    const newest = async () => (await getRun(side.tester, runId)).verdict?.inputSha256;
    const first = await newest();
    for (const [tempC, rowVersion] of [
      [2, 2],
      [DAY.tempC, 3],
    ] as const) {
      await editRoadDay(side.tester, { ...DAY, tempC, roadDayId, rowVersion });
      await judgeRun(system(tx), { workspaceId, runId });
      expect((await newest()) === first).toBe(tempC === DAY.tempC);
    }
  });

  test("has the comparisons of its revision computed anew, and setting it aside does too", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId } = side;
    const question = openComparisonInput.parse({ revisionAId: side.r1, revisionBId: side.r2 });
    const { comparisonId } = await openComparison(side.tester, question);
    const refresh = { name: "compute-comparison" as const, data: { workspaceId, comparisonId } };
    const countJobs = async () => {
      const { rows } = await tx.execute<{ n: string }>(
        "select count(*) as n from pgboss.job where name = 'compute-comparison'",
      );
      return Number(rows[0]?.n);
    };
    const before = await countJobs();
    const runId = await attachAndJudge(tx, side, pullLog());
    expect(await countJobs()).toBe(before + 1);
    expect(await hasPendingJob(tx, refresh)).toBe(true);
    await setRunAside(side.tester, { runId, rowVersion: 1, reason: "a gust on the way out" });
    expect(await countJobs()).toBe(before + 2);
  });

  test("of a log that the store lost is an error to try again, and ends in a verdict that says so", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId } = side;
    const log = pullLog(31);
    const { runId } = await attachLog(side.tester, side, log, {}, { fileName: "lost.csv" });
    const [run] = await tx
      .select()
      .from(runs)
      .where(and(eq(runs.id, runId), eq(runs.workspaceId, workspaceId)));
    await files.store.remove(blobKey(workspaceId, run?.logSha256 ?? ""));
    await expect(judgeRun(system(tx), { workspaceId, runId })).rejects.toThrow();
    expect((await getRun(side.tester, runId)).run.state).toBe("waiting");
    await giveUpJudging(system(tx), { workspaceId, runId });
    const { run: after, verdict } = await getRun(side.tester, runId);
    expect(after.state).toBe("refused");
    expect(verdict?.result.reasons).toMatchObject([
      { code: "analysis_fault", message: expect.stringContaining("lost.csv") },
    ]);
  });

  test("of a run that is gone or of another workspace does nothing", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const other = await createRoadSide(tx, files.store);
    const { runId } = await attachLog(side.tester, side, pullLog());
    await judgeRun(system(tx), { workspaceId: other.workspaceId, runId });
    expect((await getRun(side.tester, runId)).run.state).toBe("waiting");
  });
});
