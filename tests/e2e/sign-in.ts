import { type Browser, expect, type Page } from "@playwright/test";

/** What every demo person signs with (lib/demo.ts). */
export const PASSPHRASE = "two passes one decision";

/** Signs in as a demo person by one click. */
export async function signInAs(page: Page, name: string): Promise<void> {
  await page.goto("/sign-in");
  await page.getByRole("button", { name: new RegExp(name) }).click();
  await expect(page).toHaveURL(/\/programmes$/);
}

/** A person at a browser of their own. */
export async function openAs(browser: Browser, name: string): Promise<Page> {
  const page = await (await browser.newContext()).newPage();
  await signInAs(page, name);
  return page;
}
