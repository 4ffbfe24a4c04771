import { HATCH_SHEET } from "@/db/seed/demo-car";
import { EFFECTS } from "@/db/seed/demo-effects";
import { settleCalibration } from "@/db/seed/demo-settings";
import {
  addDemoRevision,
  compareImages,
  type DemoRevision,
  driveDemoDay,
  driveDemoNullTest,
  HARBOUR,
  type People,
} from "@/db/seed/demo-steps";
import { DEMO_PASSPHRASE } from "@/lib/demo";
import type { Ctx } from "@/lib/services/ctx";
import { getDecisionDesk } from "@/lib/services/decisions/load-desk";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { rollBack } from "@/lib/services/decisions/roll-back";
import { turnDownRevision } from "@/lib/services/decisions/send-back";
import { createProgramme } from "@/lib/services/programmes/create";
import { shareProgramme } from "@/lib/services/programmes/share";
import { adoptRevisionAsFound } from "@/lib/services/revisions/adopt";
import { askForDecision } from "@/lib/services/revisions/ask-for-decision";

const passphrase = DEMO_PASSPHRASE;

/** What a lead sees on the decision page, as the form sends it back. */
async function seenBy(lead: Ctx, revision: DemoRevision) {
  const desk = await getDecisionDesk(lead, revision.id);
  return {
    open: desk.gates.results.filter(
      (gate) => gate.level === "must" && gate.state !== "met" && gate.state !== "does_not_apply",
    ),
    planVersion: desk.gates.planVersion,
    seen: {
      revisionId: revision.id,
      rowVersion: desk.revision.rowVersion,
      standingRevisionId: desk.standing?.id ?? null,
      comparisonId: desk.comparison?.id ?? null,
      inputSha256: desk.comparison?.inputSha256 ?? null,
      shownInputSha256: desk.comparison?.basis?.inputSha256 ?? null,
      calibrationSha256: desk.calibration.seenSha256,
    },
  };
}

/**
 * The story of one programme: an image as found; a first change promoted and rolled back; a second turned down;
 * a third that waits for a lead. Every step is the product's own verb, so nothing in it is made up but the car.
 */
export async function tellStory(people: People): Promise<void> {
  const { mia, ana, jo, sam, noor } = people;
  const { programmeId } = await createProgramme(jo, {
    name: "Marlin hatch 2.0 turbo",
    goal: "More torque between 2,300 and 4,700 per minute, nothing lost elsewhere.",
    sheet: HATCH_SHEET,
  });
  await shareProgramme(ana, { programmeId, userId: noor.userId, expiresOn: inDays(300) });

  await settleCalibration(people, programmeId);

  const asFound = await addDemoRevision(mia, {
    programmeId,
    parent: null,
    title: "as the car came",
    reason: "The image that was in the car.",
    image: "asFound",
  });
  await adoptRevisionAsFound(ana, {
    revisionId: asFound.id,
    reason: "Read before anything was changed.",
    howRead: "over the diagnostic plug, whole image",
    secondReadEqual: true,
    passphrase,
  });

  // Before the first change: how well does this car repeat itself, on either strip?
  const again = { programmeId, image: { ...asFound, effect: EFFECTS.asFound } };
  await driveDemoNullTest(people, {
    ...again,
    day: "2026-08-22",
    strip: HARBOUR,
    twinsPerSide: 2,
    tempC: 18,
    seed: 9,
  });
  await driveDemoNullTest(people, { ...again, day: "2026-08-29", twinsPerSide: 3, tempC: 17, seed: 10 });

  const midRange = await addDemoRevision(mia, {
    programmeId,
    parent: asFound,
    title: "mid-range torque",
    reason: "More air between 2,300 and 4,700 per minute.",
    image: "midRange",
  });
  const first = { programmeId, a: { ...asFound, effect: EFFECTS.asFound }, twinsPerSide: 4 };
  await driveDemoDay(people, {
    ...first,
    day: "2026-09-12",
    b: { ...midRange, effect: EFFECTS.midRange },
    tempC: 16,
    seed: 11,
  });
  await askForDecision(sam, { revisionId: midRange.id });
  const promoted = await seenBy(ana, midRange);
  await promoteRevision(ana, {
    ...promoted.seen,
    gatePlanVersion: promoted.planVersion,
    typedNumber: `R${midRange.number}`,
    reason: "The gain is outside the band over the whole range that was asked for.",
    waivers: promoted.open.map((gate) => ({
      gateId: gate.id,
      reason: "Eight runs a side leave this open; no loss is seen anywhere in the mean.",
    })),
    passphrase,
  });
  await rollBack(jo, {
    programmeId,
    toRevisionId: asFound.id,
    standingRevisionId: midRange.id,
    typedNumber: `R${asFound.number}`,
    reason:
      "The customer heard knock on a 31 °C day. Back to the image as found until the ignition is revised.",
    passphrase,
  });

  const topEnd = await addDemoRevision(mia, {
    programmeId,
    parent: asFound,
    title: "later ignition, top end",
    reason: "Room against knock above 5,400 per minute.",
    image: "topEnd",
  });
  await driveDemoDay(people, {
    ...first,
    day: "2026-10-03",
    b: { ...topEnd, effect: EFFECTS.topEnd },
    tempC: 13,
    seed: 12,
  });
  await askForDecision(mia, { revisionId: topEnd.id });
  const turnedDown = await seenBy(jo, topEnd);
  await turnDownRevision(jo, {
    ...turnedDown.seen,
    reason: "Torque is lost above 5,400 per minute and nothing is gained.",
    passphrase,
  });

  const ignition = await addDemoRevision(mia, {
    programmeId,
    parent: midRange,
    title: "mid-range torque, ignition revised",
    reason: "As R2, with two degrees less ignition where the knock was heard.",
    image: "ignition",
  });
  await driveDemoDay(people, {
    ...first,
    day: "2026-11-21",
    b: { ...ignition, effect: EFFECTS.ignition },
    tempC: 7,
    seed: 13,
    olderBoxAt: 16,
  });
  await compareImages(sam, { revision: ignition, against: midRange });
  await askForDecision(sam, { revisionId: ignition.id });
}

function inDays(days: number): string {
  return new Date(Date.now() + days * 86_400_000).toISOString().slice(0, 10);
}
