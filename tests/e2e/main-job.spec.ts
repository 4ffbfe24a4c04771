import { createHash } from "node:crypto";
import { expect, type Page, test } from "@playwright/test";
import { signInAs } from "./sign-in";
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
  await page.getByLabel("Engine", { exact: true }).selectOption({ label: "Spark ignition" });
  await page.getByLabel("Charging").selectOption({ label: "Turbocharger" });
  await page.getByLabel("Driven wheels").selectOption({ index: 0 });
  await page.getByLabel("Part 1").fill("car, driver and fuel as weighed");
  await page.getByLabel("Mass").first().fill("1486");
  await page.getByLabel("Gear", { exact: true }).fill("3");
  await page.getByLabel("at engine speed").fill("3000");
  await page.getByLabel("at road speed").fill("64.6");
  await page.getByRole("button", { name: /programme/i }).click();
  await page.waitForURL(/\/programmes\/[0-9a-f-]{36}$/);
  return page.url();
}

test("the whole job: three roles, real files, promote, promote again, roll back", async ({ page }) => {
  test.setTimeout(600_000);
  const image = (name: string) => golden(`images/${name}`);
  const firstImage = image("ASAP2_Demo_V171.hex");
  const secondImage = image("bincopy_in.hex");
  const thirdImage = image("bincopy_convert.hex");

  await signInAs(page, "Jo Ferrande");
  const programme = await createProgramme(page, "Compact hatch of the browser test");

  await signInAs(page, "Mia Torvald");
  const r1 = await addRevision(page, {
    programme,
    image: file("as-read.hex", firstImage),
    title: "as the car came",
    parent: null,
  });

  await signInAs(page, "Ana Lindqvarn");
  await page.goto(r1);
  await page.getByText("Adopt as found").first().click();
  await page.getByLabel("How it was read").fill("over the diagnostic plug, whole");
  await page.getByLabel("A second read gave the same bytes").check();
  await page.getByLabel("Why this is the image as found").fill("Read before anything was changed.");
  await page.getByLabel("Your signing passphrase").fill("two passes one decision");
  await page.getByRole("button", { name: "Sign and adopt as found" }).click();
  await expect(page.getByText("stands", { exact: true }).first()).toBeVisible();

  await signInAs(page, "Mia Torvald");
  const r2 = await addRevision(page, {
    programme,
    image: file("boost-ramp.hex", secondImage),
    title: "boost ramp",
    parent: /^R1/,
  });
  await page.getByRole("button", { name: "Start validating" }).click();
  await expect(page.getByText("validating", { exact: true })).toBeVisible();

  await signInAs(page, "Sam Okabe");
  await openRoadDay(page, programme, "2030-01-01");
  await attachRuns(page, driven(/^R1/, /^R2/, golden, ".csv"));
  await page.goto(r2);
  await page.getByRole("button", { name: "Ask for a decision" }).click();
  await expect(page.getByText("in review", { exact: true })).toBeVisible();
  await page.getByRole("button", { name: "Compare with R1" }).click();
  await page.waitForURL(/\/comparisons\//);
  // The truth of the golden runs: +6 % torque from 2,500 to 4,500 per minute, nothing elsewhere.
  await expect(page.getByText(/Gain shown/).first()).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText(/Loss shown/)).toHaveCount(0);

  await signInAs(page, "Ana Lindqvarn");
  await page.goto(r2);
  await promote(page, 2);
  await page.goto(r2);
  const download = page.waitForEvent("download");
  await page.getByRole("link", { name: "Download the image" }).click();
  const stream = await (await download).createReadStream();
  const hash = createHash("sha256");
  for await (const chunk of stream) hash.update(chunk as Buffer);
  expect(hash.digest("hex")).toBe(createHash("sha256").update(secondImage).digest("hex"));

  await signInAs(page, "Mia Torvald");
  const r3 = await addRevision(page, {
    programme,
    image: file("boost-ramp-2.hex", thirdImage),
    title: "boost ramp, second go",
    parent: /^R2/,
  });
  await page.getByRole("button", { name: "Start validating" }).click();
  await expect(page.getByText("validating", { exact: true })).toBeVisible();

  await signInAs(page, "Sam Okabe");
  await openRoadDay(page, programme, "2030-01-02");
  await attachRuns(page, driven(/^R2/, /^R3/, packed, ".csv.gz"));
  await page.goto(r3);
  await page.getByRole("button", { name: "Compare with R2" }).click();
  await page.waitForURL(/\/comparisons\//);
  await expect(page.getByText(/Gain shown/).first()).toBeVisible({ timeout: 60_000 });
  await page.goto(r3);
  await page.getByRole("button", { name: "Ask for a decision" }).click();
  await expect(page.getByText("in review", { exact: true })).toBeVisible();

  await signInAs(page, "Ana Lindqvarn");
  await page.goto(r3);
  await promote(page, 3);

  await page.goto(`${programme}/roll-back`);
  await page.getByRole("link", { name: /R2/ }).first().click();
  await page.getByLabel("Reason").fill("The customer heard a noise on Friday evening.");
  await page.getByLabel("Number of the revision that stands again").fill("R2");
  await page.getByLabel("Your signing passphrase").fill("two passes one decision");
  await page.getByRole("button", { name: /Sign and roll back from R3 to R2/ }).click();
  await page.waitForURL(/\/records\//);
  await page.goto(programme);
  await expect(page.getByText(/stands since/).first()).toBeVisible();

  await page.goto(`/ledger?programme=${programme.split("/").at(-1)}`);
  for (const event of [
    "Rolled back",
    "Promoted a revision",
    "Adopted",
    "Asked for a decision",
    "Attached a run",
    "Added a revision",
  ]) {
    await expect(page.getByText(new RegExp(event)).first()).toBeVisible();
  }
  await expect(page.getByText(/The chain holds/)).toBeVisible();
});
