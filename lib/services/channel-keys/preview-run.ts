import type { RunRow } from "@/db/queries/runs";
import { type LogPreview, previewLog } from "@/lib/logs/preview/preview-log";
import { requiredChannels, whatIsMissing } from "@/lib/logs/preview/required-channels";
import type { ChannelKey } from "@/lib/logs/types";
import { streamBlob } from "@/lib/services/blobs";
import { headOf } from "@/lib/services/channel-keys/run-head";
import type { Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";
import { loadRun } from "@/lib/services/runs/load";

/** A preview of a run's log, and why a key with it can't be saved; null when it can. */
export interface RunPreview {
  preview: LogPreview;
  missing: string | null;
}

/**
 * Reads the beginning of a run's log under a key, by the same parse as the worker will.
 * @throws NotFoundError; UnavailableError when the store does not answer
 */
export async function previewRunRow(ctx: Ctx, run: RunRow, key: ChannelKey): Promise<RunPreview> {
  const { sheet } = await loadProgramme(ctx, run.programmeId);
  const { drive, speedAtRpm } = sheet.figures;
  const head = await headOf(streamBlob(ctx, run.logSha256));
  const preview = previewLog(head, { key, drive, fileName: run.logFileName });
  const channels = new Set(
    preview.columns.flatMap(({ role, channel }) => (role === "channel" && channel ? [channel] : [])),
  );
  const needs = requiredChannels(run.kind, speedAtRpm !== null);
  const missing = preview.refusal?.message ?? whatIsMissing(needs, { time: preview.time !== null, channels });
  return { preview, missing };
}

/** As previewRunRow, for the page that tries a key out. @throws ForbiddenError too */
export async function previewRun(
  ctx: Ctx,
  { runId, key }: { runId: string; key: ChannelKey },
): Promise<RunPreview> {
  return await previewRunRow(ctx, await loadRun(ctx, runId, "channel_key.save"), key);
}
