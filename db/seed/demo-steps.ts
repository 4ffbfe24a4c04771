import { randomUUID } from "node:crypto";
import { selectComparisonsOf } from "@/db/queries/comparisons";
import type { ImageName } from "@/db/seed/control-unit/revisions";
import { writeDescription } from "@/db/seed/control-unit/write-description";
import { DEMO_DESCRIPTION_NAME, demoImage } from "@/db/seed/demo-image";
import { driveRoadDay, type Effect } from "@/db/seed/demo-logs";
import { asOlderBox, OLDER_BOX_KEY } from "@/db/seed/demo-odd-log";
import type { DemoPerson } from "@/db/seed/demo-people";
import { uploadFile } from "@/db/seed/upload";
import { computeChangeSet } from "@/lib/jobs/calibration/compute-change-set";
import { computeCoverage } from "@/lib/jobs/calibration/compute-coverage";
import { readRevisionImage } from "@/lib/jobs/calibration/read-image";
import { computeComparison } from "@/lib/jobs/compute-comparison";
import { judgeRun } from "@/lib/jobs/judge-run";
import { askForChangeSet } from "@/lib/services/change-sets/ask";
import { saveChannelKey } from "@/lib/services/channel-keys/save";
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
    image: ImageName;
  },
): Promise<DemoRevision> {
  const fileName = `${args.title.toLowerCase().replaceAll(/[^a-z]+/g, "-")}.hex`;
  const uploadId = await uploadFile(ctx, "image", fileName, demoImage(args.image));
  const describes = async () => [
    await uploadFile(ctx, "description", DEMO_DESCRIPTION_NAME, writeDescription()),
  ];
  const made = await addRevision(
    ctx,
    {
      programmeId: args.programmeId,
      parentId: args.parent?.id ?? null,
      uploadId,
      descriptionUploadIds: args.parent ? [] : await describes(),
      sameDescription: args.parent !== null,
      title: args.title,
      note: "Sample data.",
      changeReason: args.reason,
      intendedUse: "closed_course",
      touchesEmissionOrSafety: false,
    },
    randomUUID(),
  );
  if (args.parent) await startValidating(ctx, { revisionId: made.revisionId });
  const { workspaceId, db, store } = ctx;
  await readRevisionImage({ db, store }, { workspaceId, revisionId: made.revisionId });
  return { id: made.revisionId, number: made.number };
}

/** What a revision changes against another one is worked out, and where the runs so far went on it. */
export async function compareImages(
  ctx: Ctx,
  { revision, against }: { revision: DemoRevision; against: DemoRevision },
): Promise<void> {
  const { workspaceId, db, store } = ctx;
  const pair = { revisionId: revision.id, againstId: against.id };
  const { changeSetId } = await askForChangeSet(ctx, pair);
  await computeChangeSet({ db, store }, { workspaceId, changeSetId });
  await computeCoverage({ db, store }, { workspaceId, changeSetId });
}

export interface DemoStrip {
  name: string;
  lengthM: number;
  gustMps: number;
  windNote: string;
}

/** Long, level and sheltered by woods. */
const AIRFIELD: DemoStrip = {
  name: "Old airfield, runway 04/22 (sample)",
  lengthM: 2900,
  gustMps: 0.3,
  windNote: "1 m/s along the strip, a few gusts",
};
/** The same length beside open water: gusts. */
export const HARBOUR: DemoStrip = {
  name: "Harbour quay road, closed (sample)",
  lengthM: 2900,
  gustMps: 1.2,
  windNote: "1 m/s along the quay, gusts off the water",
};

interface DemoDay {
  programmeId: string;
  day: string;
  strip?: DemoStrip;
  a: DemoRevision & { effect: Effect };
  b: DemoRevision & { effect: Effect };
  twinsPerSide: number;
  tempC: number;
  seed: number;
  /** Place of the one run that was recorded with the older recorder, whose columns a key explains. */
  olderBoxAt?: number;
}

/** A tester opens a road day, drives it in the order of the card and attaches every run, which is judged at once. */
async function driveDay(people: People, args: DemoDay & { isNullTest: boolean }): Promise<string> {
  const { sam } = people;
  const { strip = AIRFIELD, isNullTest } = args;
  const roadDay = await createRoadDay(sam, {
    programmeId: args.programmeId,
    nullTestRevisionId: isNullTest ? args.a.id : null,
    plannedTwins: args.twinsPerSide,
    day: args.day,
    zone: "Europe/Stockholm",
    stripName: strip.name,
    stripLengthM: strip.lengthM,
    driver: "Sam Okabe",
    recorder: "Mia Torvald",
    tempC: args.tempC,
    pressureHpa: 1008,
    humidityPct: 52,
    windNote: strip.windNote,
    fuelNote: "98 octane, one batch, filled before the first run",
    tyrePressureFrontKpa: 240,
    tyrePressureRearKpa: 230,
    massKg: null,
    sample: true,
  });
  await confirmChecklist(sam, { roadDayId: roadDay.id, confirmed: CHECKLIST.map(({ item }) => item) });
  const system = { db: sam.db, store: sam.store };
  const { gustMps } = strip;
  const runs = driveRoadDay({ ...args, gustMps, effectA: args.a.effect, effectB: args.b.effect });
  for (const run of runs) {
    const revision = run.side === "A" ? args.a : args.b;
    const isOlderBox = run.order === args.olderBoxAt;
    const fileName = `${args.day}-run-${String(run.order).padStart(2, "0")}-${run.leg}.csv`;
    const { runId } = await attachRun(
      sam,
      {
        uploadId: await uploadFile(sam, "log", fileName, isOlderBox ? asOlderBox(run.csv) : run.csv),
        roadDayId: roadDay.id,
        revisionId: revision.id,
        kind: "pull",
        leg: run.leg,
        driveOrder: run.order,
        letter: isNullTest ? run.side : null,
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
    if (!isOlderBox) continue;
    const key = { name: "Older black box", basedOnVersion: 0, key: OLDER_BOX_KEY, everyRun: true };
    await saveChannelKey(sam, { runId, ...key });
    await judgeRun(system, { workspaceId: sam.workspaceId, runId });
  }
  return roadDay.id;
}

/** One road day on two images, and the comparison of the two computed. */
export async function driveDemoDay(people: People, args: DemoDay): Promise<{ comparisonId: string }> {
  const { sam } = people;
  await driveDay(people, { ...args, isNullTest: false });
  await compareImages(sam, { revision: args.b, against: args.a });
  const { comparisonId } = await openComparison(sam, { revisionAId: args.a.id, revisionBId: args.b.id });
  await computeComparison({ db: sam.db, store: sam.store }, { workspaceId: sam.workspaceId, comparisonId });
  return { comparisonId };
}

/** One image against itself; its comparison was opened with the first run. */
export async function driveDemoNullTest(
  people: People,
  { image, ...args }: Omit<DemoDay, "a" | "b"> & { image: DemoDay["a"] },
): Promise<void> {
  const { sam } = people;
  const { workspaceId } = sam;
  const nullTestRoadDayId = await driveDay(people, { ...args, a: image, b: image, isNullTest: true });
  const sides = { workspaceId, revisionAId: image.id, revisionBId: image.id, nullTestRoadDayId };
  for (const { id: comparisonId } of await selectComparisonsOf(sam.db, sides))
    await computeComparison({ db: sam.db, store: sam.store }, { workspaceId, comparisonId });
}
