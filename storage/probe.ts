import { text } from "node:stream/consumers";
import { UnavailableError } from "@/lib/errors";
import { newProbeKey } from "@/storage/keys";
import type { ObjectStore, StoreFacts } from "@/storage/port";

const FIRST = "first";
const SECOND = "other";

async function* bytesOf(content: string) {
  yield Buffer.from(content);
}

/**
 * Creates a probe, tries to create it again with other bytes, reads it, deletes it.
 * @returns whether the second create was refused
 * @throws UnavailableError `store_unfaithful` where something other than what was put comes back
 */
export async function probeStore(store: ObjectStore): Promise<StoreFacts["conditionalCreate"]> {
  const key = newProbeKey();
  const declared = { sizeBytes: FIRST.length };
  try {
    await store.create(key, bytesOf(FIRST), declared);
    const again = await store.create(key, bytesOf(SECOND), declared);
    const read = await text((await store.get(key)).body);
    if (read === FIRST && again === "existed") return "atomic";
    if (read === SECOND && again === "created") return "none";
    throw new UnavailableError(
      "store_unfaithful",
      "The file store gave back other bytes than were put in. Don't use it; check the store.",
    );
  } finally {
    await store.remove(key);
  }
}
