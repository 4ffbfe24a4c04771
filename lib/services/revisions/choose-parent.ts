import { selectLineage } from "@/db/queries/programme-overview";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";

/** What the page for a new revision needs: the programme and its revisions as possible parents, the standing one first. */
export async function getParentChoices(ctx: Ctx, programmeId: string) {
  const { programme } = await loadProgramme(ctx, programmeId);
  authorise(ctx, "revision.upload");
  const lineage = await selectLineage(ctx.db, { workspaceId: ctx.workspaceId, programmeIds: [programmeId] });
  const parents = lineage
    .filter((revision) => revision.setAsideAt === null)
    .map(({ id, number, title, state }) => ({ id, number, title, stands: state === "promoted" }))
    .sort((a, b) => Number(b.stands) - Number(a.stands) || b.number - a.number);
  return { programme, parents };
}
