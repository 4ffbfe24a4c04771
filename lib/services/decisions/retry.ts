/** Codes of PostgreSQL for "the transaction lost against another one and may be tried again" (appendix A of its manual). */
const LOST_AGAINST_ANOTHER = new Set(["40001", "40P01"]);
const TRIES = 3;

/** SQLSTATE of a database error, wrapped or not; null for any other error. */
export function sqlState(error: unknown): string | null {
  if (typeof error !== "object" || error === null) return null;
  const { code, cause } = error as { code?: unknown; cause?: unknown };
  if (typeof code === "string" && /^[0-9A-Z]{5}$/.test(code)) return code;
  return cause === undefined ? null : sqlState(cause);
}

/** Runs a whole transaction again when it lost a deadlock or could not be serialised; it left nothing behind. */
export async function retryLost<T>(work: () => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await work();
    } catch (error) {
      const state = sqlState(error);
      if (state === null || !LOST_AGAINST_ANOTHER.has(state) || attempt === TRIES) throw error;
    }
  }
}
