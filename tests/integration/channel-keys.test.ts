import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import type { Transaction } from "@/db/client";
import { channelKeys, ledger, runs } from "@/db/tables";
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from "@/lib/errors";
import { judgeRun } from "@/lib/jobs/judge-run";
import { applyChannelKey } from "@/lib/services/channel-keys/apply";
import { getChannelKeyPage } from "@/lib/services/channel-keys/get-page";
import { previewRun } from "@/lib/services/channel-keys/preview-run";
import { readUpload } from "@/lib/services/channel-keys/read-upload";
import { saveChannelKey } from "@/lib/services/channel-keys/save";
import type { SaveChannelKey } from "@/lib/services/channel-keys/schema";
import { currentInput } from "@/lib/services/comparisons/current-input";
import { STANDARD_SETTINGS, toCampaignSettings } from "@/lib/services/comparisons/schema";
import { whatMoved } from "@/lib/services/comparisons/what-moved";
import type { Ctx } from "@/lib/services/ctx";
import { getRun } from "@/lib/services/runs/get";
import { listRefusedRows, refusedRowsCsv } from "@/lib/services/runs/refused-rows";
import { setRunAside } from "@/lib/services/runs/set-aside";
import { citeRun } from "@/tests/support/cite-run";
import { test } from "@/tests/support/database";
import { createMember } from "@/tests/support/factories";
import { ODD_KEY, oddLog, plainLog } from "@/tests/support/odd-log";
import { hasPendingJob } from "@/tests/support/pending-job";
import { attachLog, createRoadSide, type RoadSide } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";
import { uploadBytes } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

const judge = (tx: Transaction, side: RoadSide, runId: string) =>
  judgeRun({ db: tx, store: files.store }, { workspaceId: side.workspaceId, runId });

/** Attaches logs at places 1, 2, … and judges each. */
async function attachAll(tx: Transaction, side: RoadSide, logs: readonly Uint8Array[]): Promise<string[]> {
  const ids: string[] = [];
  for (const log of logs) {
    const { runId } = await attachLog(side.tester, side, log, { driveOrder: ids.length + 1 });
    await judge(tx, side, runId);
    ids.push(runId);
  }
  return ids;
}
const keyOf = (runId: string, values: Partial<SaveChannelKey> = {}): SaveChannelKey => ({
  runId,
  name: "Black box",
  basedOnVersion: 0,
  key: ODD_KEY,
  everyRun: false,
  ...values,
});
const keysIn = (tx: Transaction, workspaceId: string) =>
  tx.select().from(channelKeys).where(eq(channelKeys.workspaceId, workspaceId)).orderBy(channelKeys.version);
const verdictOf = async (ctx: Ctx, runId: string) => (await getRun(ctx, runId)).verdict;

describe("a channel key", () => {
  test("makes a refused log usable, with the very figures of the log under its usual titles", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const [odd = "", plain = ""] = await attachAll(tx, side, [oddLog(), plainLog()]);
    const before = await verdictOf(side.tester, odd);
    expect(before?.result.reasons[0]?.code).toBe("no_time_column");
    const saved = await saveChannelKey(side.tester, keyOf(odd));
    expect(saved).toMatchObject({ version: 1, judgedAgain: [1], cited: [] });
    const job = { workspaceId: side.workspaceId, runId: odd };
    expect(await hasPendingJob(tx, { name: "judge-run", data: job })).toBe(true);
    expect((await getRun(side.tester, odd)).run.state).toBe("waiting");
    await judge(tx, side, odd);
    const view = await getRun(side.tester, odd);
    expect(view.run.state).toBe("usable");
    expect(view.channelKey).toEqual({ name: "Black box", version: 1 });
    expect(view.verdict?.inputSha256).not.toBe(before?.inputSha256);
    const usual = await verdictOf(side.tester, plain);
    expect(view.verdict?.result.peak).toEqual(usual?.result.peak);
    expect(usual?.result.peak?.engine_kw).toBeGreaterThan(0);
    const entries = await tx.select().from(ledger).where(eq(ledger.event, "channel_key.saved"));
    expect(entries.at(-1)?.data).toMatchObject({ name: "Black box", version: 1, runs: [1] });
  });

  test("does not make a result unseen: a run set aside while it waits anew says that its result was visible", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const [odd = ""] = await attachAll(tx, side, [oddLog()]);
    await saveChannelKey(side.tester, keyOf(odd));
    const { run } = await getRun(side.tester, odd);
    expect(run.state).toBe("waiting");
    const change = { runId: odd, rowVersion: run.rowVersion, reason: "a gust" };
    expect((await setRunAside(side.tester, change)).resultWasVisible).toBe(true);
  });

  test("keeps its old versions, and is saved on what one looked at only", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const [odd = ""] = await attachAll(tx, side, [oddLog()]);
    await saveChannelKey(side.tester, keyOf(odd));
    const mph = {
      ...ODD_KEY,
      columns: { ...ODD_KEY.columns, "Rad h": { channel: "wheel_speed_undriven", unit: "mph" } },
    };
    const second = keyOf(odd, { key: mph, basedOnVersion: 1, name: "Black box 2" });
    await expect(saveChannelKey(side.calibrator, keyOf(odd, { key: mph }))).rejects.toThrow(ConflictError);
    expect(await saveChannelKey(side.calibrator, second)).toMatchObject({ version: 2, judgedAgain: [1] });
    const kept = await keysIn(tx, side.workspaceId);
    expect(kept.map(({ version, name }) => [version, name])).toEqual([
      [1, "Black box"],
      [2, "Black box 2"],
    ]);
    expect(kept.map(({ key }) => key.columns?.["Rad h"]?.unit)).toEqual(["km/h", "mph"]);
    const page = await getChannelKeyPage(side.tester, odd);
    expect(page.versions.map(({ version }) => version)).toEqual([2, 1]);
    expect(page.used).toMatchObject({ version: 2 });
    // 141.56 km/h at most (tests/golden/README.md), taken as miles an hour: × 1.609344.
    expect(page.preview.columns.find(({ title }) => title === "Rad h")?.max).toBeCloseTo(
      141.56 * 1.609344,
      0,
    );
    const back = await applyChannelKey(side.tester, {
      runId: odd,
      channelKeyId: kept[0]?.id ?? "",
      everyRun: false,
    });
    expect(back.judgedAgain).toEqual([1]);
    await judge(tx, side, odd);
    expect((await getRun(side.tester, odd)).run.state).toBe("usable");
    const none = { runId: odd, channelKeyId: null, everyRun: false };
    await applyChannelKey(side.tester, none);
    expect((await applyChannelKey(side.tester, none)).judgedAgain).toEqual([]);
    await judge(tx, side, odd);
    expect((await getRun(side.tester, odd)).run.state).toBe("refused");
  });

  test("is used for every run with the header that no final decision rests on", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const logs = [oddLog(0), oddLog(1), oddLog(2), plainLog()];
    const [first = "", , third = "", plain = ""] = await attachAll(tx, side, logs);
    await citeRun(tx, side, third);
    const saved = await saveChannelKey(side.tester, keyOf(first, { everyRun: true }));
    expect(saved).toMatchObject({ judgedAgain: [1, 2], cited: [3] });
    const rows = await tx
      .select()
      .from(runs)
      .where(eq(runs.workspaceId, side.workspaceId))
      .orderBy(runs.number);
    expect(rows.map(({ channelKeyId }) => channelKeyId)).toEqual([
      saved.channelKeyId,
      saved.channelKeyId,
      null,
      null,
    ]);
    await expect(
      applyChannelKey(side.tester, { runId: third, channelKeyId: saved.channelKeyId, everyRun: false }),
    ).rejects.toMatchObject({ code: "run_cited" });
    await expect(
      applyChannelKey(side.tester, { runId: plain, channelKeyId: saved.channelKeyId, everyRun: false }),
    ).rejects.toMatchObject({ code: "key_does_not_fit" });
  });

  test("makes what was computed from the run stale, and the page says why", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const [odd = ""] = await attachAll(tx, side, [oddLog()]);
    const question = {
      ...{ workspaceId: side.workspaceId, programmeId: side.programmeId, nullTestRoadDayId: null },
      ...{ revisionAId: side.r1, revisionBId: side.r2, settings: toCampaignSettings(STANDARD_SETTINGS) },
    };
    const before = await currentInput(tx, question);
    await saveChannelKey(side.tester, keyOf(odd));
    const after = await currentInput(tx, question);
    expect(after.inputSha256).not.toBe(before.inputSha256);
    expect(after.runs[0]?.channelKey?.columns).toMatchObject(ODD_KEY.columns ?? {});
    expect(whatMoved(before.input, after.input, after.runs)).toEqual(["Run 1 was changed: channel key."]);
  });

  test("with a channel missing is not saved, and says which", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const [odd = ""] = await attachAll(tx, side, [oddLog()]);
    const withoutSpeed = { time: ODD_KEY.time, columns: { Kurbel: { channel: "engine_speed" } } };
    const saving = saveChannelKey(side.tester, keyOf(odd, { key: withoutSpeed }));
    await expect(saving).rejects.toThrow(/Still missing: a road speed/);
    await expect(saveChannelKey(side.tester, keyOf(odd, { key: {} }))).rejects.toThrow(InvalidInputError);
    expect(await keysIn(tx, side.workspaceId)).toEqual([]);
    const { preview, missing } = await previewRun(side.tester, { runId: odd, key: {} });
    expect(preview.columns.map(({ title }) => title)).toContain("Fahrerwunsch");
    expect(missing).toBe(preview.refusal?.message);
  });

  test("is nobody's outside the workspace, and not for a reader, a lead or an admin", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const other = await createRoadSide(tx, files.store);
    const [odd = ""] = await attachAll(tx, side, [oddLog()]);
    const { channelKeyId } = await saveChannelKey(side.tester, keyOf(odd));
    const apply = { runId: odd, channelKeyId, everyRun: false };
    for (const attempt of [
      () => getChannelKeyPage(other.tester, odd),
      () => previewRun(other.tester, { runId: odd, key: {} }),
      () => saveChannelKey(other.tester, keyOf(odd)),
      () => applyChannelKey(other.tester, apply),
      () => listRefusedRows(other.tester, odd),
    ])
      await expect(attempt()).rejects.toThrow(NotFoundError);
    const [theirs = ""] = await attachAll(tx, other, [oddLog()]);
    await expect(applyChannelKey(other.tester, { ...apply, runId: theirs })).rejects.toThrow(NotFoundError);
    for (const role of ["reader", "lead", "admin"] as const) {
      const { workspaceId } = side;
      const ctx = await createMember(tx, { workspaceId, roles: [role], store: files.store });
      await expect(saveChannelKey(ctx, keyOf(odd))).rejects.toThrow(ForbiddenError);
      await expect(applyChannelKey(ctx, apply)).rejects.toThrow(ForbiddenError);
      await expect(getChannelKeyPage(ctx, odd)).rejects.toThrow(ForbiddenError);
    }
  });
});

describe("reading an upload before it is attached", () => {
  test("tells what is in doubt, and offers the key that fits, with which it is then attached", async ({
    tx,
  }) => {
    const side = await createRoadSide(tx, files.store);
    const { roadDayId } = side;
    const [odd = ""] = await attachAll(tx, side, [oddLog()]);
    const uploadId = await uploadBytes(side.tester, "log", "next.csv", oddLog(5));
    const unknown = await readUpload(side.tester, { uploadId, roadDayId });
    expect(unknown).toMatchObject({ columnCount: 5, fitting: null, withKey: null, found: [] });
    expect(unknown.inDoubt[0]).toContain("No column of this log is a time");
    const { channelKeyId } = await saveChannelKey(side.tester, keyOf(odd));
    const reading = await readUpload(side.tester, { uploadId, roadDayId });
    expect(reading.fitting).toEqual({ id: channelKeyId, name: "Black box", version: 1 });
    // Truth of this log (tests/golden/README.md): 25 Hz, 1030 rows.
    expect(reading.withKey).toMatchObject({ rateHz: 25, rowsRead: 1030, leftOut: [], inDoubt: [] });
    expect(reading.withKey?.found).toEqual([
      "undriven wheel speed",
      "engine speed",
      "pedal",
      "manifold pressure, absolute",
    ]);
    const { runId } = await attachLog(side.tester, side, oddLog(7), { driveOrder: 2, channelKeyId });
    await judge(tx, side, runId);
    expect(await getRun(side.tester, runId)).toMatchObject({
      run: { state: "usable" },
      channelKey: { version: 1 },
    });
    await expect(
      attachLog(side.tester, side, plainLog(), { driveOrder: 3, channelKeyId }),
    ).rejects.toMatchObject({ code: "key_does_not_fit" });
  });

  test("is for the person who sends it, once all has arrived", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { roadDayId } = side;
    const uploadId = await uploadBytes(side.tester, "log", "a.csv", plainLog());
    await expect(readUpload(side.otherTester, { uploadId, roadDayId })).rejects.toThrow(NotFoundError);
    expect(await readUpload(side.tester, { uploadId, roadDayId })).toMatchObject({ wholeFile: true });
  });
});

describe("rows that a log went on without", () => {
  test("are told on the run's page, first five, and all can be had as a file", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const lines = plainLog().toString("utf8").trimEnd().split("\n");
    const bad = [100, 200, 300, 400, 500, 600, 700];
    for (const line of bad) lines[line - 1] = (lines[line - 1] ?? "").replace(/^[^;]*/, "=1+2");
    const [runId = ""] = await attachAll(tx, side, [Buffer.from(`${lines.join("\n")}\n`)]);
    const verdict = await verdictOf(side.tester, runId);
    expect(verdict?.traces?.refusedRows).toMatchObject({ total: 7, atLeast: false });
    expect(verdict?.traces?.refusedRows?.first.map(({ row, raw }) => [row, raw])).toEqual(
      bad.slice(0, 5).map((row) => [row, "=1+2"]),
    );
    const { csv, fileName } = await listRefusedRows(side.tester, runId);
    expect(fileName).toBe("run-1-refused-rows.csv");
    const [head, ...rows] = csv.trimEnd().split("\r\n");
    expect(head).toBe("row,column,raw text,reason");
    expect(rows).toEqual(bad.map((row) => `${row},Time [s],"'=1+2",has no readable time`));
  });

  test("never run as a formula in a spreadsheet, and plain numbers stay as the log has them", () => {
    const cell = (raw: string) => refusedRowsCsv([{ row: 2, raw, reason: "r" }]).split("\r\n")[1];
    // OWASP ASVS 5.0, 1.2.10: the signs that begin a formula.
    for (const raw of ["=1", "+a", "-a", "@a", "\ta"]) expect(cell(raw)).toMatch(/^2,,"?'/);
    for (const raw of ["-12.5", "+3", "0.5"]) expect(cell(raw)).toBe(`2,,${raw},r`);
    expect(cell("-12,5")).toBe('2,,"-12,5",r');
    expect(
      refusedRowsCsv(Array(3).fill({ row: 1, reason: "r" }), 2)
        .trimEnd()
        .split("\r\n"),
    ).toHaveLength(4);
  });
});
