import { setTimeout } from "node:timers/promises";
import { eq, sql } from "drizzle-orm";
import { describe, expect, vi } from "vitest";
import type { Database, Transaction } from "@/db/client";
import { lockNumbers } from "@/db/queries/decisions";
import { lockLedgerHead } from "@/db/queries/ledger";
import { ledger, programmes, revisions, runs } from "@/db/tables";
import { rollBack } from "@/lib/services/decisions/roll-back";
import { firstBrokenLink } from "@/lib/services/ledger/entry";
import { changeRoles } from "@/lib/services/members/change-roles";
import { adoptRevisionAsFound } from "@/lib/services/revisions/adopt";
import { setRunAside } from "@/lib/services/runs/set-aside";
import { test } from "@/tests/support/database";
import { createScene, createSigner, PASSPHRASE, type Scene } from "@/tests/support/decision-scene";

vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => given === stored,
}));
// A lost deadlock is not tried again here: what is asked for is that there is none.
vi.mock("@/lib/services/decisions/retry", async (original) => ({
  ...(await original<typeof import("@/lib/services/decisions/retry")>()),
  retryLost: <T>(work: () => Promise<T>) => work(),
}));

const FRESH = { sessionAgeS: 1 };

/** Waits until so many connections of this database wait for a lock. */
async function untilWaiting(db: Database, n: number): Promise<void> {
  for (let tries = 0; tries < 200; tries += 1) {
    const { rows } = await db.execute<{ n: number }>(sql`select count(*)::int as n from pg_stat_activity
      where datname = current_database() and wait_event_type = 'Lock'`);
    if (rows[0].n >= n) return;
    await setTimeout(10);
  }
  throw new Error(`no ${n} connections wait for a lock`);
}

/** Starts the works one after the other behind a lock that is let go when all of them wait. */
async function queueBehind(
  db: Database,
  lock: (tx: Transaction) => Promise<unknown>,
  works: (() => Promise<unknown>)[],
): Promise<PromiseSettledResult<unknown>[]> {
  const started: Promise<unknown>[] = [];
  const settled = await db
    .transaction(async (tx) => {
      await lock(tx);
      for (const [index, work] of works.entries()) {
        const running = work();
        running.catch(() => undefined);
        started.push(running);
        await untilWaiting(db, index + 1);
      }
      return started;
    })
    .then(() => Promise.allSettled(started));
  return settled;
}

const roles = async (scene: Scene, n: number) => {
  const admin = await createSigner(scene.db, { workspaceId: scene.workspaceId, roles: ["admin"] });
  const { userId } = scene.lead;
  return () =>
    changeRoles(admin, { userId, roles: n % 2 === 0 ? ["lead", "tester"] : ["lead", "calibrator"] }, FRESH);
};

/** Lets the candidate stand, with the first revision behind it as a target for rolling back. */
async function letCandidateStand({ db, programmeId, standingId, candidateId }: Scene) {
  await db.update(revisions).set({ state: "superseded" }).where(eq(revisions.id, standingId));
  await db
    .update(revisions)
    .set({ state: "promoted", stoodFrom: new Date() })
    .where(eq(revisions.id, candidateId));
  await db.update(programmes).set({ standingRevisionId: candidateId }).where(eq(programmes.id, programmeId));
}

const rollBackOf = (scene: Scene) => () =>
  rollBack(scene.lead, {
    programmeId: scene.programmeId,
    toRevisionId: scene.standingId,
    standingRevisionId: scene.candidateId,
    typedNumber: "R1",
    reason: "runs hot",
    passphrase: PASSPHRASE,
  });

const outcomes = (settled: PromiseSettledResult<unknown>[]) =>
  settled.map((one) => (one.status === "fulfilled" ? "done" : String(one.reason?.cause ?? one.reason)));

async function requireSoundLedger(db: Database) {
  expect(firstBrokenLink(await db.select().from(ledger).orderBy(ledger.seq))).toBeNull();
}

describe("a member's roles change while", () => {
  for (const first of ["the member change", "the decision"] as const) {
    test(`they decide, ${first} first: both happen, one after the other`, async ({ database: { db } }) => {
      const scene = await createScene(db);
      await letCandidateStand(scene);
      const { workspaceId } = scene;
      const change = await roles(scene, 0);
      const works = [change, rollBackOf(scene)];
      const settled = await queueBehind(
        db,
        (tx) => lockNumbers(tx, { workspaceId }),
        first === "the decision" ? works.reverse() : works,
      );
      expect(outcomes(settled)).toEqual(["done", "done"]);
      await requireSoundLedger(db);
    });
  }

  test("a run is set aside: neither waits for the other in a circle", async ({ database: { db } }) => {
    const scene = await createScene(db);
    const { workspaceId, tester } = scene;
    const [run] = await db.select().from(runs).where(eq(runs.number, 2));
    const aside = () => setRunAside(tester, { runId: run.id, rowVersion: run.rowVersion, reason: "a gust" });
    const change = await roles(scene, 1);
    const settled = await queueBehind(db, (tx) => lockLedgerHead(tx, { workspaceId }), [aside, change]);
    expect(outcomes(settled)).toEqual(["done", "done"]);
    await requireSoundLedger(db);
  });
});

describe("adopting as found", () => {
  const adopt = (scene: Scene, revisionId: string) =>
    adoptRevisionAsFound(scene.lead, {
      revisionId,
      reason: "what the car came with",
      howRead: "over the diagnostic socket",
      secondReadEqual: true,
      passphrase: PASSPHRASE,
    });

  test("is refused in an archived programme", async ({ database: { db } }) => {
    const scene = await createScene(db);
    await db.update(programmes).set({ archivedAt: new Date() });
    const { candidateId } = scene;
    await db.update(revisions).set({ state: "draft" }).where(eq(revisions.id, candidateId));
    await expect(adopt(scene, candidateId)).rejects.toMatchObject({ code: "programme_archived" });
  });

  test("that loses to another revision which stands already is a plain conflict", async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    const { candidateId } = scene;
    await db.update(revisions).set({ state: "draft" }).where(eq(revisions.id, candidateId));
    // The programme's row says that nothing stands while a promoted revision is there: the unique index decides.
    await db.update(programmes).set({ standingRevisionId: null });
    await expect(adopt(scene, candidateId)).rejects.toMatchObject({ status: 409, code: "decided_meanwhile" });
  });
});
