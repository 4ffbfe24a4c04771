import type { Queryable } from "@/db/client";
import type { ObjectStore } from "@/storage/port";

/** What a job works with. It speaks for no person: the ids in its data say where it works. */
export interface System {
  db: Queryable;
  store: ObjectStore;
}
