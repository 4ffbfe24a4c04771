import { selectMembers } from "@/db/queries/members";
import { selectNewestRoadDays } from "@/db/queries/programme-overview";
import type { Verdict } from "@/lib/policy/actor";
import { can, isMasked } from "@/lib/policy/can";
import type { Ctx } from "@/lib/services/ctx";
import { gateStatus } from "@/lib/services/gates/status";
import { readProgrammeHistory } from "@/lib/services/ledger/read";
import { isInFlight, loadLineage } from "@/lib/services/programmes/lineage";
import { loadProgramme } from "@/lib/services/programmes/load";

const ROAD_DAYS = 5;
/** Many entries of one kind are told as one. */
const ENTRIES = 60;

/** The same verdict for whoever may, refused with a plain sentence while the programme is archived or the thing is missing. */
function unless(reason: string | null, verdict: Verdict): Verdict {
  return verdict.ok && reason !== null ? { ok: false, reason } : verdict;
}

/** Everything the programme page shows. @throws NotFoundError, ForbiddenError */
export async function getProgramme(ctx: Ctx, programmeId: string) {
  const { workspaceId, db } = ctx;
  const { programme, sheet, plan, granted } = await loadProgramme(ctx, programmeId);
  const seesHistory = can(ctx, "history.view").ok;
  const seesRuns = can(ctx, "run.view", { granted: false }).ok;
  const [lineage, members, roadDays, history] = await Promise.all([
    loadLineage(ctx, [programmeId]),
    selectMembers(db, { workspaceId }),
    seesRuns ? selectNewestRoadDays(db, { workspaceId, programmeId, limit: ROAD_DAYS }) : [],
    seesHistory ? readProgrammeHistory(ctx, { programmeId, limit: ENTRIES }) : [],
  ]);
  const masked = isMasked(ctx, "member.list");
  const inFlight = lineage.filter(isInFlight);
  const gates = await Promise.all(
    inFlight.map(async ({ id }) => [id, (await gateStatus(ctx, { revisionId: id })).results] as const),
  );
  const standing = lineage.find((revision) => revision.id === programme.standingRevisionId) ?? null;
  const archived = programme.archivedAt === null ? null : "This programme is archived.";
  const noRollBack = standing === null ? "No revision stands, so there is nothing to roll back from." : null;
  return {
    programme,
    sheet,
    plan,
    granted,
    lineage,
    standing,
    inFlight,
    gates: new Map(gates),
    roadDays,
    history,
    people: members
      .filter((member) => member.disabledAt === null)
      .map(({ userId, name, roles }) => ({ userId, name: name ?? "somebody", roles: masked ? [] : roles })),
    may: {
      addRevision: unless(archived, can(ctx, "revision.upload")),
      addRoadDay: unless(archived, can(ctx, "road_day.edit")),
      compare: can(ctx, "comparison.create"),
      rollBack: unless(noRollBack, can(ctx, "decision.roll_back")),
      edit: can(ctx, "programme.edit"),
      changeSheet: unless(archived, can(ctx, "vehicle.version")),
      changePlan: unless(archived, can(ctx, "gate_plan.version")),
      share: can(ctx, "programme.share"),
      archive: can(ctx, "programme.archive"),
    },
  };
}

export type ProgrammeOverview = Awaited<ReturnType<typeof getProgramme>>;
