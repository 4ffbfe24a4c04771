import { expect, type Page, test } from "@playwright/test";
import { signInAs } from "./sign-in";

/** The page of the demo's revision that changes ignition, opened on its change set. */
async function openRevision(page: Page, person: string): Promise<void> {
  await signInAs(page, person);
  const follow = async (selector: string, text: RegExp) =>
    page.goto((await page.locator(selector, { hasText: text }).first().getAttribute("href")) ?? "");
  await follow('a[href^="/programmes/"]', /Marlin/);
  await follow('a[href^="/revisions/"]:not([href$="/decide"])', /ignition revised/);
  await expect(page.getByRole("navigation", { name: "Changes" })).toBeVisible({ timeout: 60_000 });
}

const heading = (page: Page) => page.locator("#change-heading");
const rows = (page: Page) => page.getByRole("navigation", { name: "Changes" }).getByRole("link");

test("walks from change to change by key, marks one as looked at, and opens its heat table", async ({
  page,
}) => {
  await openRevision(page, "Jo Ferrande");
  await expect(page.getByText(/differs? from R\d+; .* cells?; /)).toBeVisible();
  const count = await rows(page).count();
  expect(count).toBeGreaterThan(1);
  const first = await heading(page).textContent();

  await page.keyboard.press("n");
  await expect(heading(page)).not.toHaveText(first ?? "");
  await expect(heading(page)).toBeFocused();
  await expect(page).toHaveURL(/[?&]change=/);
  await page.keyboard.press("p");
  await expect(heading(page)).toHaveText(first ?? "");

  await expect(page.getByText(`0 of ${count} looked at`)).toBeVisible();
  await page.keyboard.press("l");
  await expect(page.getByText(`1 of ${count} looked at`)).toBeVisible();
  await expect(page.getByText("Marked as looked at.")).toBeAttached();
  await page.waitForLoadState("networkidle");
  await page.reload();
  await expect(page.getByText(`1 of ${count} looked at`)).toBeVisible();

  await page.keyboard.press("?");
  await expect(page.getByRole("dialog", { name: "Keys" })).toBeVisible();
  await page.keyboard.press("Escape");

  await rows(page)
    .filter({ has: page.getByText("map", { exact: true }) })
    .first()
    .click();
  const name = (await heading(page).textContent()) ?? "";
  await expect(page.getByRole("table", { name: new RegExp(`^${name}, after − before`) })).toBeVisible();
  await page.getByText("After", { exact: true }).first().click();
  await expect(page.getByRole("table", { name: new RegExp(`^${name}, after, in`) })).toBeVisible();
  await expect(page).toHaveURL(/show=after/);
});

test("shows the same change to whoever follows the link, also without script", async ({ browser, page }) => {
  // Marks are a person's own: somebody else than above.
  await openRevision(page, "Ana Lindqvarn");
  await page.keyboard.press("n");
  await expect(page).toHaveURL(/[?&]change=/);
  const name = (await heading(page).textContent()) ?? "";
  const state = await page.context().storageState();
  const plain = await browser.newContext({ javaScriptEnabled: false, storageState: state });
  const other = await plain.newPage();
  await other.goto(page.url());
  await expect(heading(other)).toHaveText(name);
  await other.getByRole("link", { name: "Next", exact: true }).click();
  await expect(heading(other)).not.toHaveText(name);
  await other.getByRole("button", { name: "Looked at" }).click();
  await expect(other.getByRole("button", { name: "Looked at", pressed: true })).toBeVisible();
  await plain.close();
});
