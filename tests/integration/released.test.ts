import { eq } from "drizzle-orm";
import { describe, expect } from "vitest";
import { comparisons, decisions, revisions } from "@/db/tables";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import { getProgramme } from "@/lib/services/programmes/get";
import { shareProgramme } from "@/lib/services/programmes/share";
import { getRevision } from "@/lib/services/revisions/get";
import { getRun } from "@/lib/services/runs/get";
import { test } from "@/tests/support/database";
import { createRunRow, createScene, type Scene } from "@/tests/support/decision-scene";
import { createMember, createRevisionRow } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

/** A reader with whom the programme of a scene is shared. */
async function createReader(scene: Scene) {
  const { db, workspaceId, programmeId, lead } = scene;
  const reader = await createMember(db, { workspaceId, roles: ["reader"], store: noStore });
  await shareProgramme(lead, { programmeId, userId: reader.userId, expiresOn: "2999-01-01" });
  return reader;
}

/** A decision's row that cites a run; only what lists of decisions show of it matters here. */
async function createDecisionRow(
  scene: Scene,
  values: { revisionId: string; kind: "hold" | "promote"; recordNumber: number; runId: string },
) {
  const { db, workspaceId, programmeId, lead, author } = scene;
  const { runId, ...rest } = values;
  await db.insert(decisions).values({
    ...rest,
    workspaceId,
    programmeId,
    reason: `reason of ${values.kind}`,
    deciderId: lead.userId,
    deciderName: lead.userName,
    authorId: author.userId,
    meaning: "invented for a test",
    reauthMethod: "passphrase",
    decidedAt: new Date(),
    evidence: { runs: [{ runId }] } as never,
    recordSha256: String(values.recordNumber).padStart(64, "0"),
  });
}

describe("a reader of a shared programme", () => {
  test("sees decisions that released something, and no hold before them", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const reader = await createReader(scene);
    const { standingId, programmeId } = scene;
    const runId = await createRunRow(scene, { revisionId: standingId, number: 9 });
    await createDecisionRow(scene, { revisionId: standingId, kind: "hold", recordNumber: 901, runId });
    await createDecisionRow(scene, { revisionId: standingId, kind: "promote", recordNumber: 902, runId });
    const kinds = (rows: { kind: string }[]) => rows.map((row) => row.kind);

    expect(kinds((await getRevision(scene.lead, standingId)).decisions)).toEqual(["promote", "hold"]);
    expect(kinds((await getRevision(reader, standingId)).decisions)).toEqual(["promote"]);
    const { lineage } = await getProgramme(reader, programmeId);
    expect(lineage.map((row) => [row.number, kinds(row.decisions)])).toEqual([[1, ["promote"]]]);
    const seen = await getRun(reader, runId);
    expect(seen.records.map((row) => row.recordNumber)).toEqual([902]);
    expect((await getRun(scene.lead, runId)).records.map((row) => row.recordNumber)).toEqual([901, 902]);
  });

  test("sees of a run no comparison with a side that is not released", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const reader = await createReader(scene);
    const runId = await createRunRow(scene, { revisionId: scene.standingId, number: 9 });
    expect((await getRun(scene.lead, runId)).comparisons).toMatchObject([{ a: 1, b: 2 }]);
    expect((await getRun(reader, runId)).comparisons).toEqual([]);
    await db.update(revisions).set({ state: "superseded" }).where(eq(revisions.id, scene.candidateId));
    expect((await getRun(reader, runId)).comparisons).toMatchObject([{ a: 1, b: 2 }]);
    expect(await db.select().from(comparisons)).toHaveLength(1);
  });

  test("neither sees an unreleased parent nor what differs from it", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const reader = await createReader(scene);
    const { workspaceId, programmeId, author, candidateId } = scene;
    const childId = await createRevisionRow(db, {
      workspaceId,
      programmeId,
      number: 3,
      authorId: author.userId,
      parentId: candidateId,
      state: "superseded",
    });
    expect((await getRevision(author, childId)).parent).toMatchObject({ number: 2 });
    expect((await getRevision(reader, childId)).parent).toBeNull();
    await expect(getRevisionChanges(reader, childId, candidateId)).rejects.toMatchObject({ status: 403 });
    expect(await getRevisionChanges(reader, childId)).toMatchObject({ against: null, changes: null });

    await db.update(revisions).set({ state: "superseded" }).where(eq(revisions.id, candidateId));
    expect((await getRevision(reader, childId)).parent).toMatchObject({ number: 2 });
    expect(await getRevisionChanges(reader, childId)).toMatchObject({ against: { number: 2 } });
    const stranger = await createMember(db, { workspaceId, roles: ["reader"], store: noStore });
    await expect(getRevisionChanges(stranger, childId)).rejects.toMatchObject({ status: 403 });
  });

  test("sees the names of people, and no roles", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const reader = await createReader(scene);
    const seen = (await getProgramme(reader, scene.programmeId)).people;
    expect(seen.length).toBeGreaterThan(3);
    expect(seen.flatMap((person) => person.roles)).toEqual([]);
    const all = (await getProgramme(scene.lead, scene.programmeId)).people;
    expect(all.flatMap((person) => person.roles)).toContain("lead");
  });
});
