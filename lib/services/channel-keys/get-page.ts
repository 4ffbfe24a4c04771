import { selectChannelKey } from "@/db/queries/channel-keys";
import { listChannelKeys } from "@/lib/services/channel-keys/list";
import { previewRunRow } from "@/lib/services/channel-keys/preview-run";
import { headerOfRun } from "@/lib/services/channel-keys/run-head";
import { channelKeySchema } from "@/lib/services/channel-keys/schema";
import type { Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";
import { loadRoadDay } from "@/lib/services/road-days/load";
import { loadRun } from "@/lib/services/runs/load";

/**
 * What the channel-key page of a run shows first: its log read with the key in use, or else with the newest that fits.
 * @throws NotFoundError for another workspace's run; ForbiddenError
 */
export async function getChannelKeyPage(ctx: Ctx, runId: string) {
  const run = await loadRun(ctx, runId, "channel_key.save");
  const { programme, sheet } = await loadProgramme(ctx, run.programmeId);
  const headerSha256 = await headerOfRun(ctx, run);
  const versions = headerSha256 === null ? [] : await listChannelKeys(ctx, headerSha256);
  const { workspaceId, db } = ctx;
  const used =
    run.channelKeyId === null
      ? null
      : await selectChannelKey(db, { workspaceId, channelKeyId: run.channelKeyId });
  const shown = used ?? versions[0] ?? null;
  const key = channelKeySchema.parse(shown?.key ?? {});
  return {
    run,
    roadDay: await loadRoadDay(ctx, run.roadDayId),
    programme: { id: programme.id, name: programme.name },
    engineSpeedFromSheet: sheet.figures.speedAtRpm !== null,
    versions,
    used: used && { id: used.id, name: used.name, version: used.version },
    /** What the preview was read with. */
    key,
    name: shown?.name ?? "",
    ...(await previewRunRow(ctx, run, key)),
  };
}
