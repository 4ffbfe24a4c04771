import { eq, sql } from "drizzle-orm";
import { describe, expect } from "vitest";
import type { Queryable } from "@/db/client";
import { comparisons, gatePlans, ledger, programmes, vehicleSheets } from "@/db/tables";
import { startingPlan } from "@/lib/gates/starting-plan";
import type { Role } from "@/lib/policy/actor";
import { getGatePlan } from "@/lib/services/gate-plans/get";
import { saveGatePlan } from "@/lib/services/gate-plans/save";
import { createProgramme } from "@/lib/services/programmes/create";
import { archiveProgramme, editProgramme } from "@/lib/services/programmes/edit";
import { listProgrammes } from "@/lib/services/programmes/list";
import { loadProgramme } from "@/lib/services/programmes/load";
import { endShare, listShares, shareProgramme } from "@/lib/services/programmes/share";
import { getVehicleSheet } from "@/lib/services/vehicle-sheets/get";
import { saveVehicleSheet } from "@/lib/services/vehicle-sheets/save";
import { test } from "@/tests/support/database";
import {
  createMember,
  createProgrammeRow,
  createRevisionRow,
  createWorkspaceRow,
  SHEET,
} from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

const member = (db: Queryable, workspaceId: string, ...roles: Role[]) =>
  createMember(db, { workspaceId, roles, store: noStore });

const NEW = { name: "Hatch, petrol", goal: "More torque at 2500", sheet: SHEET };

async function shop(db: Queryable) {
  const workspaceId = await createWorkspaceRow(db);
  const lead = await member(db, workspaceId, "lead");
  const { programmeId } = await createProgramme(lead, NEW);
  return { workspaceId, lead, programmeId };
}

const entries = (db: Queryable, workspaceId: string) =>
  db.select().from(ledger).where(eq(ledger.workspaceId, workspaceId)).orderBy(ledger.seq);

/** A day so many days from today, by the database. */
async function day(db: Queryable, offset: number): Promise<string> {
  const answer = await db.execute<{ day: string }>(
    sql`select to_char((now() at time zone 'UTC')::date + ${offset}::int, 'YYYY-MM-DD') as day`,
  );
  return answer.rows[0].day;
}

describe("a new programme", () => {
  test("has sheet and plan version 1 and a ledger entry, all in one transaction", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    const loaded = await loadProgramme(lead, programmeId);
    expect(loaded.sheet).toMatchObject({ version: 1, figures: SHEET });
    expect(loaded.plan).toMatchObject({ version: 1, plan: startingPlan(SHEET) });
    expect(await entries(tx, workspaceId)).toMatchObject([
      { event: "programme.created", subjectId: programmeId, programmeId, data: { name: NEW.name } },
    ]);
  });

  test("takes figures as they are typed: decimal comma, empty for not known", async ({ tx }) => {
    const lead = await member(tx, await createWorkspaceRow(tx), "calibrator");
    const sheet = {
      ...SHEET,
      displacementL: "1,4",
      massPartsKg: [{ part: "car as weighed", value: "1 286,5", uncertainty: "" }],
      rollingCircumferenceM: { value: "", uncertainty: "" },
      gearRatios: "3,62 2.11; 1.44",
      finalDrive: " ",
    };
    const { programmeId } = await createProgramme(lead, { ...NEW, sheet });
    expect((await loadProgramme(lead, programmeId)).sheet.figures).toMatchObject({
      displacementL: 1.4,
      massPartsKg: [{ part: "car as weighed", value: 1286.5, uncertainty: null }],
      rollingCircumferenceM: null,
      gearRatios: [3.62, 2.11, 1.44],
      finalDrive: null,
    });
  });

  for (const [what, wrong] of [
    ["a mass in grams", { massPartsKg: [{ part: "car", value: 1_486_000, uncertainty: null }] }],
    ["no mass", { massPartsKg: [] }],
    ["a redline below idle", { idleRpm: 7000 }],
    ["an uncertainty without its figure", { engineInertiaKgm2: { value: null, uncertainty: 1 } }],
    ["half of a speed at an engine speed", { speedAtRpm: { gear: 3, rpm: null, speedKmh: 60 } }],
    ["a word for a number", { redlineRpm: "many" }],
  ] as const) {
    test(`is refused with ${what}, and leaves nothing`, async ({ tx }) => {
      const workspaceId = await createWorkspaceRow(tx);
      const lead = await member(tx, workspaceId, "lead");
      const sheet = { ...SHEET, ...wrong } as typeof SHEET;
      await expect(createProgramme(lead, { ...NEW, sheet })).rejects.toThrow();
      expect(await tx.select().from(programmes)).toEqual([]);
      expect(await entries(tx, workspaceId)).toEqual([]);
    });
  }

  test("does not take what was not asked for", async ({ tx }) => {
    const { lead } = await shop(tx);
    const planted = { ...NEW, standingRevisionId: lead.userId, workspaceId: lead.userId, sample: true };
    const { programmeId } = await createProgramme(lead, planted);
    const { programme } = await loadProgramme(lead, programmeId);
    expect(programme).toMatchObject({ standingRevisionId: null, sample: false });
  });
});

describe("another workspace", () => {
  test("finds nothing: no programme, no sheet, no plan, no share", async ({ tx }) => {
    const { programmeId } = await shop(tx);
    const foreign = await member(tx, await createWorkspaceRow(tx), "lead", "admin", "calibrator");
    const figures = SHEET;
    for (const attempt of [
      () => loadProgramme(foreign, programmeId),
      () => getVehicleSheet(foreign, programmeId),
      () => getGatePlan(foreign, programmeId, 1),
      () => saveVehicleSheet(foreign, { programmeId, basedOnVersion: 1, figures }),
      () => saveGatePlan(foreign, { programmeId, basedOnVersion: 1, plan: startingPlan() }),
      () => editProgramme(foreign, { programmeId, rowVersion: 1, name: "Mine now", goal: "" }),
      () => archiveProgramme(foreign, { programmeId, archived: true }),
      () => listShares(foreign, programmeId),
      () => shareProgramme(foreign, { programmeId, userId: foreign.userId, expiresOn: "2999-01-01" }),
      () => endShare(foreign, { programmeId, userId: foreign.userId }),
    ])
      await expect(attempt()).rejects.toMatchObject({ status: 404 });
    expect((await listProgrammes(foreign)).programmes).toEqual([]);
  });
});

describe("the vehicle sheet", () => {
  const heavier = { ...SHEET, massPartsKg: [{ part: "car", value: 1500, uncertainty: 5 }] };

  test("gains a version with old and new in the ledger; the old one stays readable", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    const saved = await saveVehicleSheet(lead, { programmeId, basedOnVersion: 1, figures: heavier });
    expect(saved).toEqual({ version: 2 });
    const [, entry] = await entries(tx, workspaceId);
    expect(entry).toMatchObject({
      event: "vehicle.versioned",
      data: {
        version: 2,
        old: { massPartsKg: SHEET.massPartsKg },
        new: { massPartsKg: heavier.massPartsKg },
      },
    });
    expect(Object.keys(entry.data.old as object)).toEqual(["massPartsKg"]);
    expect((await getVehicleSheet(lead, programmeId, 1)).sheet.figures).toEqual(SHEET);
    await expect(getVehicleSheet(lead, programmeId, 3)).rejects.toMatchObject({ status: 404 });
  });

  test("saved unchanged adds no version", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    expect(await saveVehicleSheet(lead, { programmeId, basedOnVersion: 1, figures: SHEET })).toEqual({
      version: 1,
    });
    expect(await entries(tx, workspaceId)).toHaveLength(1);
  });

  test("has comparisons of its programme computed anew, and no others", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    const made = { workspaceId, authorId: lead.userId };
    const compare = async (inProgramme: string) => {
      const [a, b] = [
        await createRevisionRow(tx, { ...made, programmeId: inProgramme, number: 1 }),
        await createRevisionRow(tx, { ...made, programmeId: inProgramme, number: 2 }),
      ];
      const settings = { factor: "auto", rpm_step: 50, level: 0.95, seed: 1 } as const;
      const [row] = await tx
        .insert(comparisons)
        .values({
          ...{ workspaceId, programmeId: inProgramme, settings, settingsSha256: "s" },
          ...{ revisionAId: a, revisionBId: b, createdBy: lead.userId },
        })
        .returning();
      return row.id;
    };
    const own = await compare(programmeId);
    await compare(await createProgrammeRow(tx, { workspaceId, createdBy: lead.userId }));
    await saveVehicleSheet(lead, { programmeId, basedOnVersion: 1, figures: heavier });
    const jobs = await tx.execute<{ id: string }>(
      sql`select distinct data->>'comparisonId' as id from pgboss.job where name = 'compute-comparison'`,
    );
    expect(jobs.rows).toEqual([{ id: own }]);
  });

  test("saved by two at once keeps one version and tells the other", async ({ database: { db } }) => {
    const { lead, programmeId } = await shop(db);
    const outcomes = await Promise.allSettled(
      [1501, 1502, 1503].map((value) =>
        saveVehicleSheet(lead, {
          programmeId,
          basedOnVersion: 1,
          figures: { ...SHEET, massPartsKg: [{ part: "car", value, uncertainty: null }] },
        }),
      ),
    );
    expect(outcomes.filter((outcome) => outcome.status === "fulfilled")).toHaveLength(1);
    const refused = outcomes.filter((outcome) => outcome.status === "rejected");
    expect(refused.map((outcome) => outcome.reason.status)).toEqual([409, 409]);
    expect(await db.select().from(vehicleSheets)).toHaveLength(2);
  });
});

describe("the gate plan", () => {
  test("gains a version naming the gates that changed", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    const plan = startingPlan();
    const gates = plan.gates.map((gate) =>
      gate.kind === "gain" ? { ...gate, level: "must" as const } : gate,
    );
    await saveGatePlan(lead, { programmeId, basedOnVersion: 1, plan: { plan: 1, gates } });
    const [, entry] = await entries(tx, workspaceId);
    expect(entry.event).toBe("plan.versioned");
    expect(Object.keys(entry.data.new as object)).toEqual(["gain"]);
    expect((await getGatePlan(lead, programmeId, 1)).plan.plan).toEqual(plan);
    const stale = saveGatePlan(lead, { programmeId, basedOnVersion: 1, plan });
    await expect(stale).rejects.toMatchObject({ code: "plan_moved" });
  });

  test("saved unchanged adds no version, also for every gate there can be", async ({ tx }) => {
    const { lead, programmeId } = await shop(tx);
    const plan = startingPlan();
    expect(await saveGatePlan(lead, { programmeId, basedOnVersion: 1, plan })).toEqual({ version: 1 });
    expect(await tx.select().from(gatePlans)).toHaveLength(1);
  });

  for (const role of ["calibrator", "tester", "admin", "reader"] as const) {
    test(`is not for a ${role} to change`, async ({ tx }) => {
      const { workspaceId, programmeId } = await shop(tx);
      const ctx = await member(tx, workspaceId, role);
      const save = saveGatePlan(ctx, { programmeId, basedOnVersion: 1, plan: startingPlan() });
      await expect(save).rejects.toMatchObject({ status: 403 });
    });
  }
});

describe("a programme's name", () => {
  test("is changed only by whoever saw the newest", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    await editProgramme(lead, { programmeId, rowVersion: 1, name: "Renamed", goal: "" });
    const late = editProgramme(lead, { programmeId, rowVersion: 1, name: "Too late", goal: "" });
    await expect(late).rejects.toMatchObject({ status: 409, details: { name: "Renamed" } });
    expect((await entries(tx, workspaceId)).at(-1)).toMatchObject({
      event: "programme.updated",
      data: { old: { name: NEW.name }, new: { name: "Renamed" } },
    });
  });
});

describe("an archived programme", () => {
  test("takes no new sheet or plan, stays readable, and comes back", async ({ tx }) => {
    const { lead, programmeId } = await shop(tx);
    await archiveProgramme(lead, { programmeId, archived: true });
    const sheet = saveVehicleSheet(lead, {
      programmeId,
      basedOnVersion: 1,
      figures: { ...SHEET, idleRpm: 900 },
    });
    await expect(sheet).rejects.toMatchObject({ code: "programme_archived" });
    expect((await loadProgramme(lead, programmeId)).programme.archivedAt).toBeInstanceOf(Date);
    await archiveProgramme(lead, { programmeId, archived: false });
    await saveVehicleSheet(lead, { programmeId, basedOnVersion: 1, figures: { ...SHEET, idleRpm: 900 } });
  });
});

describe("a share", () => {
  test("shows a reader the programme and its released revisions until its last day", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    const reader = await member(tx, workspaceId, "reader");
    const made = { workspaceId, programmeId, authorId: lead.userId };
    const released = await createRevisionRow(tx, { ...made, number: 1, state: "superseded" });
    await createRevisionRow(tx, { ...made, number: 2, state: "draft", title: "not for readers" });
    await expect(loadProgramme(reader, programmeId)).rejects.toMatchObject({ status: 403 });
    expect((await listProgrammes(reader)).programmes).toEqual([]);

    await shareProgramme(lead, { programmeId, userId: reader.userId, expiresOn: await day(tx, 0) });
    const seen = await listProgrammes(reader);
    expect(seen.programmes).toMatchObject([{ id: programmeId, inFlight: [] }]);
    expect(JSON.stringify(seen)).not.toContain("not for readers");
    expect(released).toBeTruthy();

    await tx.execute(sql`update programme_shares set expires_on = expires_on - 1`);
    await expect(loadProgramme(reader, programmeId)).rejects.toMatchObject({ status: 403 });
  });

  test("is for readers of this workspace, not past, and can be ended", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    const reader = await member(tx, workspaceId, "reader");
    const tester = await member(tx, workspaceId, "tester");
    const share = (userId: string, expiresOn: string) =>
      shareProgramme(lead, { programmeId, userId, expiresOn });
    await expect(share(tester.userId, await day(tx, 9))).rejects.toMatchObject({ code: "not_a_reader" });
    await expect(share(reader.userId, await day(tx, -1))).rejects.toMatchObject({ code: "day_past" });
    await share(reader.userId, await day(tx, 9));
    await share(reader.userId, await day(tx, 19));
    expect((await listShares(lead, programmeId)).shares).toMatchObject([
      { userId: reader.userId, inForce: true },
    ]);
    await endShare(lead, { programmeId, userId: reader.userId });
    await expect(loadProgramme(reader, programmeId)).rejects.toMatchObject({ status: 403 });
  });
});

describe("what waits", () => {
  test("is told to the person whose step it is", async ({ tx }) => {
    const { workspaceId, lead, programmeId } = await shop(tx);
    const calibrator = await member(tx, workspaceId, "calibrator");
    const tester = await member(tx, workspaceId, "tester");
    const made = { workspaceId, programmeId, authorId: calibrator.userId };
    await createRevisionRow(tx, { ...made, number: 1, state: "draft" });
    await createRevisionRow(tx, { ...made, number: 2, state: "validating" });
    await createRevisionRow(tx, { ...made, number: 3, state: "in_review", submitterId: calibrator.userId });
    const steps = async (ctx: typeof lead) =>
      (await listProgrammes(ctx)).waiting.map((line) => [line.revisionNumber, line.step]);
    expect(await steps(lead)).toEqual([[3, "decide"]]);
    expect(await steps(calibrator)).toEqual([[1, "start validating"]]);
    expect(await steps(tester)).toEqual([[2, "drive its runs"]]);
  });
});
