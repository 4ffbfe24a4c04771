import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { expect, type Locator, type Page } from "@playwright/test";
import { PASSPHRASE } from "./sign-in";

export interface PickedFile {
  name: string;
  mimeType: string;
  buffer: Buffer;
}

/** A golden file as a person has it on disk: unpacked. */
export function golden(path: string): Buffer {
  return gunzipSync(readFileSync(`tests/golden/${path}.gz`));
}

/** The same log packed: other bytes, the same content. */
export function packed(path: string): Buffer {
  return readFileSync(`tests/golden/${path}.gz`);
}

export const file = (name: string, buffer: Buffer): PickedFile => ({
  name,
  mimeType: "application/octet-stream",
  buffer,
});

async function chooseFiles(page: Page, button: string, files: PickedFile[]): Promise<void> {
  const chooser = page.waitForEvent("filechooser");
  await page.getByRole("button", { name: button }).click();
  await (await chooser).setFiles(files);
}

const row = (page: Page, name: string): Locator => page.getByRole("listitem", { name, exact: true });

export interface NewRevision {
  programme: string;
  image: PickedFile;
  title: string;
  parent: RegExp | null;
}

/** A calibrator adds an image as a draft. @returns the address of its page */
export async function addRevision(
  page: Page,
  { programme, image, title, parent }: NewRevision,
): Promise<string> {
  await page.goto(programme);
  await page.getByRole("link", { name: "Add revision" }).click();
  if (parent) {
    const option = page.getByLabel("Made from").getByRole("option", { name: parent });
    await page.getByLabel("Made from").selectOption(await option.getAttribute("value"));
  }
  await chooseFiles(page, "Choose a file", [image]);
  await page.getByRole("button", { name: "Read the image" }).click();
  await expect(page.getByRole("heading", { name: "What was understood" })).toBeVisible();
  await page.getByLabel("Title").fill(title);
  await page.getByLabel("Why it was changed").fill("To see in a test what it does.");
  await page.getByText("Closed course only").click();
  await page.getByText("No", { exact: true }).click();
  await page.getByRole("button", { name: "Add as a draft" }).click();
  await page.waitForURL(/\/revisions\/[0-9a-f-]{36}$/);
  return page.url();
}

/** A tester opens a road day and confirms its checklist. @returns its address */
export async function openRoadDay(page: Page, programme: string, day: string): Promise<string> {
  await page.goto(programme);
  await page.getByRole("link", { name: "New road day" }).click();
  await page.waitForURL(/\/road-days\/new/);
  await page.getByLabel(/^Day/).fill(day);
  await page.getByRole("combobox", { name: /^Strip/ }).fill("Test strip, level");
  await page.getByLabel("Driver").fill("A driver");
  await page.getByLabel("At the recorder").fill("A second person");
  await page.getByLabel("Air temperature").fill("17,9");
  await page.getByLabel("Station pressure").fill("1003");
  await page.getByLabel("Relative humidity").fill("56");
  await page.getByRole("button", { name: "Open the road day" }).click();
  await page.waitForURL(/\/road-days\/[0-9a-f-]{36}$/);
  const lines = page.locator('input[name="confirmed"]');
  await expect(lines.first()).toBeVisible();
  for (const line of await lines.all()) await line.check();
  await page.getByRole("button", { name: "Confirm what is ticked" }).click();
  await expect(page.getByText("Safety checklist confirmed")).toBeVisible();
  return page.url();
}

export interface DrivenLog {
  log: PickedFile;
  revision: RegExp;
  leg: "OUT" | "BACK";
  order: number;
}

/** Drops logs, says of each what it is, attaches them all and waits for their verdicts. */
export async function attachRuns(page: Page, logs: DrivenLog[]): Promise<void> {
  await chooseFiles(
    page,
    "Choose files",
    logs.map(({ log }) => log),
  );
  for (const { log, revision, leg, order } of logs) {
    const line = row(page, log.name);
    await expect(line.getByText("sent", { exact: true })).toBeVisible({ timeout: 60_000 });
    const inTheCar = line.getByLabel("In the car");
    await inTheCar.selectOption(await inTheCar.getByRole("option", { name: revision }).getAttribute("value"));
    await line.getByLabel("Place in the order").fill(String(order));
    await line.getByText(leg, { exact: true }).click();
    await line.getByLabel("Gear").selectOption("3");
  }
  await page.getByRole("button", { name: `Attach ${logs.length} runs` }).click();
  for (const { log } of logs) {
    await expect(row(page, log.name).getByText("Usable")).toBeVisible({ timeout: 120_000 });
  }
}

/** A lead promotes, waiving every must gate that is still open. */
export async function promote(page: Page, number: number): Promise<void> {
  await page.getByRole("link", { name: `Open the decision on R${number}` }).click();
  await page.waitForURL(/\/decide$/);
  await page.getByRole("radio", { name: /^Promote/ }).check();
  for (const box of await page.getByLabel("Waive this gate").all()) await box.check();
  for (const reason of await page.getByRole("textbox", { name: /^Reason for the waiver/ }).all()) {
    await reason.fill("Left open on purpose by a test of the whole loop.");
  }
  await page
    .getByRole("textbox", { name: /^Reason(?! for)/ })
    .fill("The gain is outside the band over the range asked for.");
  await page.getByLabel("Number of the revision").fill(`R${number}`);
  await page.getByLabel("Your signing passphrase").fill(PASSPHRASE);
  await page.getByRole("button", { name: /^Sign and promote/ }).click();
  await page.waitForURL(/\/records\/[0-9a-f-]{36}$/);
}
