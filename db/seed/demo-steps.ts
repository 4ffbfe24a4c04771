import { randomUUID } from "node:crypto";
import { demoImage, type Patch } from "@/db/seed/demo-image";
import { driveRoadDay, type Effect } from "@/db/seed/demo-logs";
import type { DemoPerson } from "@/db/seed/demo-people";
import { uploadFile } from "@/db/seed/upload";
import { computeComparison } from "@/lib/jobs/compute-comparison";
import { judgeRun } from "@/lib/jobs/judge-run";
import { openComparison } from "@/lib/services/comparisons/open";
import type { Ctx } from "@/lib/services/ctx";
import { addRevision } from "@/lib/services/revisions/create";
import { startValidating } from "@/lib/services/revisions/start-validating";
import { confirmChecklist } from "@/lib/services/road-days/confirm-checklist";
import { createRoadDay } from "@/lib/services/road-days/create";
import { CHECKLIST } from "@/lib/services/road-days/schema";
import { attachRun } from "@/lib/services/runs/attach";

export type People = Record<DemoPerson, Ctx>;
export interface DemoRevision {
  id: string;
  number: number;
}

/** A calibrator adds an image with its reason; all but the image as found go on to validating. */
export async function addDemoRevision(
  ctx: Ctx,
  args: {
    programmeId: string;
    parent: DemoRevision | null;
    title: string;
    reason: string;
    patches: readonly Patch[];
  },
): Promise<DemoRevision> {
  const fileName = `${args.title.toLowerCase().replaceAll(/[^a-z]+/g, "-")}.hex`;
  const uploadId = await uploadFile(ctx, "image", fileName, demoImage(args.patches));
  const made = await addRevision(
    ctx,
    {
      programmeId: args.programmeId,
      parentId: args.parent?.id ?? null,
      uploadId,
      title: args.title,
      note: "Sample data.",
      changeReason: args.reason,
      intendedUse: "closed_course",
      touchesEmissionOrSafety: false,
    },
    randomUUID(),
  );
  if (args.parent) await startValidating(ctx, { revisionId: made.revisionId });
  return { id: made.revisionId, number: made.number };
}

/** A tester drives one road day on two images, attaches every run, and the comparison of the two is computed. */
export async function driveDemoDay(
  people: People,
  args: {
    programmeId: string;
    day: string;
    a: DemoRevision & { effect: Effect };
    b: DemoRevision & { effect: Effect };
    twinsPerSide: number;
    tempC: number;
    seed: number;
  },
): Promise<{ comparisonId: string }> {
  const { sam } = people;
  const roadDay = await createRoadDay(sam, {
    programmeId: args.programmeId,
    day: args.day,
    zone: "Europe/Stockholm",
    stripName: "Old airfield, runway 04/22 (sample)",
    stripLengthM: 2900,
    driver: "Sam Okabe",
    recorder: "Mia Torvald",
    tempC: args.tempC,
    pressureHpa: 1008,
    humidityPct: 52,
    windNote: "1 m/s along the strip, a few gusts",
    fuelNote: "98 octane, one batch, filled before the first run",
    tyrePressureFrontKpa: 240,
    tyrePressureRearKpa: 230,
    massKg: null,
    sample: true,
  });
  await confirmChecklist(sam, { roadDayId: roadDay.id, confirmed: CHECKLIST.map(({ item }) => item) });
  const system = { db: sam.db, store: sam.store };
  const runs = driveRoadDay({ ...args, effectA: args.a.effect, effectB: args.b.effect });
  for (const run of runs) {
    const revision = run.side === "A" ? args.a : args.b;
    const fileName = `${args.day}-run-${String(run.order).padStart(2, "0")}-${run.leg}.csv`;
    const { runId } = await attachRun(
      sam,
      {
        uploadId: await uploadFile(sam, "log", fileName, run.csv),
        roadDayId: roadDay.id,
        revisionId: revision.id,
        kind: "pull",
        leg: run.leg,
        driveOrder: run.order,
        gear: 3,
        note: "",
        startedAt: null,
        tempC: run.tempC,
        pressureHpa: run.pressureHpa,
        humidityPct: run.humidityPct,
        sample: true,
      },
      { idempotencyKey: randomUUID() },
    );
    await judgeRun(system, { workspaceId: sam.workspaceId, runId });
  }
  const { comparisonId } = await openComparison(sam, { revisionAId: args.a.id, revisionBId: args.b.id });
  await computeComparison(system, { workspaceId: sam.workspaceId, comparisonId });
  return { comparisonId };
}
