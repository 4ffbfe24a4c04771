import { selectComparisonsOf } from "@/db/queries/comparisons";
import { type RoadDayRow, selectNewestRoadDay, selectStripNames } from "@/db/queries/road-days";
import { selectDrivableRevisions } from "@/db/queries/runs";
import type { CampaignResult } from "@/lib/measure/types";
import { toCampaignVehicle } from "@/lib/measure/vehicle/vehicle-sheet";
import { type ComparisonStanding, comparisonStanding } from "@/lib/services/comparisons/load";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { type LoadedProgramme, loadProgramme } from "@/lib/services/programmes/load";
import { loadRoadDay } from "@/lib/services/road-days/load";
import { listRoadDayRuns } from "@/lib/services/runs/list";
import type { RoadDayRuns } from "@/lib/services/runs/schema";

export interface RoadDayView {
  roadDay: RoadDayRow;
  programme: LoadedProgramme["programme"];
  /** Revisions that runs may be attached to, newest first. */
  revisions: { id: string; number: number; title: string; stands: boolean }[];
  /** Twins a side that the gate plan asks for, or null without such a gate. */
  twinsAsked: number | null;
  gearCount: number;
  /** Gear that the sheet's speed at an engine speed was read off in; null when it has none. */
  gearOfSheet: number | null;
  /** Test mass of the newest vehicle sheet, kg. */
  sheetMassKg: number;
  runs: RoadDayRuns;
  /** What came of a null test; null on every other day and before its first run. */
  nullTest: {
    comparisonId: string;
    state: ComparisonStanding["state"];
    result: CampaignResult | null;
  } | null;
}

/** The null test under the standard settings, which is the one that its road day shows. */
async function nullTestOf(
  ctx: Ctx,
  { id: nullTestRoadDayId, nullTestRevisionId }: RoadDayRow,
): Promise<RoadDayView["nullTest"]> {
  if (nullTestRevisionId === null) return null;
  const { workspaceId } = ctx;
  const sides = { revisionAId: nullTestRevisionId, revisionBId: nullTestRevisionId, nullTestRoadDayId };
  const [comparison] = await selectComparisonsOf(ctx.db, { workspaceId, ...sides });
  if (!comparison) return null;
  const { state, shown } = await comparisonStanding(ctx.db, comparison);
  return { comparisonId: comparison.id, state, result: shown?.result ?? null };
}

function twinsAskedBy(plan: LoadedProgramme["plan"]): number | null {
  for (const gate of plan?.plan.gates ?? [])
    if (gate.kind === "evidence" && gate.ask === "closed_twins" && gate.level !== "off")
      return gate.atLeastPerSide;
  return null;
}

/**
 * Everything the road-day page shows.
 * @throws NotFoundError for another workspace's; ForbiddenError for readers
 */
export async function getRoadDay(ctx: Ctx, roadDayId: string): Promise<RoadDayView> {
  const roadDay = await loadRoadDay(ctx, roadDayId);
  const { programme, plan, sheet } = await loadProgramme(ctx, roadDay.programmeId);
  const runs = await listRoadDayRuns(ctx, roadDayId);
  const { workspaceId } = ctx;
  const drivable = await selectDrivableRevisions(ctx.db, { workspaceId, programmeId: programme.id });
  return {
    roadDay,
    programme,
    revisions: drivable.map(({ id, number, title, state }) => ({
      id,
      number,
      title,
      stands: state === "promoted",
    })),
    twinsAsked: twinsAskedBy(plan),
    gearCount: sheet.figures.gearRatios.length,
    gearOfSheet: sheet.figures.speedAtRpm?.gear ?? null,
    sheetMassKg: toCampaignVehicle(sheet.figures).mass_kg,
    runs,
    nullTest: await nullTestOf(ctx, roadDay),
  };
}

/**
 * What the form of a new road day offers: strips driven before, and the last day's strip, crew and car to take over.
 * @throws NotFoundError; ForbiddenError
 */
export async function prepareRoadDay(ctx: Ctx, programmeId: string) {
  authorise(ctx, "road_day.edit");
  const { programme, sheet } = await loadProgramme(ctx, programmeId);
  const { workspaceId } = ctx;
  const [strips, last, drivable] = await Promise.all([
    selectStripNames(ctx.db, { workspaceId }),
    selectNewestRoadDay(ctx.db, { workspaceId, programmeId }),
    selectDrivableRevisions(ctx.db, { workspaceId, programmeId }),
  ]);
  return { programme, strips, last, drivable, sheetMassKg: toCampaignVehicle(sheet.figures).mass_kg };
}
