import type { ObjectStore } from "@/storage/port";

/** For tests that must not touch files: any use of it fails. */
export const noStore = new Proxy({} as ObjectStore, {
  get(_, name) {
    throw new Error(`This test has no object store, but something asked it for ${String(name)}.`);
  },
});
