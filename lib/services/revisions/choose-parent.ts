import { selectFileNamesOf } from "@/db/queries/descriptions";
import { selectLineage } from "@/db/queries/programme-overview";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";

/**
 * What the page for a new revision needs: the programme and its revisions as possible parents, the standing one first, each with
 * the files of its description (null: it has none).
 */
export async function getParentChoices(ctx: Ctx, programmeId: string) {
  const { programme } = await loadProgramme(ctx, programmeId);
  authorise(ctx, "revision.upload");
  const { db, workspaceId } = ctx;
  const lineage = await selectLineage(db, { workspaceId, programmeIds: [programmeId] });
  const offered = lineage.filter((revision) => revision.setAsideAt === null);
  const files = await selectFileNamesOf(db, { workspaceId, revisionIds: offered.map(({ id }) => id) });
  const parents = offered
    .map(({ id, number, title, state }) => ({
      ...{ id, number, title, stands: state === "promoted" },
      descriptionFiles: files.get(id) ?? null,
    }))
    .sort((a, b) => Number(b.stands) - Number(a.stands) || b.number - a.number);
  return { programme, parents };
}
