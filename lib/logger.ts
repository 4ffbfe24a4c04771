import pino, { type Logger } from "pino";

const holder = globalThis as typeof globalThis & { twinpassLogger?: Logger };

/** The process's log: one JSON line an event, secrets masked. Logs are not the ledger. */
export function logger(): Logger {
  holder.twinpassLogger ??= pino({
    base: undefined,
    timestamp: pino.stdTimeFunctions.isoTime,
    redact: ["*.passphrase", "*.token", "*.cookie", "*.authorization", "*.password"],
  });
  return holder.twinpassLogger;
}
