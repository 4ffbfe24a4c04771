import { selectForgottenRuns } from "@/db/queries/jobs";
import { emptyUselessMail } from "@/db/queries/mail";
import {
  allBlobs,
  cancelExpiredUploads,
  deleteOldTries,
  lockDigest,
  selectKeptDigests,
} from "@/db/queries/sweep";
import { enqueueJob } from "@/lib/jobs/enqueue";
import { renewOutdated } from "@/lib/jobs/renew-outdated";
import type { System } from "@/lib/jobs/system";
import { logger } from "@/lib/logger";
import { type SweepReport, sweepStore } from "@/storage/sweep";

/** Hour (UTC) in which every kept file is read and hashed again, not only measured. */
const REHASH_HOUR_UTC = 3;

/**
 * Clears uploads that nobody finished and counts of tries that are over, has runs judged that wait without a job, has what an older
 * analysis version computed computed anew, and looks
 * whether every row still has its file. What is missing or damaged is logged as `integrity.failed` for people to act on; it is never mended here.
 */
export async function sweepLeftovers({ db, store }: System, now = new Date()): Promise<SweepReport> {
  const uploadsEnded = await cancelExpiredUploads(db);
  const countsForgotten = await deleteOldTries(db);
  const mailEmptied = await emptyUselessMail(db);
  const report = await sweepStore(
    store,
    {
      all: () => allBlobs(db),
      kept: (workspaceId, sha256s) => selectKeptDigests(db, { workspaceId, sha256s }),
      removeIfUnkept: (workspaceId, sha256, remove) =>
        db.transaction(async (tx) => {
          await lockDigest(tx, { workspaceId, sha256 });
          const kept = await selectKeptDigests(tx, { workspaceId, sha256s: [sha256] });
          if (!kept.has(sha256)) await remove();
        }),
    },
    { nowMs: now.getTime(), rehash: now.getUTCHours() === REHASH_HOUR_UTC },
  );
  const forgotten = await selectForgottenRuns(db);
  for (const data of forgotten) await enqueueJob(db, { name: "judge-run", data });
  const computedAnew = await renewOutdated(db);
  const { rowWithoutObject, digestMismatch, ...counts } = report;
  for (const row of rowWithoutObject)
    logger().error({ event: "integrity.failed", what: "file missing", ...row });
  for (const { row, found } of digestMismatch)
    logger().error({ event: "integrity.failed", what: "file changed", ...row, found });
  logger().info({
    event: "sweep.done",
    uploadsEnded,
    countsForgotten,
    mailEmptied,
    judgedAgain: forgotten.length,
    computedAnew,
    ...counts,
  });
  return report;
}
