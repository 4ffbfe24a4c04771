import { selectServerSetting } from "@/db/queries/server-settings";
import { env } from "@/lib/env";
import { UnavailableError } from "@/lib/errors";
import { logger } from "@/lib/logger";
import { database, objectStore } from "@/lib/runtime";

/** Settings under which a commit that was acknowledged survives a power cut. */
const DURABLE_SETTINGS = ["fsync", "synchronous_commit", "full_page_writes"];

/**
 * What must hold before a process serves: its settings are whole, the database keeps what it acknowledges, and the store
 * gives back what it takes. Says what the store can do.
 * @throws EnvironmentError, UnavailableError with a plain sentence
 */
export async function checkBeforeServing(): Promise<void> {
  env();
  for (const name of DURABLE_SETTINGS) {
    if ((await selectServerSetting(database(), { name })) === "off") {
      throw new UnavailableError(
        "not_durable",
        `PostgreSQL runs with ${name} = off and could lose what it has acknowledged. Set it to on and start again.`,
      );
    }
  }
  const facts = await (await objectStore()).check();
  logger().info({ event: "store.checked", ...facts });
}
