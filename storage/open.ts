import { type FilesystemConfig, filesystemStore } from "@/storage/filesystem";
import type { ObjectStore } from "@/storage/port";
import type { S3Config } from "@/storage/s3";

export type StoreConfig = FilesystemConfig | S3Config;

/**
 * Opens the store that the settings name; touches neither disk nor network yet. Call check() next.
 * @throws InvalidInputError `bad_store_config`
 */
export async function openStore(config: StoreConfig): Promise<ObjectStore> {
  if (config.driver === "filesystem") return filesystemStore(config);
  // Loaded on demand: the SDK costs start-up time and memory that the embedded store does not need.
  const { s3Store } = await import("@/storage/s3");
  return s3Store(config);
}
