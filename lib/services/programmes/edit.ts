import { setArchived, updateProgramme } from "@/db/queries/programmes";
import { ConflictError } from "@/lib/errors";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { loadProgramme } from "@/lib/services/programmes/load";
import { archiveProgrammeSchema, editProgrammeSchema } from "@/lib/services/programmes/schema";

/** Changes name and goal. @throws ForbiddenError, NotFoundError, ConflictError when somebody else changed it meanwhile */
export async function editProgramme(
  ctx: Ctx,
  input: { programmeId: string; rowVersion: number; name: string; goal: string },
): Promise<void> {
  authorise(ctx, "programme.edit");
  const change = editProgrammeSchema.parse(input);
  const { programmeId, name, goal } = change;
  await withTransaction(ctx, async (tx, inner) => {
    const { programme: before } = await loadProgramme(inner, programmeId);
    if (!(await updateProgramme(tx, { workspaceId: ctx.workspaceId, ...change })))
      throw new ConflictError(
        "programme_moved",
        "Somebody else changed this programme meanwhile. Open the page again to see it, then change it.",
        { name: before.name, goal: before.goal },
      );
    await appendLedger(tx, inner, {
      event: "programme.updated",
      subjectType: "programme",
      subjectId: programmeId,
      programmeId,
      data: { old: { name: before.name, goal: before.goal }, new: { name, goal } },
    });
  });
}

/** Archives a programme, which hides it from the list and takes nothing new, or takes it out again. Nothing is deleted. */
export async function archiveProgramme(
  ctx: Ctx,
  input: { programmeId: string; archived: boolean },
): Promise<void> {
  authorise(ctx, "programme.archive");
  const { programmeId, archived } = archiveProgrammeSchema.parse(input);
  await withTransaction(ctx, async (tx, inner) => {
    const { programme } = await loadProgramme(inner, programmeId);
    if (!(await setArchived(tx, { workspaceId: ctx.workspaceId, programmeId, archived }))) return;
    await appendLedger(tx, inner, {
      event: archived ? "programme.archived" : "programme.unarchived",
      subjectType: "programme",
      subjectId: programmeId,
      programmeId,
      data: { name: programme.name },
    });
  });
}
