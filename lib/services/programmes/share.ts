import { selectMember, selectMembers } from "@/db/queries/members";
import { deleteShare, selectShares, selectToday, upsertShare } from "@/db/queries/programme-shares";
import { InvalidInputError, NotFoundError } from "@/lib/errors";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { endShareSchema, shareProgrammeSchema } from "@/lib/services/programmes/schema";

/** Who sees the programme's released revisions until when, and which readers it could be shared with. */
export async function listShares(ctx: Ctx, programmeId: string) {
  authorise(ctx, "programme.share");
  await loadProgramme(ctx, programmeId);
  const { workspaceId } = ctx;
  const [shares, members] = await Promise.all([
    selectShares(ctx.db, { workspaceId, programmeId }),
    selectMembers(ctx.db, { workspaceId }),
  ]);
  const readers = members.filter((member) => member.disabledAt === null && member.roles.includes("reader"));
  return { shares, readers: readers.map(({ userId, name, email }) => ({ userId, name: name ?? email })) };
}

/**
 * Shows a programme's released revisions to a reader until a day, or moves that day.
 * @throws ForbiddenError, NotFoundError; InvalidInputError when the person is no reader or the day is past
 */
export async function shareProgramme(
  ctx: Ctx,
  input: { programmeId: string; userId: string; expiresOn: string },
): Promise<void> {
  authorise(ctx, "programme.share");
  const { programmeId, userId, expiresOn } = shareProgrammeSchema.parse(input);
  const { workspaceId } = ctx;
  await withTransaction(ctx, async (tx, inner) => {
    await loadProgramme(inner, programmeId);
    const member = await selectMember(tx, { workspaceId, userId });
    if (!member || member.disabledAt || !member.roles.includes("reader"))
      throw new InvalidInputError("not_a_reader", "A programme is shared with a member who is a reader.");
    if (expiresOn < (await selectToday(tx)))
      throw new InvalidInputError("day_past", "The last day of a share must not be past.");
    await upsertShare(tx, { workspaceId, programmeId, userId, expiresOn, sharedBy: ctx.userId });
    await appendLedger(tx, inner, {
      event: "programme.shared",
      subjectType: "programme",
      subjectId: programmeId,
      programmeId,
      data: { readerId: userId, reader: member.name, expiresOn },
    });
  });
}

/** Ends a share at once. @throws ForbiddenError, NotFoundError */
export async function endShare(ctx: Ctx, input: { programmeId: string; userId: string }): Promise<void> {
  authorise(ctx, "programme.share");
  const { programmeId, userId } = endShareSchema.parse(input);
  const { workspaceId } = ctx;
  await withTransaction(ctx, async (tx, inner) => {
    await loadProgramme(inner, programmeId);
    if (!(await deleteShare(tx, { workspaceId, programmeId, userId })))
      throw new NotFoundError("share_not_found", "This programme is not shared with that person.");
    const member = await selectMember(tx, { workspaceId, userId });
    await appendLedger(tx, inner, {
      event: "programme.share_ended",
      subjectType: "programme",
      subjectId: programmeId,
      programmeId,
      data: { readerId: userId, reader: member?.name ?? null },
    });
  });
}
