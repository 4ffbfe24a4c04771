import type { Queryable } from "@/db/client";
import { countTry } from "@/db/queries/people";
import { TooManyRequestsError } from "@/lib/errors";

/** How often one person may do what costs room, mail or rows, in an hour; far above what work takes. */
const AN_HOUR = {
  "begin uploads": 600,
  "send invitations": 30,
  "make workspaces": 5,
  "check values files": 120,
  "download values": 300,
} as const;

/**
 * Counts a try of a person, to be called outside the transaction of what is tried.
 * @throws TooManyRequestsError `too_many_tries` above the limit of the hour
 */
export async function limitTries(
  db: Queryable,
  { doing, userId }: { doing: keyof typeof AN_HOUR; userId: string },
): Promise<void> {
  const atMost = AN_HOUR[doing];
  if ((await countTry(db, { bucket: `${doing}:${userId}` })) <= atMost) return;
  throw new TooManyRequestsError(
    "too_many_tries",
    `You can ${doing} at most ${atMost} times an hour. Wait an hour and try again.`,
  );
}
