import { expect, type Page } from "@playwright/test";

/** What every demo person signs with (lib/demo.ts). */
export const PASSPHRASE = "two passes one decision";

/** Signs in as a demo person by one click, after signing whoever it was before out. */
export async function signInAs(page: Page, name: string): Promise<void> {
  await page.context().clearCookies({ name: "authjs.session-token" });
  await page.goto("/sign-in");
  await page.getByRole("button", { name: new RegExp(name) }).click();
  await expect(page).toHaveURL(/\/programmes$/);
}
