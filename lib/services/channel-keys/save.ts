import { insertChannelKey, selectChannelKeysOfHeader } from "@/db/queries/channel-keys";
import { ConflictError, InvalidInputError } from "@/lib/errors";
import { completeKey } from "@/lib/logs/preview/complete-key";
import { applyToRuns } from "@/lib/services/channel-keys/apply";
import { previewRunRow } from "@/lib/services/channel-keys/preview-run";
import { headerOfRun } from "@/lib/services/channel-keys/run-head";
import type { AppliedKey, SaveChannelKey } from "@/lib/services/channel-keys/schema";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { refuseArchived } from "@/lib/services/programmes/refuse-archived";
import { loadRun } from "@/lib/services/runs/load";

/**
 * Saves the key for the header of a run's log as a new version, has the run read with it and, if asked, every run of the
 * programme with the same header. Old versions stay. What is kept names every column that the log has.
 * @throws ForbiddenError; NotFoundError; InvalidInputError `no_header`, `channel_missing`; ConflictError `key_moved`, `run_cited`
 */
export async function saveChannelKey(
  ctx: Ctx,
  input: SaveChannelKey,
): Promise<AppliedKey & { channelKeyId: string; version: number }> {
  const run = await loadRun(ctx, input.runId, "channel_key.save");
  const { preview, missing } = await previewRunRow(ctx, run, input.key);
  const headerSha256 = await headerOfRun(ctx, run);
  if (headerSha256 === null || preview.format === null)
    throw new InvalidInputError(
      "no_header",
      "This log has no header by which a key could be found again. Export it with a row of titles.",
    );
  if (missing !== null) throw new InvalidInputError("channel_missing", missing);
  const { format } = preview;
  return await withTransaction(ctx, async (tx, inner) => {
    const { workspaceId, userId } = inner;
    const { programme } = await loadProgramme(inner, run.programmeId);
    refuseArchived(programme);
    const [newest] = await selectChannelKeysOfHeader(tx, { workspaceId, headerSha256 });
    const version = input.basedOnVersion + 1;
    const saved =
      (newest?.key.version ?? 0) === input.basedOnVersion
        ? await insertChannelKey(tx, {
            workspaceId,
            headerSha256,
            format,
            name: input.name,
            version,
            key: completeKey(preview, input.key),
            createdBy: userId,
          })
        : null;
    if (saved === null)
      throw new ConflictError(
        "key_moved",
        "Somebody else saved a newer version of this key meanwhile. Open the page again to see it, then change it.",
        { newestVersion: newest?.key.version ?? 0 },
      );
    const channelKeyId = saved.id;
    const { everyRun } = input;
    const applied = await applyToRuns(tx, inner, { run, headerSha256, channelKeyId, everyRun });
    await appendLedger(tx, inner, {
      event: "channel_key.saved",
      subjectType: "run",
      subjectId: run.id,
      programmeId: run.programmeId,
      data: {
        number: run.number,
        channelKeyId,
        name: input.name,
        version,
        headerSha256,
        runs: applied.judgedAgain,
      },
    });
    return { channelKeyId, version, ...applied };
  });
}
