import { randomUUID } from "node:crypto";
import { and, eq } from "drizzle-orm";
import type { Database, Queryable } from "@/db/client";
import { closeResult, openResult, selectComparison } from "@/db/queries/comparisons";
import { savePassphrase } from "@/db/queries/people";
import { blobs, programmes, type revisions, runs } from "@/db/tables";
import type { Gate, GatePlan } from "@/lib/gates/plan";
import type { CampaignResult } from "@/lib/measure/types";
import { currentInput } from "@/lib/services/comparisons/current-input";
import { openComparison } from "@/lib/services/comparisons/open";
import type { Ctx } from "@/lib/services/ctx";
import { getDecisionDesk } from "@/lib/services/decisions/load-desk";
import type { PromoteInput } from "@/lib/services/decisions/schema";
import type { ObjectStore } from "@/storage/port";
import {
  createMember,
  createProgrammeRow,
  createRevisionRow,
  createRoadDayRow,
  createWorkspaceRow,
} from "@/tests/support/factories";
import { imageStore, keepAnImage } from "@/tests/support/image-store";

/** The tests that use this scene stand in for the hashing of passphrases: what is stored is the passphrase itself. */
export const PASSPHRASE = "out and back again";

/** Met by any two sides driven on one road day. */
const MET: Gate = { id: "evidence.days", kind: "evidence", level: "must", ask: "road_days", atLeast: 1 };
/** Never met in this scene: everything is driven on one road day. */
export const NEVER_MET: Gate = {
  id: "evidence.more_days",
  kind: "evidence",
  level: "must",
  ask: "road_days",
  atLeast: 2,
};

export interface Scene {
  db: Database;
  workspaceId: string;
  programmeId: string;
  roadDayId: string;
  author: Ctx;
  tester: Ctx;
  lead: Ctx;
  otherLead: Ctx;
  standingId: string;
  candidateId: string;
  comparisonId: string;
}

/** A member who may sign. @param args `store`: one that holds what `keepAnImage` kept, unless given */
export async function createSigner(
  db: Queryable,
  args: Omit<Parameters<typeof createMember>[1], "store"> & { store?: ObjectStore },
): Promise<Ctx> {
  const ctx = await createMember(db, { store: imageStore, ...args });
  await savePassphrase(db, { userId: ctx.userId, scryptHash: PASSPHRASE });
  return ctx;
}

/** A result in which B gains one per cent; invented, to have something that a decision can rest on. */
function inventedResult(runNumbers: { A: number[]; B: number[] }): CampaignResult {
  const rpm = [2000, 3000, 4000, 5000, 6000];
  const flat = (value: number) => rpm.map(() => value);
  const side = (n: number, nm: number) => ({
    n,
    basis: "day" as const,
    rpm,
    engine_kw: rpm.map((x) => (nm * x * 2 * Math.PI) / 60_000),
    engine_nm: flat(nm),
    peak: {
      engine_kw: (nm * 6000 * 2 * Math.PI) / 60_000,
      engine_kw_rpm: 6000,
      engine_nm: nm,
      engine_nm_rpm: 3000,
      uncertainty_kw: 1,
    },
  });
  return {
    analysis_version: "test",
    runs: [...runNumbers.A, ...runNumbers.B].map((number) => ({
      id: String(number),
      usable: true,
      reasons: [],
      notes: [],
      segments: { pull: { from_s: 2, to_s: 9 } },
    })),
    sides: { A: side(runNumbers.A.length, 300), B: side(runNumbers.B.length, 303) },
    delta: {
      quantity: "engine_nm",
      basis: "day",
      rpm,
      pct: flat(1),
      low_pct: flat(0.4),
      high_pct: flat(1.6),
      abs_nm: flat(3),
      level: 0.95,
      simultaneous: true,
      method: "invented for a test",
      regions: [{ from_rpm: 2000, to_rpm: 6000, verdict: "gain" }],
      resolvable_pct: flat(0.6),
      drift_pct_per_run: 0,
      twins: [],
    },
  };
}

export async function createRunRow(
  scene: Pick<Scene, "db" | "workspaceId" | "programmeId" | "roadDayId" | "tester">,
  {
    revisionId,
    number,
    ...values
  }: { revisionId: string; number: number } & Partial<typeof runs.$inferInsert>,
): Promise<string> {
  const { db, workspaceId, programmeId, roadDayId, tester } = scene;
  const logSha256 = values.logSha256 ?? randomUUID().replaceAll("-", "").repeat(2);
  await db.insert(blobs).values({ workspaceId, sha256: logSha256, sizeBytes: 4 }).onConflictDoNothing();
  const [row] = await db
    .insert(runs)
    .values({
      workspaceId,
      programmeId,
      roadDayId,
      revisionId,
      number,
      kind: "pull",
      leg: number % 2 === 1 ? "out" : "back",
      driveOrder: number,
      gear: 3,
      tempC: 17.5,
      pressureHpa: 1003,
      humidityPct: 58,
      logFileName: `r${number}.csv`,
      logBytes: 4,
      state: "usable",
      testerId: tester.userId,
      ...values,
      logSha256,
    })
    .returning({ id: runs.id });
  return row.id;
}

/** Stores an invented result for what counts now. */
export async function storeResult(
  scene: Pick<Scene, "db" | "workspaceId" | "comparisonId">,
): Promise<string> {
  const { db, workspaceId, comparisonId } = scene;
  const comparison = await selectComparison(db, { workspaceId, comparisonId });
  if (!comparison) throw new Error("the scene has no comparison");
  const { input, inputSha256 } = await currentInput(db, comparison);
  const key = { workspaceId, comparisonId, inputSha256 };
  const numbers = (side: "A" | "B") => input.runs.filter((run) => run.side === side).map((run) => run.number);
  await openResult(db, {
    ...key,
    input,
    analysisVersion: input.analysisVersion,
    sheetVersion: input.sheetVersion,
  });
  const result = inventedResult({ A: numbers("A"), B: numbers("B") });
  await closeResult(db, key, { state: "ready", result });
  return inputSha256;
}

/** A revision in review, made by the author, asked for by the tester. */
export async function createCandidate(
  scene: Pick<Scene, "db" | "workspaceId" | "programmeId" | "author" | "tester">,
  number: number,
  values: Partial<typeof revisions.$inferInsert> = {},
): Promise<string> {
  return await createRevisionRow(scene.db, {
    workspaceId: scene.workspaceId,
    programmeId: scene.programmeId,
    number,
    authorId: scene.author.userId,
    submitterId: scene.tester.userId,
    submittedAt: new Date(),
    gatePlanVersion: 1,
    state: "in_review",
    imageSha256: keepAnImage(scene.workspaceId),
    ...values,
  });
}

/** A programme in which R1 stands as found and R2 waits for a decision, each with two runs and a result between them. */
export async function createScene(
  db: Database,
  { gates = [MET], leads = 2 }: { gates?: Gate[]; leads?: 1 | 2 } = {},
): Promise<Scene> {
  const workspaceId = await createWorkspaceRow(db);
  const author = await createSigner(db, { workspaceId, roles: ["calibrator"] });
  const tester = await createSigner(db, { workspaceId, roles: ["tester"] });
  const lead = await createSigner(db, { workspaceId, roles: ["lead"] });
  const otherLead = leads === 2 ? await createSigner(db, { workspaceId, roles: ["lead"] }) : lead;
  const plan: GatePlan = { plan: 1, gates };
  const programmeId = await createProgrammeRow(db, { workspaceId, createdBy: lead.userId, plan });
  const roadDayId = await createRoadDayRow(db, { workspaceId, programmeId, createdBy: tester.userId });
  const base = { db, workspaceId, programmeId, roadDayId, author, tester, lead, otherLead };
  const standingId = await createRevisionRow(db, {
    workspaceId,
    programmeId,
    number: 1,
    authorId: author.userId,
    state: "promoted",
    asFound: true,
    stoodFrom: new Date("2030-01-01T08:00:00Z"),
  });
  await db
    .update(programmes)
    .set({ standingRevisionId: standingId })
    .where(and(eq(programmes.id, programmeId), eq(programmes.workspaceId, workspaceId)));
  const candidateId = await createCandidate(base, 2);
  for (const [number, revisionId] of [standingId, candidateId, candidateId, standingId].entries())
    await createRunRow(base, { revisionId, number: number + 1 });
  const { comparisonId } = await openComparison(lead, {
    revisionAId: standingId,
    revisionBId: candidateId,
  });
  const scene = { ...base, standingId, candidateId, comparisonId };
  await storeResult(scene);
  return scene;
}

/** What a lead would send who has the decision page before them now. */
export async function seenBy(ctx: Ctx, revisionId: string): Promise<PromoteInput> {
  const desk = await getDecisionDesk(ctx, revisionId);
  return {
    revisionId,
    rowVersion: desk.revision.rowVersion,
    standingRevisionId: desk.standing?.id ?? null,
    comparisonId: desk.comparison?.id ?? null,
    inputSha256: desk.comparison?.inputSha256 ?? null,
    shownInputSha256: desk.comparison?.basis?.inputSha256 ?? null,
    gatePlanVersion: desk.gates.planVersion,
    calibrationSha256: desk.calibration.seenSha256,
    typedNumber: `R${desk.revision.number}`,
    reason: "shown on the road",
    waivers: [],
    passphrase: PASSPHRASE,
  };
}

/** The same without what only a promotion carries. */
export async function seenForSendBack(ctx: Ctx, revisionId: string) {
  const { gatePlanVersion: _, typedNumber: __, waivers: ___, ...rest } = await seenBy(ctx, revisionId);
  return rest;
}
