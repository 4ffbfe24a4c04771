import { Client } from "pg";
import type { SessionLocks } from "@/db/job-queue";

/** A connection of its own that listens, and holds session locks; it connects again by itself. */
export interface Listener extends SessionLocks {
  close(): Promise<void>;
}

const AGAIN_AFTER_MS = 1_000;

/**
 * Listens to NOTIFY channels. A notice may get lost while the connection is down, so the caller also looks now and then;
 * after a new connection `onNotice` is called once for each channel.
 * @param url connection address of the runtime role
 * @param onNotice called with the channel's name
 * @param onError called when the connection failed; another try follows
 */
export async function openListener(
  url: string,
  channels: readonly string[],
  onNotice: (channel: string) => void,
  onError: (error: unknown) => void,
): Promise<Listener> {
  let closed = false;
  let client: Client | undefined;
  let timer: NodeJS.Timeout | undefined;

  const connect = async () => {
    const fresh = new Client({
      connectionString: url,
      connectionTimeoutMillis: 5_000,
      keepAlive: true,
      application_name: "twinpass worker",
    });
    let over = false;
    const lost = (error: unknown) => {
      if (over) return;
      over = true;
      if (client === fresh) client = undefined;
      fresh.end().catch(() => undefined);
      if (closed) return;
      onError(error);
      timer = setTimeout(() => void connect(), AGAIN_AFTER_MS);
    };
    fresh.on("error", lost);
    fresh.on("end", () => lost(new Error("The database closed the connection.")));
    fresh.on("notification", (notice) => onNotice(notice.channel));
    try {
      await fresh.connect();
      for (const channel of channels) await fresh.query(`listen ${fresh.escapeIdentifier(channel)}`);
      client = fresh;
      for (const channel of channels) onNotice(channel);
    } catch (error) {
      lost(error);
    }
  };
  await connect();

  const ask = async (text: string, key: string): Promise<boolean> => {
    if (!client) return false;
    const { rows } = await client.query<{ done: boolean }>(text, [key]);
    return rows[0]?.done ?? false;
  };

  return {
    tryLock: (key) => ask("select pg_try_advisory_lock(hashtextextended($1, 1)) as done", key),
    unlock: async (key) => {
      // A lost connection has given its locks back already.
      await ask("select pg_advisory_unlock(hashtextextended($1, 1)) as done", key).catch(() => false);
    },
    async close() {
      closed = true;
      clearTimeout(timer);
      await client?.end();
    },
  };
}
