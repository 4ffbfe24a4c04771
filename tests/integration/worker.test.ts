import { once } from "node:events";
import { afterAll, beforeAll, describe, expect, onTestFinished, test, vi } from "vitest";
import { createDatabase } from "@/db/client";
import { migrateDatabase } from "@/db/migrate";
import { startThrowawayCluster } from "@/docker-less-setup/postgres.mjs";
import { getRun } from "@/lib/services/runs/get";
import { attachLog, createRoadSide, goldenLog, pullLog } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";
import { startWorkerProcess } from "@/tests/support/worker-process";

const SOON = { timeout: 30_000, interval: 50 };

// The worker refuses a database that could lose what it acknowledged, so it gets a durable one of its own.
let cluster: Awaited<ReturnType<typeof startThrowawayCluster>>;
let database: ReturnType<typeof createDatabase>;
let files: ReturnType<typeof createTestStore>;
beforeAll(async () => {
  files = createTestStore();
  cluster = await startThrowawayCluster({ durable: true });
  await migrateDatabase(cluster.url("owner"));
  database = createDatabase(cluster.url("app"));
});
afterAll(async () => {
  await database?.close();
  await cluster?.stop();
  files.drop();
});

const startWorker = () => startWorkerProcess({ databaseUrl: cluster.url("app"), storageRoot: files.root });

describe("the worker process", () => {
  test("gives every attached log its verdict, and ends calmly when asked to", async () => {
    const side = await createRoadSide(database.db, files.store);
    const { child, log } = startWorker();
    const good = await attachLog(side.tester, side, pullLog());
    const broken = goldenLog("broken/b03_no_time.csv");
    const bad = await attachLog(side.tester, side, broken, { driveOrder: 2 }, { fileName: "b03.csv" });
    const state = async (runId: string) => (await getRun(side.tester, runId)).run.state;
    await vi.waitFor(async () => expect(await state(good.runId)).toBe("usable"), SOON);
    await vi.waitFor(async () => expect(await state(bad.runId)).toBe("refused"), SOON);
    expect((await getRun(side.tester, bad.runId)).verdict?.result.reasons[0]?.code).toBe("no_time_column");
    child.kill("SIGTERM");
    const [code] = await once(child, "exit");
    expect(code).toBe(0);
    expect(log()).toContain('"event":"sweep.done"');
  }, 60_000);

  test("that is killed in the middle of a job loses nothing: the next one gives the verdict", async () => {
    const side = await createRoadSide(database.db, files.store);
    const { runId } = await attachLog(side.tester, side, pullLog());
    // Somebody else holds the run's row: the worker analyses, and then waits with the verdict in its hands.
    const holder = await database.pool.connect();
    onTestFinished(() => holder.release(true));
    await holder.query("begin");
    await holder.query("select 1 from runs where id = $1 for update", [runId]);
    const first = startWorker();
    await vi.waitFor(async () => {
      const { rows } = await database.pool.query(
        "select from pg_stat_activity where wait_event_type = 'Lock' and query like '%\"runs\"%for update%'",
      );
      expect(rows).toHaveLength(1);
    }, SOON);
    first.child.kill("SIGKILL");
    await once(first.child, "exit");
    await holder.query("rollback");
    expect((await getRun(side.tester, runId)).run.state).toBe("waiting");

    startWorker();
    await vi.waitFor(async () => expect((await getRun(side.tester, runId)).run.state).toBe("usable"), SOON);
    const { rows } = await database.pool.query(
      "select count(*)::int as verdicts from run_analyses where run_id = $1",
      [runId],
    );
    expect(rows).toEqual([{ verdicts: 1 }]);
  }, 90_000);
});
