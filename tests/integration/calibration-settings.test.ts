import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { calibrationSettings, ledger } from "@/db/tables";
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from "@/lib/errors";
import { getCalibrationSetting } from "@/lib/services/calibration-settings/get";
import { saveAxisLinks } from "@/lib/services/calibration-settings/save-links";
import { saveRelevanceMarks } from "@/lib/services/calibration-settings/save-marks";
import { saveChecksumRegions } from "@/lib/services/calibration-settings/save-regions";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import { bringRevisionBack, setRevisionAside } from "@/lib/services/revisions/set-aside";
import { addSmallRevision, createCalibrationScene, doJobs } from "@/tests/support/calibration-scene";
import { test } from "@/tests/support/database";
import { AT, smallBytes } from "@/tests/support/small-calibration";
import { createTestStore } from "@/tests/support/store";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

const MARK = { set: "function" as const, name: "limiter", relevance: "safety" as const, note: "" };
const LINK = { quantity: "engine_speed", channel: "engine_speed", by: "hand" as const };

/** A plain sum over the two words of limiter and gain; `expected` is worked out here, byte by byte. */
const region = (expected: number) => ({
  algorithm: "sum16" as const,
  name: "values",
  from: AT.limit,
  to: AT.limit + 3,
  storedAt: null,
  expected,
  byteOrder: "little" as const,
  parameters: { wordBytes: 1 as const, wordOrder: "little" as const, complement: "none" as const },
});
const byteSum = () =>
  smallBytes()
    .subarray(0, 4)
    .reduce((sum, byte) => sum + byte, 0);

describe("settings of a calibration", () => {
  test("are versioned by kind, and saved on what one looked at only", async ({ tx }) => {
    const { lead, calibrator, tester, programmeId, workspaceId } = await createCalibrationScene(
      tx,
      files.store,
    );
    const place = { programmeId, basedOnVersion: 0 };
    expect(await saveRelevanceMarks(lead, { ...place, marks: [MARK] })).toEqual({ version: 1 });
    expect(await saveRelevanceMarks(lead, { ...place, basedOnVersion: 1, marks: [MARK] })).toEqual({
      version: 1,
    });
    await expect(saveRelevanceMarks(lead, { ...place, marks: [] })).rejects.toThrow(ConflictError);
    expect(await saveRelevanceMarks(lead, { ...place, basedOnVersion: 1, marks: [] })).toEqual({
      version: 2,
    });
    expect(await saveAxisLinks(tester, { ...place, links: [LINK] })).toEqual({ version: 1 });
    expect(await saveChecksumRegions(calibrator, { ...place, regions: [region(1)] })).toEqual({ version: 1 });
    const get = (kind: "relevance_marks" | "axis_links" | "checksum_regions", version?: number) =>
      getCalibrationSetting(tester, { programmeId, kind, version });
    const marks = await get("relevance_marks");
    expect(marks).toMatchObject({ newestVersion: 2, shown: { version: 2, content: [] } });
    expect(marks.versions.map(({ version }) => version)).toEqual([2, 1]);
    expect((await get("relevance_marks", 1)).shown.content).toEqual([MARK]);
    expect((await get("axis_links")).shown).toMatchObject({ version: 1, content: [LINK] });
    expect((await get("checksum_regions")).shown).toMatchObject({ version: 1, content: [region(1)] });
    await expect(get("axis_links", 7)).rejects.toThrow(NotFoundError);
    const entries = await tx.select().from(ledger).where(eq(ledger.workspaceId, workspaceId));
    expect(entries.map(({ event }) => event).filter((event) => event.endsWith("versioned"))).toEqual([
      "relevance_marks.versioned",
      "relevance_marks.versioned",
      "axis_links.versioned",
      "checksum_regions.versioned",
    ]);
  });

  test("are refused by role, for strangers, and where they contradict themselves", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { lead, calibrator, tester, reader, admin, programmeId } = scene;
    const place = { programmeId, basedOnVersion: 0 };
    const marks = { programmeId, kind: "relevance_marks" as const };
    for (const ctx of [calibrator, tester, reader, admin])
      await expect(saveRelevanceMarks(ctx, { ...place, marks: [] })).rejects.toThrow(ForbiddenError);
    for (const ctx of [lead, reader, admin])
      await expect(saveAxisLinks(ctx, { ...place, links: [] })).rejects.toThrow(ForbiddenError);
    for (const ctx of [tester, reader, admin])
      await expect(saveChecksumRegions(ctx, { ...place, regions: [] })).rejects.toThrow(ForbiddenError);
    await expect(getCalibrationSetting(reader, marks)).rejects.toThrow(ForbiddenError);
    const stranger = await createCalibrationScene(tx, files.store);
    await expect(saveRelevanceMarks(stranger.lead, { ...place, marks: [] })).rejects.toThrow(NotFoundError);
    await expect(saveAxisLinks(stranger.tester, { ...place, links: [] })).rejects.toThrow(NotFoundError);
    await expect(saveChecksumRegions(stranger.lead, { ...place, regions: [] })).rejects.toThrow(
      NotFoundError,
    );
    await expect(getCalibrationSetting(stranger.lead, marks)).rejects.toThrow(NotFoundError);
    await expect(saveRelevanceMarks(lead, { ...place, marks: [MARK, MARK] })).rejects.toThrow(
      InvalidInputError,
    );
    await expect(saveAxisLinks(tester, { ...place, links: [LINK, LINK] })).rejects.toThrow(InvalidInputError);
    await expect(saveChecksumRegions(lead, { ...place, regions: [region(1), region(2)] })).rejects.toThrow(
      InvalidInputError,
    );
    const backwards = { ...region(1), to: AT.limit - 1 };
    await expect(saveChecksumRegions(lead, { ...place, regions: [backwards] })).rejects.toThrow(
      /before the first/,
    );
  });

  test("of two saved at once one is first, the other is told", async ({ database }) => {
    const { db } = database;
    const { lead, programmeId } = await createCalibrationScene(db, files.store);
    const save = (note: string) =>
      saveRelevanceMarks(lead, { programmeId, basedOnVersion: 0, marks: [{ ...MARK, note }] });
    const outcomes = await Promise.allSettled([save("one"), save("two"), save("three")]);
    expect(outcomes.filter(({ status }) => status === "fulfilled")).toHaveLength(1);
    for (const outcome of outcomes)
      if (outcome.status === "rejected") expect(outcome.reason).toBeInstanceOf(ConflictError);
    const kept = await db
      .select()
      .from(calibrationSettings)
      .where(eq(calibrationSettings.programmeId, programmeId));
    expect(kept).toHaveLength(1);
  });

  test("of checksums are held against every image of the programme", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { calibrator, lead, programmeId } = scene;
    const revisionId = await addSmallRevision(scene, {});
    await doJobs(scene);
    expect((await getRevisionChanges(lead, revisionId)).integrity).toEqual([]);
    const good = { programmeId, basedOnVersion: 0, regions: [region(byteSum())] };
    await saveChecksumRegions(calibrator, good);
    expect((await getRevisionChanges(lead, revisionId)).integrity).toBeNull();
    await doJobs(scene);
    expect((await getRevisionChanges(lead, revisionId)).integrity).toMatchObject([
      { name: "values", state: "holds" },
    ]);
    await saveChecksumRegions(calibrator, { ...good, basedOnVersion: 1, regions: [region(byteSum() + 1)] });
    await doJobs(scene);
    expect((await getRevisionChanges(lead, revisionId)).integrity).toMatchObject([
      { name: "values", state: "broken" },
    ]);
  });

  test("are held against a draft that comes back after they were saved", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { calibrator, lead, programmeId } = scene;
    const revisionId = await addSmallRevision(scene, {});
    await doJobs(scene);
    const step = { revisionId, reason: "the wrong file" };
    await setRevisionAside(calibrator, step);
    await saveChecksumRegions(calibrator, {
      programmeId,
      basedOnVersion: 0,
      regions: [region(byteSum() + 1)],
    });
    await bringRevisionBack(calibrator, { ...step, reason: "the right file after all" });
    await doJobs(scene);
    expect((await getRevisionChanges(lead, revisionId)).integrity).toMatchObject([{ state: "broken" }]);
  });
});
