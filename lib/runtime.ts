import { createDatabase, type Database } from "@/db/client";
import { env } from "@/lib/env";
import { openStore, type StoreConfig } from "@/storage/open";
import type { ObjectStore } from "@/storage/port";

// One of each a process, kept on globalThis: the web process bundles this module more than once.
const holder = globalThis as typeof globalThis & {
  twinpassDatabase?: Database;
  twinpassStore?: Promise<ObjectStore>;
};

/** The process's database pool, opened at the first call. */
export function database(): Database {
  holder.twinpassDatabase ??= createDatabase(env().DATABASE_URL).db;
  return holder.twinpassDatabase;
}

/** The process's object store, opened at the first call. */
export function objectStore(): Promise<ObjectStore> {
  holder.twinpassStore ??= openStore(storeConfig());
  return holder.twinpassStore;
}

/** Where signed links of the filesystem driver point to. */
const FILE_LINK_PATH = "/api/files";

function storeConfig(): StoreConfig {
  const settings = env();
  if (settings.STORAGE_DRIVER === "filesystem") {
    return {
      driver: "filesystem",
      root: settings.STORAGE_ROOT,
      linkSecret: settings.STORAGE_LINK_SECRET,
      linkPath: FILE_LINK_PATH,
    };
  }
  return {
    driver: "s3",
    endpoint: settings.S3_ENDPOINT,
    region: settings.S3_REGION,
    bucket: settings.S3_BUCKET,
    accessKeyId: settings.S3_ACCESS_KEY_ID,
    secretAccessKey: settings.S3_SECRET_ACCESS_KEY,
    forcePathStyle: settings.S3_FORCE_PATH_STYLE,
  };
}
