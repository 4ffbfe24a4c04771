import { selectSides } from "@/db/queries/change-sets";
import { selectFileNames } from "@/db/queries/descriptions";
import { selectLineage } from "@/db/queries/programme-overview";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { loadProgramme } from "@/lib/services/programmes/load";

/** Names of the files of each revision's description, the main one first; absent where it has none. */
async function descriptionFiles(
  { db, workspaceId }: Ctx,
  revisionIds: readonly string[],
): Promise<Map<string, string[]>> {
  if (revisionIds.length === 0) return new Map();
  const sides = await selectSides(db, { workspaceId, revisionIds: [...revisionIds] });
  const descriptionIds = [...new Set(sides.flatMap((side) => side.descriptionId ?? []))];
  const described = await selectFileNames(db, { workspaceId, descriptionIds });
  const names = new Map(described.map(({ id, fileNames }) => [id, fileNames]));
  return new Map(
    sides.flatMap(({ id, descriptionId }) => {
      const files = descriptionId && names.get(descriptionId);
      return files ? [[id, files] as const] : [];
    }),
  );
}

/**
 * What the page for a new revision needs: the programme and its revisions as possible parents, the standing one first, each with
 * the files of its description (null: it has none).
 */
export async function getParentChoices(ctx: Ctx, programmeId: string) {
  const { programme } = await loadProgramme(ctx, programmeId);
  authorise(ctx, "revision.upload");
  const lineage = await selectLineage(ctx.db, { workspaceId: ctx.workspaceId, programmeIds: [programmeId] });
  const offered = lineage.filter((revision) => revision.setAsideAt === null);
  const files = await descriptionFiles(
    ctx,
    offered.map(({ id }) => id),
  );
  const parents = offered
    .map(({ id, number, title, state }) => ({
      ...{ id, number, title, stands: state === "promoted" },
      descriptionFiles: files.get(id) ?? null,
    }))
    .sort((a, b) => Number(b.stands) - Number(a.stands) || b.number - a.number);
  return { programme, parents };
}
