import type { Pool } from "pg";
import PgBoss from "pg-boss";

/** Wakes the worker when a transaction that put a job into a queue has committed. */
export const JOB_CHANNEL = "twinpass_jobs";

const TRIED_AGAIN = { retryLimit: 4, retryDelay: 1, retryBackoff: true, expireInSeconds: 600 };

/**
 * Every queue there is, in the order in which the worker asks them among jobs of one priority. A job whose worker died is found by its missing lock
 * (see openJobQueue), long before `expireInSeconds`, which only stands for a worker whose machine vanished.
 */
export const JOB_QUEUES = {
  "judge-run": TRIED_AGAIN,
  "compute-comparison": TRIED_AGAIN,
  "read-description": TRIED_AGAIN,
  "read-image": TRIED_AGAIN,
  "compute-change-set": TRIED_AGAIN,
  "compute-coverage": TRIED_AGAIN,
} as const satisfies Record<string, Omit<PgBoss.Queue, "name">>;
export type JobName = keyof typeof JOB_QUEUES;

/** A job in a worker's hands. */
export interface TakenJob {
  id: string;
  name: JobName;
  data: unknown;
  /** Whether a failure of this try is the last word. */
  lastTry: boolean;
}

/**
 * Creates or updates the tables of the job queue and its queues, as the owner; web and worker may not. May run again and again.
 * @param ownerUrl connection address of the role that owns the tables
 */
export async function installQueue(ownerUrl: string): Promise<void> {
  const boss = new PgBoss({ connectionString: ownerUrl, supervise: false, schedule: false, max: 1 });
  let failure: unknown;
  boss.on("error", (error) => {
    failure = error;
  });
  await boss.start();
  for (const [name, options] of Object.entries(JOB_QUEUES)) {
    await boss.createQueue(name, { name, ...options });
    await boss.updateQueue(name, { name, ...options });
  }
  await boss.stop({ graceful: false, wait: true });
  if (failure !== undefined) throw failure;
}

/** The queue as a worker sees it. One worker does one job at a time. */
export interface JobQueue {
  /** The next job that is due: by priority, then by the order of JOB_QUEUES, oldest first; null when none is. */
  take(): Promise<TakenJob | null>;
  complete(job: TakenJob): Promise<void>;
  /** Hands a job back for another try, later each time; after the last try it stays failed. */
  fail(job: TakenJob, error: unknown): Promise<void>;
  /** Jobs that are marked as taken though nobody holds their lock: their worker died. Each is handed back as by `fail`. */
  reclaim(): Promise<TakenJob[]>;
  close(): Promise<void>;
}

/** Session locks say which jobs are really in work: they go when the worker's connection goes, whatever ended it. */
export interface SessionLocks {
  tryLock(key: string): Promise<boolean>;
  unlock(key: string): Promise<void>;
}

// Between taking a job and locking it a moment passes; younger ones are left alone.
const SETTLED_S = 3;
const NAMES = Object.keys(JOB_QUEUES) as JobName[];

/**
 * Opens the queue for a worker, as the runtime role. Also does the queue's housekeeping (expiry, archive) now and then.
 * @param locks of a connection that lives as long as the worker works
 */
export async function openJobQueue(
  pool: Pool,
  locks: SessionLocks,
  onError: (error: unknown) => void,
): Promise<JobQueue> {
  const boss = new PgBoss({
    db: { executeSql: (text, values) => pool.query(text, values) },
    migrate: false,
    schedule: false,
  });
  boss.on("error", onError);
  await boss.start();
  const lockKey = (id: string) => `job:${id}`;

  const fail = async (job: TakenJob, error: unknown) => {
    const message = error instanceof Error ? error.message : String(error);
    await boss.fail(job.name, job.id, { message });
    await locks.unlock(lockKey(job.id));
  };

  return {
    async take() {
      // Background work of one queue waits for what people wait for in another.
      const { rows } = await pool.query<{ name: JobName }>(
        `select name from pgboss.job where name = any($1) and state < 'active' and start_after <= now()
         group by name order by max(priority) desc, array_position($1::text[], name)`,
        [NAMES],
      );
      for (const { name } of rows) {
        const [job] = await boss.fetch<object>(name, { includeMetadata: true });
        if (!job) continue;
        await locks.tryLock(lockKey(job.id));
        return { id: job.id, name, data: job.data, lastTry: job.retryCount >= job.retryLimit };
      }
      return null;
    },
    async complete(job) {
      await boss.complete(job.name, job.id);
      await locks.unlock(lockKey(job.id));
    },
    fail,
    async reclaim() {
      const { rows } = await pool.query<TakenJob>(
        `select id, name, data, retry_count >= retry_limit as "lastTry" from pgboss.job
         where name = any($1) and state = 'active' and started_on < now() - $2 * interval '1 second'`,
        [NAMES, SETTLED_S],
      );
      const dead: TakenJob[] = [];
      for (const job of rows) {
        if (!(await locks.tryLock(lockKey(job.id)))) continue;
        await fail(job, new Error("The worker ended before the job was done."));
        dead.push(job);
      }
      return dead;
    },
    close: () => boss.stop({ graceful: false }),
  };
}
