import { setRunHeader } from "@/db/queries/channel-keys";
import type { RunRow } from "@/db/queries/runs";
import { FileRefusedError } from "@/lib/errors";
import { gatherHead, type LogHead } from "@/lib/logs/preview/gather-head";
import { fingerprintOfHead } from "@/lib/logs/preview/header-fingerprint";
import { streamBlob } from "@/lib/services/blobs";
import type { Ctx } from "@/lib/services/ctx";

/** The beginning of bytes on their way or in the store; a log that can't be unpacked has none, but the reason. @throws what the source throws */
export async function headOf(source: AsyncIterable<Uint8Array>): Promise<LogHead> {
  try {
    return await gatherHead(source);
  } catch (error) {
    if (error instanceof FileRefusedError) return { bytes: new Uint8Array(), complete: true, refusal: error };
    throw error;
  }
}

/** Fingerprint of the header of a log in the store; null where it has none. @throws what the store throws */
export async function headerOfLog(
  ctx: Pick<Ctx, "store" | "workspaceId">,
  sha256: string,
): Promise<string | null> {
  return fingerprintOfHead(await headOf(streamBlob(ctx, sha256)));
}

/** The header that was noted when the run was attached, or now where it was not. */
export async function headerOfRun(ctx: Ctx, run: RunRow): Promise<string | null> {
  if (run.headerSha256 !== null) return run.headerSha256;
  const headerSha256 = await headerOfLog(ctx, run.logSha256);
  if (headerSha256 !== null)
    await setRunHeader(ctx.db, { workspaceId: ctx.workspaceId, runId: run.id, headerSha256 });
  return headerSha256;
}
