import { countOthersWithRole } from "@/db/queries/people";
import { selectProgrammes } from "@/db/queries/programmes";
import { can } from "@/lib/policy/can";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { isInFlight, type LineageRevision, loadLineage } from "@/lib/services/programmes/lineage";
import { type NextStep, nextStepFor } from "@/lib/services/programmes/waiting";

type ListedRevision = Pick<LineageRevision, "id" | "number" | "title" | "state" | "runs" | "stoodFrom">;

export interface ProgrammeLine {
  id: string;
  name: string;
  goal: string;
  sample: boolean;
  archivedAt: Date | null;
  stands: ListedRevision | null;
  inFlight: ListedRevision[];
  lastRunAt: Date | null;
}

export interface WaitingLine {
  programmeId: string;
  programmeName: string;
  revisionId: string;
  revisionNumber: number;
  revisionTitle: string;
  runs: number;
  step: NextStep;
}

/** Only what a list shows leaves this verb. */
function pick({ id, number, title, state, runs, stoodFrom }: LineageRevision): ListedRevision {
  return { id, number, title, state, runs, stoodFrom };
}

function newest(dates: (Date | null)[]): Date | null {
  const known = dates.filter((date) => date !== null);
  return known.length === 0 ? null : new Date(Math.max(...known.map(Number)));
}

/** What stands, what is in flight and what waits for the asker. Readers see what is shared with them. */
export async function listProgrammes(
  ctx: Ctx,
): Promise<{ programmes: ProgrammeLine[]; waiting: WaitingLine[] }> {
  authorise(ctx, "workspace.view");
  const { workspaceId, userId } = ctx;
  const sharedWith = can(ctx, "programme.view", { granted: false }).ok ? undefined : userId;
  const rows = await selectProgrammes(ctx.db, { workspaceId, sharedWith });
  const lineage = await loadLineage(
    ctx,
    rows.map((row) => row.id),
  );
  const otherLeads = await countOthersWithRole(ctx.db, { workspaceId, userId, role: "lead" });
  const known = rows.map((row) => {
    const own = lineage.filter((revision) => revision.programmeId === row.id);
    return { row, own, flying: own.filter(isInFlight) };
  });
  const waiting = known
    .filter(({ row }) => row.archivedAt === null)
    .flatMap(({ row, flying }) =>
      flying.flatMap((revision): WaitingLine[] => {
        const step = nextStepFor(ctx, revision, { otherActiveLead: otherLeads > 0 });
        if (!step) return [];
        const { id: revisionId, number: revisionNumber, title: revisionTitle, runs } = revision;
        const { id: programmeId, name: programmeName } = row;
        return [{ programmeId, programmeName, revisionId, revisionNumber, revisionTitle, runs, step }];
      }),
    );
  const programmes = known.map(({ row, own, flying }): ProgrammeLine => {
    const { id, name, goal, sample, archivedAt, standingRevisionId } = row;
    const standing = own.find((revision) => revision.id === standingRevisionId);
    return {
      ...{ id, name, goal, sample, archivedAt },
      stands: standing ? pick(standing) : null,
      inFlight: flying.map(pick),
      lastRunAt: newest(own.map((revision) => revision.newestRunAt)),
    };
  });
  return { programmes, waiting };
}
