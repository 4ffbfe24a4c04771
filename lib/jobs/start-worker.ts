import { createDatabase, type Database } from "@/db/client";
import { JOB_CHANNEL, openJobQueue, type TakenJob } from "@/db/job-queue";
import { openListener } from "@/db/listen";
import { MAIL_CHANNEL } from "@/db/queries/mail";
import { createBell } from "@/lib/jobs/bell";
import type { Job } from "@/lib/jobs/enqueue";
import type { System } from "@/lib/jobs/system";
import { logger } from "@/lib/logger";
import type { ObjectStore } from "@/storage/port";

type DataOf<Name extends Job["name"]> = Extract<Job, { name: Name }>["data"];

/** How the jobs of one queue are done. */
interface Handler<Data> {
  run(system: System, data: Data): Promise<void>;
  /** Called once when the last try failed too, so that nobody waits for ever. */
  giveUp?(system: System, data: Data): Promise<void>;
}
export type Handlers = { [Name in Job["name"]]: Handler<DataOf<Name>> };

export interface WorkerOptions {
  /** Connection address of the runtime role. */
  databaseUrl: string;
  store: ObjectStore;
  handlers: Handlers;
  /** Sends what is due of the mail queue; null where no mail is sent. */
  sendMail: ((db: Database) => Promise<unknown>) | null;
  /** Clears leftovers; called an hour apart. */
  sweep: ((system: System) => Promise<void>) | null;
  /** How long to sleep at most without a notice; a lost notice costs this much. */
  lookAgainMs?: number;
}

const LOOK_AGAIN_MS = 2_000;
const SWEEP_EVERY_MS = 3_600_000;

/**
 * Does jobs one after the other until it is stopped: CPU work is synchronous here, so that the web process stays free.
 * A notice wakes it at once; without one it looks every two seconds, and then also takes back what a dead worker left.
 * @returns `stop`, which ends after the job in hand
 */
export async function startWorker(options: WorkerOptions): Promise<{ stop: () => Promise<void> }> {
  const { handlers, store, lookAgainMs = LOOK_AGAIN_MS } = options;
  const { db, pool, close } = createDatabase(options.databaseUrl, 4);
  const system: System = { db, store };
  const jobBell = createBell();
  const mailBell = createBell();
  const sweepBell = createBell();
  let stopping = false;
  const note = (event: string) => (error: unknown) => logger().warn({ event, err: error });

  const listener = await openListener(
    options.databaseUrl,
    [JOB_CHANNEL, MAIL_CHANNEL],
    (channel) => (channel === JOB_CHANNEL ? jobBell : mailBell).ring(),
    note("worker.connection_lost"),
  );
  const queue = await openJobQueue(pool, listener, note("worker.queue_error"));

  /** The pairing of name and data is kept by enqueueJob's type. */
  const handlerOf = (job: TakenJob) => handlers[job.name] as Handler<unknown>;

  const giveUp = async (job: TakenJob) => {
    logger().error({ event: "job.given_up", job: job.name, data: job.data });
    await handlerOf(job).giveUp?.(system, job.data);
  };

  const doNext = async (): Promise<boolean> => {
    const job = await queue.take();
    if (!job) return false;
    const startedMs = performance.now();
    try {
      await handlerOf(job).run(system, job.data);
      await queue.complete(job);
      const tookMs = Math.round(performance.now() - startedMs);
      logger().info({ event: "job.done", job: job.name, data: job.data, tookMs });
    } catch (error) {
      logger().error({ event: "job.failed", job: job.name, data: job.data, err: error });
      await queue.fail(job, error);
      if (job.lastTry) await giveUp(job);
    }
    return true;
  };

  const rounds = async (bell: ReturnType<typeof createBell>, everyMs: number, round: () => Promise<void>) => {
    while (!stopping) {
      await round().catch(note("worker.round_failed"));
      if (!stopping) await bell.wait(everyMs);
    }
  };
  const jobs = rounds(jobBell, lookAgainMs, async () => {
    for (const job of await queue.reclaim()) if (job.lastTry) await giveUp(job);
    while (!stopping && (await doNext()));
  });
  const mail = rounds(mailBell, lookAgainMs, async () => {
    await options.sendMail?.(db);
  });
  const sweeps = rounds(sweepBell, SWEEP_EVERY_MS, async () => {
    await options.sweep?.(system);
  });

  const end = async () => {
    stopping = true;
    for (const bell of [jobBell, mailBell, sweepBell]) bell.ring();
    await Promise.all([jobs, mail, sweeps]);
    await queue.close();
    await listener.close();
    await close();
  };
  let ended: Promise<void> | undefined;
  return {
    stop: () => {
      ended ??= end();
      return ended;
    },
  };
}
