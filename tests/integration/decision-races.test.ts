import { setTimeout } from "node:timers/promises";
import { and, eq, sql } from "drizzle-orm";
import { describe, expect, vi } from "vitest";
import { decisions, ledger, mailQueue, programmes, revisions, runs } from "@/db/tables";
import { ConflictError } from "@/lib/errors";
import { withTransaction } from "@/lib/services/ctx";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { rollBack } from "@/lib/services/decisions/roll-back";
import { turnDownRevision } from "@/lib/services/decisions/send-back";
import { appendLedger } from "@/lib/services/ledger/append";
import { firstBrokenLink } from "@/lib/services/ledger/entry";
import { setRunAside } from "@/lib/services/runs/set-aside";
import { test } from "@/tests/support/database";
import {
  createCandidate,
  createRunRow,
  createScene,
  PASSPHRASE,
  seenBy,
  seenForSendBack,
  storeResult,
} from "@/tests/support/decision-scene";

vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => given === stored,
}));

const TRIALS = 120;

const WAIVED = [{ gateId: "evidence.days", reason: "a race has no road day of its own, only two leads" }];

async function outcome(work: Promise<unknown>): Promise<"won" | "conflict" | string> {
  try {
    await work;
    return "won";
  } catch (error) {
    return error instanceof ConflictError ? "conflict" : String(error);
  }
}

describe("two leads at the same moment", () => {
  test(`one decision and one plain 409 in each of ${TRIALS} trials`, { timeout: 300_000 }, async ({
    database: { db },
  }) => {
    const scene = await createScene(db);
    for (let trial = 0; trial < TRIALS; trial++) {
      const id = await createCandidate(scene, trial + 3);
      const mine = { ...(await seenBy(scene.lead, id)), waivers: WAIVED };
      const theirs = { ...(await seenBy(scene.otherLead, id)), waivers: WAIVED };
      const sendBack = await seenForSendBack(scene.otherLead, id);
      const outcomes = await Promise.all([
        outcome(promoteRevision(scene.lead, mine)),
        trial % 2 === 0
          ? outcome(promoteRevision(scene.otherLead, theirs))
          : outcome(turnDownRevision(scene.otherLead, sendBack)),
      ]);
      expect(outcomes.sort(), `trial ${trial}`).toEqual(["conflict", "won"]);
    }
    const kept = await db.select().from(decisions).orderBy(decisions.recordNumber);
    expect(kept).toHaveLength(TRIALS);
    expect(new Set(kept.map((decision) => decision.revisionId)).size).toBe(TRIALS);
    expect(kept.map((decision) => decision.recordNumber)).toEqual(kept.map((_, index) => index + 1));
    for (const [index, decision] of kept.entries())
      expect(decision.previousRecordSha256).toBe(kept[index - 1]?.recordSha256 ?? null);
    const standing = await db.select().from(revisions).where(eq(revisions.state, "promoted"));
    expect(standing).toHaveLength(1);
    const [programme] = await db.select().from(programmes);
    expect(programme.standingRevisionId).toBe(standing[0].id);
    const entries = await db.select().from(ledger).orderBy(ledger.seq);
    expect(firstBrokenLink(entries)).toBeNull();
    const decided = entries.filter((entry) => entry.event.startsWith("decision."));
    expect(decided).toHaveLength(TRIALS);
    // Author, submitter, two leads: four mails a decision, none for a loser.
    expect(await db.select().from(mailQueue)).toHaveLength(TRIALS * 4);
  });

  test("promoting two candidates at once leaves one standing; the other lead is told which", async ({
    database: { db },
  }) => {
    for (let trial = 0; trial < 15; trial++) {
      const scene = await createScene(db);
      const otherId = await createCandidate(scene, 3);
      const first = await seenBy(scene.lead, scene.candidateId);
      const second = { ...(await seenBy(scene.otherLead, otherId)), waivers: WAIVED };
      const outcomes = await Promise.all([
        outcome(promoteRevision(scene.lead, first)),
        outcome(promoteRevision(scene.otherLead, second)),
      ]);
      expect(outcomes.sort()).toEqual(["conflict", "won"]);
    }
  });

  test("rolling back at once happens once", async ({ database: { db } }) => {
    const scene = await createScene(db);
    await promoteRevision(scene.lead, await seenBy(scene.lead, scene.candidateId));
    const back = {
      programmeId: scene.programmeId,
      toRevisionId: scene.standingId,
      standingRevisionId: scene.candidateId,
      typedNumber: "1",
      reason: "it knocks",
      passphrase: PASSPHRASE,
    };
    const outcomes = await Promise.all(
      [scene.lead, scene.otherLead].map((ctx) => outcome(rollBack(ctx, back))),
    );
    expect(outcomes.sort()).toEqual(["conflict", "won"]);
  });
});

describe("a promotion against another change", () => {
  test("withdrawing at the same moment: one order, the loser is told", { timeout: 120_000 }, async ({
    database: { db },
  }) => {
    for (let trial = 0; trial < 20; trial++) {
      const scene = await createScene(db);
      const seen = await seenBy(scene.lead, scene.candidateId);
      // As the verb does it: lock, look at the state, change, ledger.
      const withdraw = withTransaction(scene.author, async (tx, inner) => {
        const [row] = await tx
          .select()
          .from(revisions)
          .where(eq(revisions.id, scene.candidateId))
          .for("update");
        if (row.state !== "in_review") throw new ConflictError("wrong_state", "decided already");
        await tx.update(revisions).set({ state: "withdrawn" }).where(eq(revisions.id, row.id));
        await appendLedger(tx, inner, {
          event: "revision.withdrawn",
          subjectType: "revision",
          subjectId: row.id,
          data: {},
        });
      });
      const outcomes = await Promise.all([outcome(promoteRevision(scene.lead, seen)), outcome(withdraw)]);
      expect([...outcomes].sort()).toEqual(["conflict", "won"]);
      const [row] = await db.select().from(revisions).where(eq(revisions.id, scene.candidateId));
      expect(row.state).toBe(outcomes[0] === "won" ? "promoted" : "withdrawn");
    }
  });

  test("setting a run of the evidence aside at the same moment: one of the two happens, and the record cites what counted", {
    timeout: 120_000,
  }, async ({ database: { db } }) => {
    const orders = new Set<string>();
    for (let trial = 0; trial < 30; trial++) {
      const scene = await createScene(db);
      const seen = await seenBy(scene.lead, scene.candidateId);
      const [run] = await db
        .select()
        .from(runs)
        .where(and(eq(runs.workspaceId, scene.workspaceId), eq(runs.number, 3)));
      const aside = { runId: run.id, rowVersion: run.rowVersion, reason: "a lorry in the way" };
      const promote = () => outcome(promoteRevision(scene.lead, seen));
      const setAside = () => outcome(setRunAside(scene.tester, aside));
      // A head start that grows from trial to trial, so that both orders come up.
      const outcomes = await Promise.all([promote(), setTimeout(trial * 2).then(setAside)]);
      expect([...outcomes].sort(), `trial ${trial}`).toEqual(["conflict", "won"]);
      const kept = await db.select().from(decisions).where(eq(decisions.workspaceId, scene.workspaceId));
      const [after] = await db.select().from(runs).where(eq(runs.id, run.id));
      if (outcomes[0] === "won") {
        expect(kept[0].evidence.runs.every((cited) => cited.usable)).toBe(true);
        expect(after.setAsideAt).toBeNull();
      } else {
        expect(kept).toEqual([]);
        expect(after.setAsideReason).toBe("a lorry in the way");
      }
      orders.add(String(outcomes));
    }
    // Otherwise the test would say nothing about one of the two orders.
    expect(orders.size).toBe(2);
  });

  test("attaching a run at the same moment never slips past a record", { timeout: 120_000 }, async ({
    database: { db },
  }) => {
    for (let trial = 0; trial < 20; trial++) {
      const scene = await createScene(db);
      const seen = await seenBy(scene.lead, scene.candidateId);
      const attach = withTransaction(scene.tester, async (tx, inner) => {
        await createRunRow({ ...scene, db: tx as never }, { revisionId: scene.candidateId, number: 9 });
        if (trial % 2 === 1) await tx.execute(sql`select pg_sleep(0.02)`);
        await appendLedger(tx, inner, {
          event: "run.attached",
          subjectType: "run",
          subjectId: null,
          data: {},
        });
      });
      const [promoted] = await Promise.all([outcome(promoteRevision(scene.lead, seen)), attach]);
      const entries = await db
        .select({ event: ledger.event })
        .from(ledger)
        .where(eq(ledger.workspaceId, scene.workspaceId))
        .orderBy(ledger.seq);
      const events = entries.map((entry) => entry.event);
      if (promoted === "won")
        expect(events.indexOf("decision.promoted")).toBeLessThan(events.indexOf("run.attached"));
      else expect(promoted).toBe("conflict");
    }
  });
});

test("a result computed meanwhile for the same input changes nothing for the lead", async ({
  database: { db },
}) => {
  const scene = await createScene(db);
  const seen = await seenBy(scene.lead, scene.candidateId);
  await storeResult(scene);
  await promoteRevision(scene.lead, seen);
});
