import { countOthersWithRole } from "@/db/queries/people";
import { selectProgrammes } from "@/db/queries/programmes";
import { can } from "@/lib/policy/can";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { isInFlight, type LineageRevision, loadLineage } from "@/lib/services/programmes/lineage";
import { type NextStep, nextStepFor } from "@/lib/services/programmes/waiting";

export interface ProgrammeLine {
  id: string;
  name: string;
  goal: string;
  sample: boolean;
  archivedAt: Date | null;
  stands: Pick<LineageRevision, "id" | "number" | "title" | "stoodFrom"> | null;
  inFlight: Pick<LineageRevision, "id" | "number" | "title" | "state" | "runs">[];
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
  const programmes = rows.map(({ id, name, goal, sample, archivedAt, standingRevisionId }) => {
    const own = lineage.filter((revision) => revision.programmeId === id);
    return {
      ...{ id, name, goal, sample, archivedAt },
      stands: own.find((revision) => revision.id === standingRevisionId) ?? null,
      inFlight: own.filter(isInFlight),
      lastRunAt: newest(own.map((revision) => revision.newestRunAt)),
    };
  });
  const waiting = programmes
    .filter((programme) => programme.archivedAt === null)
    .flatMap((programme) =>
      programme.inFlight.flatMap((revision): WaitingLine[] => {
        const step = nextStepFor(ctx, revision, { otherActiveLead: otherLeads > 0 });
        if (!step) return [];
        const { id: revisionId, number: revisionNumber, title: revisionTitle, runs } = revision;
        const { id: programmeId, name: programmeName } = programme;
        return [{ programmeId, programmeName, revisionId, revisionNumber, revisionTitle, runs, step }];
      }),
    );
  return { programmes, waiting };
}
