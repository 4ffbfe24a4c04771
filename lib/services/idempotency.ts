import type { Transaction } from "@/db/client";
import { insertAnswer, lockIdempotencyKey, selectAnswer } from "@/db/queries/idempotency";
import { digestOf } from "@/lib/canonical-json";
import { InvalidInputError } from "@/lib/errors";
import { type Ctx, withTransaction } from "@/lib/services/ctx";

const KEY = /^[\w-]{8,100}$/;

/**
 * Runs a change once for a key, in one transaction with its answer. The same key with the same request gives the same
 * answer again, even when the first answer got lost on its way or the two race; another request under the key is refused.
 * The shape follows draft-ietf-httpapi-idempotency-key-header-06.
 * @param args.request what was asked, as data; its digest tells a repeat from a misuse
 * @param work must return what JSON can hold
 * @throws InvalidInputError `idempotency_key_missing`, `idempotency_key_reused`
 */
export async function once<T>(
  ctx: Ctx,
  args: { key: string; request: unknown },
  work: (tx: Transaction, ctx: Ctx) => Promise<T>,
): Promise<T> {
  const { userId } = ctx;
  const { key } = args;
  if (!KEY.test(key)) {
    throw new InvalidInputError(
      "idempotency_key_missing",
      "The request carries no usable Idempotency-Key. Reload the page and try again.",
    );
  }
  const requestSha256 = digestOf(args.request);
  return await withTransaction(ctx, async (tx, inner) => {
    await lockIdempotencyKey(tx, { userId, key });
    const earlier = await selectAnswer(tx, { userId, key });
    if (earlier && earlier.requestSha256 !== requestSha256) {
      throw new InvalidInputError(
        "idempotency_key_reused",
        "This key was used for another request before. Reload the page and try again.",
      );
    }
    if (earlier) return earlier.body as T;
    const answer = await work(tx, inner);
    await insertAnswer(tx, { userId, key, requestSha256, body: answer });
    return answer;
  });
}
