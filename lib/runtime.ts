import { createDatabase, type Database } from "@/db/client";
import { env } from "@/lib/env";
import { openStore } from "@/storage/open";
import type { ObjectStore } from "@/storage/port";

interface Runtime {
  db: Database;
  store: ObjectStore;
}

// One pool a process, kept on globalThis: the web process bundles this module more than once.
const holder = globalThis as typeof globalThis & { twinpassRuntime?: Runtime };

/** The process's database pool and object store, opened at the first call. */
export function runtime(): Runtime {
  if (!holder.twinpassRuntime) {
    const settings = env();
    const { db } = createDatabase(settings.DATABASE_URL);
    holder.twinpassRuntime = { db, store: openStore(storeConfig()) };
  }
  return holder.twinpassRuntime;
}

/** Which store to open, from the environment. */
export function storeConfig(): Parameters<typeof openStore>[0] {
  const settings = env();
  if (settings.STORAGE_DRIVER === "filesystem") {
    return { driver: "filesystem", root: settings.STORAGE_ROOT, linkSecret: settings.STORAGE_LINK_SECRET };
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
