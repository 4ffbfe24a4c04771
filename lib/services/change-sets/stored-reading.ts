import { promisify } from "node:util";
import { gunzip, gzip } from "node:zlib";
import type { ImageReading } from "@/lib/calibration/values/types";
import { readBlob } from "@/lib/services/blobs";
import type { Ctx } from "@/lib/services/ctx";

const pack = promisify(gzip);
const unpack = promisify(gunzip);

/** A reading as it is kept: JSON, packed. */
export async function packReading(reading: ImageReading): Promise<Uint8Array> {
  return await pack(JSON.stringify(reading));
}

/** A kept reading. @throws NotFoundError, UnavailableError as readBlob */
export async function openReading(
  where: Pick<Ctx, "store" | "workspaceId">,
  blobSha256: string,
): Promise<ImageReading> {
  const text = await unpack(await readBlob(where, blobSha256));
  return JSON.parse(text.toString("utf8")) as ImageReading;
}
