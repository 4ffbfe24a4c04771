import { env } from "@/lib/env";
import { computeChangeSet, giveUpComparing } from "@/lib/jobs/calibration/compute-change-set";
import { computeCoverage, giveUpCovering } from "@/lib/jobs/calibration/compute-coverage";
import { readRevisionImage } from "@/lib/jobs/calibration/read-image";
import { giveUpReadingDescription, readKeptDescription } from "@/lib/jobs/calibration/settle-description";
import { computeComparison, giveUpComputing } from "@/lib/jobs/compute-comparison";
import { giveUpJudging, judgeRun } from "@/lib/jobs/judge-run";
import { startWorker } from "@/lib/jobs/start-worker";
import { sweepLeftovers } from "@/lib/jobs/sweep";
import { logger } from "@/lib/logger";
import { sendDueMail } from "@/lib/mail/send-due";
import { objectStore } from "@/lib/runtime";
import { checkBeforeServing } from "@/lib/start-checks";

/** Entry of the worker process. SIGTERM or SIGINT ends it after the job in hand; a second one at once. */
async function main(): Promise<void> {
  await checkBeforeServing();
  const store = await objectStore();
  const worker = await startWorker({
    databaseUrl: env().DATABASE_URL,
    store,
    handlers: {
      "judge-run": { run: judgeRun, giveUp: giveUpJudging },
      "compute-comparison": { run: computeComparison, giveUp: giveUpComputing },
      "read-description": { run: readKeptDescription, giveUp: giveUpReadingDescription },
      "read-image": { run: readRevisionImage },
      "compute-change-set": { run: computeChangeSet, giveUp: giveUpComparing },
      "compute-coverage": { run: computeCoverage, giveUp: giveUpCovering },
    },
    sendMail: sendDueMail,
    sweep: async (system) => {
      await sweepLeftovers(system);
    },
  });
  logger().info({ event: "worker.started", pid: process.pid });

  let asked = false;
  const end = (signal: NodeJS.Signals) => {
    if (asked) process.exit(1);
    asked = true;
    logger().info({ event: "worker.stopping", signal });
    worker.stop().then(
      () => process.exit(0),
      (error: unknown) => {
        logger().error({ event: "worker.stop_failed", err: error });
        process.exit(1);
      },
    );
  };
  process.on("SIGTERM", end);
  process.on("SIGINT", end);
}

main().catch((error: unknown) => {
  logger().error({ event: "worker.start_failed", err: error });
  console.error(error instanceof Error ? error.message : error);
  process.exitCode = 1;
  process.exit();
});
