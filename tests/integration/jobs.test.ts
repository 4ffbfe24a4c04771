import { spawn } from "node:child_process";
import { randomUUID } from "node:crypto";
import { once } from "node:events";
import { describe, expect, onTestFinished, vi } from "vitest";
import { enqueueJob, type Job } from "@/lib/jobs/enqueue";
import { type Handlers, startWorker } from "@/lib/jobs/start-worker";
import type { ObjectStore } from "@/storage/port";
import { type TestDatabase, test } from "@/tests/support/database";
import { IDLE_HANDLERS } from "@/tests/support/idle-handlers";
import { hasPendingJob } from "@/tests/support/pending-job";

const STORE = {} as ObjectStore;

function judgeJob(): Extract<Job, { name: "judge-run" }> {
  return { name: "judge-run", data: { workspaceId: randomUUID(), runId: randomUUID() } };
}

/** Handlers that write down what they were given. */
function noting(): { handlers: Handlers; done: string[]; givenUp: string[] } {
  const done: string[] = [];
  const givenUp: string[] = [];
  const handlers: Handlers = {
    ...IDLE_HANDLERS,
    "judge-run": {
      run: async (_system, { runId }) => {
        done.push(runId);
      },
      giveUp: async (_system, { runId }) => {
        givenUp.push(runId);
      },
    },
    "compute-comparison": {
      run: async (_system, { comparisonId }) => {
        done.push(comparisonId);
      },
    },
  };
  return { handlers, done, givenUp };
}

async function working(database: TestDatabase, handlers: Handlers, lookAgainMs?: number) {
  const options = {
    databaseUrl: database.url,
    store: STORE,
    handlers,
    sendMail: null,
    sweep: null,
    lookAgainMs,
  };
  const worker = await startWorker(options);
  onTestFinished(() => worker.stop());
  return worker;
}

describe("a job", () => {
  test("is lost with the transaction that is rolled back, and is there when it commits", async ({
    database,
  }) => {
    const lost = judgeJob();
    const kept = judgeJob();
    const undone = database.db.transaction(async (tx) => {
      await enqueueJob(tx, lost);
      expect(await hasPendingJob(tx, lost)).toBe(true);
      throw new Error("undo");
    });
    await expect(undone).rejects.toThrow("undo");
    await database.db.transaction((tx) => enqueueJob(tx, kept));
    expect(await hasPendingJob(database.db, lost)).toBe(false);
    expect(await hasPendingJob(database.db, kept)).toBe(true);
  });

  test("is done at once after the commit, by the notice and not by the next look", async ({ database }) => {
    const { handlers, done } = noting();
    await working(database, handlers, 60_000);
    const job = judgeJob();
    await enqueueJob(database.db, job);
    await vi.waitFor(() => expect(done).toEqual([job.data.runId]), { timeout: 2_000, interval: 5 });
    await vi.waitFor(async () => expect(await hasPendingJob(database.db, job)).toBe(false));
  });

  test("is found without a notice by the next look", async ({ database }) => {
    const { handlers, done } = noting();
    await working(database, handlers, 50);
    await database.pool.query(
      `insert into pgboss.job (name, data) values ('judge-run', '{"runId":"quiet"}')`,
    );
    await vi.waitFor(() => expect(done).toEqual(["quiet"]), { timeout: 2_000 });
  });

  test("that fails is tried again later, and is given up after the last try", async ({ database }) => {
    const { handlers, givenUp } = noting();
    const tries: number[] = [];
    handlers["judge-run"].run = async () => {
      tries.push(performance.now());
      throw new Error("no luck");
    };
    await enqueueJob(database.db, judgeJob());
    await database.pool.query("update pgboss.job set retry_limit = 1");
    await working(database, handlers, 50);
    await vi.waitFor(() => expect(givenUp).toHaveLength(1), { timeout: 10_000 });
    expect(tries).toHaveLength(2);
    // Back-off of one second, between half and the whole of twice that (pg-boss, retryBackoff).
    expect((tries[1] ?? 0) - (tries[0] ?? 0)).toBeGreaterThan(900);
    const { rows } = await database.pool.query("select state, output from pgboss.job");
    expect(rows).toEqual([{ state: "failed", output: { message: "no luck" } }]);
  });

  test("runs judge before comparisons, one at a time", async ({ database }) => {
    const { handlers, done } = noting();
    let inWork = 0;
    let most = 0;
    const alone = async (id: string) => {
      inWork += 1;
      most = Math.max(most, inWork);
      await new Promise((resolve) => setTimeout(resolve, 5));
      inWork -= 1;
      done.push(id);
    };
    handlers["judge-run"].run = (_system, { runId }) => alone(runId);
    handlers["compute-comparison"].run = (_system, { comparisonId }) => alone(comparisonId);
    const workspaceId = randomUUID();
    await enqueueJob(database.db, {
      name: "compute-comparison",
      data: { workspaceId, comparisonId: "comparison" },
    });
    for (const runId of ["first", "second"])
      await enqueueJob(database.db, { name: "judge-run", data: { workspaceId, runId } });
    await working(database, handlers);
    await vi.waitFor(() => expect(done).toEqual(["first", "second", "comparison"]), { timeout: 5_000 });
    expect(most).toBe(1);
  });

  test("in the background waits for what people wait for, in whichever queue that is", async ({
    database,
  }) => {
    const { handlers, done } = noting();
    const workspaceId = randomUUID();
    const background: Job = { name: "judge-run", data: { workspaceId, runId: "outdated" } };
    await enqueueJob(database.db, background, { background: true });
    await enqueueJob(database.db, {
      name: "compute-comparison",
      data: { workspaceId, comparisonId: "asked for" },
    });
    await working(database, handlers);
    await vi.waitFor(() => expect(done).toEqual(["asked for", "outdated"]), { timeout: 5_000 });
  });

  test("to a queue that is not there is refused, never dropped", async ({ database }) => {
    const unknown = { name: "judge-nothing", data: {} } as unknown as Job;
    await expect(enqueueJob(database.db, unknown)).rejects.toThrow('no queue "judge-nothing"');
  });
});

describe("a worker", () => {
  test("that was killed leaves its job to the next one", async ({ database }) => {
    const job = judgeJob();
    await enqueueJob(database.db, job);
    const child = spawn(
      process.execPath,
      ["--conditions=react-server", "--import", "tsx", "tests/support/stuck-worker.ts", database.url],
      { stdio: ["ignore", "pipe", "inherit"] },
    );
    onTestFinished(() => void child.kill("SIGKILL"));
    let said = "";
    child.stdout.on("data", (chunk) => {
      said += chunk;
    });
    await vi.waitFor(() => expect(said).toContain("taken"), { timeout: 15_000 });

    const { handlers, done } = noting();
    await working(database, handlers, 100);
    // While it lives its job is left alone, however long it takes.
    await new Promise((resolve) => setTimeout(resolve, 4_000));
    expect(done).toEqual([]);

    child.kill("SIGKILL");
    await once(child, "exit");
    await vi.waitFor(() => expect(done).toEqual([job.data.runId]), { timeout: 10_000 });
    expect(await hasPendingJob(database.db, job)).toBe(false);
  }, 40_000);

  test("that is stopped finishes the job in hand and takes no other", async ({ database }) => {
    const { handlers, done } = noting();
    let started = () => undefined as undefined;
    const begun = new Promise<void>((resolve) => {
      started = () => void resolve();
    });
    handlers["judge-run"].run = async (_system, { runId }) => {
      started();
      await new Promise((resolve) => setTimeout(resolve, 200));
      done.push(runId);
    };
    const [first, second] = [judgeJob(), judgeJob()];
    await enqueueJob(database.db, first);
    await enqueueJob(database.db, second);
    const worker = await working(database, handlers);
    await begun;
    await worker.stop();
    expect(done).toEqual([first.data.runId]);
    expect(await hasPendingJob(database.db, first)).toBe(false);
    expect(await hasPendingJob(database.db, second)).toBe(true);
  });

  test("goes on after the database has cut its connections", async ({ database }) => {
    const { handlers, done } = noting();
    await working(database, handlers, 100);
    await database.pool.query(
      "select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and pid <> pg_backend_pid() and usename = current_user",
    );
    const job = judgeJob();
    await vi.waitFor(() => enqueueJob(database.db, job));
    await vi.waitFor(() => expect(done).toEqual([job.data.runId]), { timeout: 10_000 });
  });
});
