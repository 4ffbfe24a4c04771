import { createHash } from "node:crypto";
import { expect, type Page, test } from "@playwright/test";
import { openAs, PASSPHRASE } from "./sign-in";
import { addRevision, attachRuns, type DrivenLog, file, golden, openRoadDay, packed, promote } from "./steps";

/** Order and legs in which the golden runs were driven (tests/golden/README.md). */
const SIDES = "ABBABAABABBA";
const RUNS = [...SIDES].map((side, index) => ({
  side,
  leg: index % 2 === 0 ? ("OUT" as const) : ("BACK" as const),
  order: index + 1,
  name: `r${String(index + 1).padStart(2, "0")}`,
}));

const driven = (a: RegExp, b: RegExp, bytes: (path: string) => Buffer, ending: string): DrivenLog[] =>
  RUNS.map(({ side, leg, order, name }) => ({
    log: file(`${name}${ending}`, bytes(`runs/p1-hatch-a-b/${name}.csv`)),
    revision: side === "A" ? a : b,
    leg,
    order,
  }));

/** A compact hatch as campaign-known.json of the golden runs has it. */
async function createProgramme(page: Page, name: string): Promise<string> {
  await page.goto("/programmes/new");
  await page.getByLabel("Name", { exact: false }).first().fill(name);
  await page.getByLabel("Goal").fill("Six per cent more torque between 2,500 and 4,500 per minute.");
  const sheet: [string, string][] = [
    ["Vehicle", "compact hatch, front drive"],
    ["Displacement", "2"],
    ["Idle speed", "800"],
    ["Speed limiter", "6600"],
    ["Gear ratios", "3.62 2.11 1.44 1.09 0.88 0.73"],
    ["Final drive", "3.75"],
    ["Tyre marking", "225/40 R18"],
  ];
  for (const [label, value] of sheet) await page.getByLabel(label).first().fill(value);
  await page.getByLabel("Engine", { exact: true }).selectOption("spark ignition");
  await page.getByLabel("Charging").selectOption("turbo");
  await page.getByLabel("Driven wheels").selectOption("FWD");
  // Car, driver, fuel and load: 1,486 kg as tested.
  const masses = page.getByRole("textbox", { name: /^Mass/ });
  for (const [index, kg] of ["1286", "150", "45", "5"].entries()) await masses.nth(index).fill(kg);
  await page.getByRole("textbox", { name: /^Gear(?! ratios)/ }).fill("3");
  await page.getByLabel("at engine speed").fill("3000");
  await page.getByLabel("at road speed").fill("64.6");
  await page.getByRole("button", { name: "Make programme" }).click();
  await page.waitForURL(/\/programmes\/[0-9a-f-]{36}$/);
  return page.url();
}

test("the whole job: three roles, real files, promote, promote again, roll back", async ({ browser }) => {
  test.setTimeout(900_000);
  const image = (name: string) => golden(`images/${name}`);
  const firstImage = image("ASAP2_Demo_V171.hex");
  const secondImage = image("bincopy_in.hex");
  const thirdImage = image("bincopy_fill.hex");

  const jo = await openAs(browser, "Jo Ferrande");
  const mia = await openAs(browser, "Mia Torvald");
  const sam = await openAs(browser, "Sam Okabe");
  const ana = await openAs(browser, "Ana Lindqvarn");
  const programme = await createProgramme(jo, `Compact hatch ${Date.now()}`);

  const r1 = await addRevision(mia, {
    programme,
    image: file("as-read.hex", firstImage),
    title: "as the car came",
    parent: null,
  });

  await ana.goto(r1);
  await ana.getByText("Adopt as found").first().click();
  await ana.getByLabel("How it was read").fill("over the diagnostic plug, whole");
  await ana.getByLabel("A second read gave the same bytes").check();
  await ana.getByLabel("Why this is the image as found").fill("Read before anything was changed.");
  await ana.getByLabel("Your signing passphrase").fill(PASSPHRASE);
  await ana.getByRole("button", { name: "Sign and adopt as found" }).click();
  await expect(ana.getByText("stands", { exact: true }).first()).toBeVisible();

  const r2 = await addRevision(mia, {
    programme,
    image: file("boost-ramp.hex", secondImage),
    title: "boost ramp",
    parent: /^R1/,
  });
  await mia.getByRole("button", { name: "Start validating" }).click();
  await expect(mia.getByText("validating", { exact: true })).toBeVisible();

  await openRoadDay(sam, programme, "2030-01-01");
  await attachRuns(sam, driven(/^R1/, /^R2/, golden, ".csv"));
  await sam.goto(r2);
  await sam.getByRole("button", { name: "Ask for a decision" }).click();
  await expect(sam.getByText("in review", { exact: true })).toBeVisible();
  await sam.getByRole("button", { name: "Compare with R1" }).click();
  await sam.waitForURL(/\/comparisons\//);
  // The truth of the golden runs: +6 % torque from 2,500 to 4,500 per minute, nothing elsewhere.
  await expect(sam.getByText(/Gain shown/).first()).toBeVisible({ timeout: 60_000 });
  await expect(sam.getByText(/Loss shown/)).toHaveCount(0);

  await ana.goto(r2);
  await promote(ana, 2);
  await ana.goto(r2);
  const download = ana.waitForEvent("download");
  await ana.getByRole("link", { name: "Download the image" }).click();
  const stream = await (await download).createReadStream();
  const hash = createHash("sha256");
  for await (const chunk of stream) hash.update(chunk as Buffer);
  expect(hash.digest("hex")).toBe(createHash("sha256").update(secondImage).digest("hex"));

  const r3 = await addRevision(mia, {
    programme,
    image: file("boost-ramp-2.hex", thirdImage),
    title: "boost ramp, second go",
    parent: /^R2/,
  });
  await mia.getByRole("button", { name: "Start validating" }).click();
  await expect(mia.getByText("validating", { exact: true })).toBeVisible();

  await openRoadDay(sam, programme, "2030-01-02");
  await attachRuns(sam, driven(/^R2/, /^R3/, packed, ".csv.gz"));
  await sam.goto(r3);
  await sam.getByRole("button", { name: "Compare with R2" }).click();
  await sam.waitForURL(/\/comparisons\//);
  await expect(sam.getByText(/Gain shown/).first()).toBeVisible({ timeout: 60_000 });
  await sam.goto(r3);
  await sam.getByRole("button", { name: "Ask for a decision" }).click();
  await expect(sam.getByText("in review", { exact: true })).toBeVisible();

  await ana.goto(r3);
  await promote(ana, 3);

  await ana.goto(`${programme}/roll-back`);
  await ana.getByRole("link", { name: /R2/ }).first().click();
  await ana.getByRole("textbox", { name: /^Reason/ }).fill("The customer heard a noise on Friday evening.");
  await ana.getByLabel("Number of the revision that stands again").fill("R2");
  await ana.getByLabel("Your signing passphrase").fill(PASSPHRASE);
  await ana.getByRole("button", { name: /Sign and roll back from R3 to R2/ }).click();
  await ana.waitForURL(/\/records\//);
  await ana.goto(programme);
  await expect(ana.getByText(/stands since/).first()).toBeVisible();

  await ana.goto(`/ledger?programme=${programme.split("/").at(-1)}`);
  const events = [
    /Rolled back to R2/,
    /Promoted R3/,
    /Promoted R2/,
    /Adopted R1 as found/,
    /Asked for a decision on R2/,
    /Attached run/,
    /Added R3/,
  ];
  for (const event of events) await expect(ana.getByText(event).first()).toBeVisible();
  await expect(ana.getByText(/The chain holds/)).toBeVisible();
});
