import AxeBuilder from "@axe-core/playwright";
import { expect, type Page, test } from "@playwright/test";
import { signInAs } from "./sign-in";

// With TWINPASS_PICTURES set, the pictures of the README are written there too (npm run screenshots).
const PICTURES = process.env.TWINPASS_PICTURES;
const PICTURED = new Set([
  "comparison-light",
  "comparison-dark",
  "decide-light",
  "programme-light",
  "road-day-light-phone",
]);
const TAGS = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"];

/** Addresses of the demo, found by following its links as a lead who is a calibrator too. */
async function addresses(page: Page): Promise<Record<string, string>> {
  const link = async (pattern: string, text?: RegExp) => {
    const found = page.locator(`a[href^="${pattern}"]`, text ? { hasText: text } : {}).first();
    return (await found.getAttribute("href")) ?? "";
  };
  await page.goto("/programmes");
  const programme = await link("/programmes/", /Marlin/);
  await page.goto(programme);
  const revision = await link("/revisions/", /ignition revised/);
  const roadDay = await page
    .locator('a[href^="/road-days/"]:not([href*="new"])')
    .first()
    .getAttribute("href");
  const record = await link("/records/");
  await page.goto(revision);
  const run = await link("/runs/");
  await page.getByRole("button", { name: "Compare with R1" }).click();
  await page.waitForURL(/\/comparisons\//);
  return {
    programmes: "/programmes",
    programme,
    revision,
    comparison: new URL(page.url()).pathname,
    run,
    "channel-key": `${run}/channel-key`,
    "road-day": roadDay ?? "",
    "revision-new": `/revisions/new?programme=${programme.split("/").at(-1)}`,
    "road-day-new": `/road-days/new?programme=${programme.split("/").at(-1)}`,
    decide: `${revision}/decide`,
    "roll-back": `${programme}/roll-back`,
    record,
    "vehicle-sheet": `${programme}/vehicle-sheet`,
    gates: `${programme}/gates`,
    relevance: `${programme}/relevance`,
    "axis-links": `${programme}/axis-links?revision=${revision.split("/").at(-1)}`,
    "checksum-regions": `${programme}/checksum-regions`,
    plan: `${programme}/plan`,
    repeatability: `${programme}/repeatability`,
    analysis: `${programme}/analysis`,
    "programme-new": "/programmes/new",
    ledger: "/ledger",
    members: "/members",
    account: "/account",
  };
}

const PUBLIC = {
  "sign-in": "/sign-in",
  demo: "/demo",
  mail: "/demo/mail",
  methods: "/methods",
  cautions: "/cautions",
};

/** Each width and each colour scheme once; all four when pictures are taken. */
const THOROUGH = new Set(["light", "dark-phone"]);

async function look(page: Page, name: string, address: string, view: string): Promise<void> {
  const faults: string[] = [];
  const note = (message: { type: () => string; text: () => string }) => {
    if (message.type() === "error") faults.push(message.text());
  };
  page.on("console", note);
  await page.goto(address);
  await page.waitForLoadState("networkidle");
  expect(page.url(), name).toContain(address.split("?")[0]);
  await expect(page.locator("h1"), name).toHaveCount(1);
  if (PICTURES || THOROUGH.has(view)) {
    const { violations } = await new AxeBuilder({ page }).withTags(TAGS).analyze();
    const found = violations.map(
      ({ id, nodes }) => `${id}: ${nodes.map((node) => node.target.join(" ")).join(", ")}`,
    );
    expect(found, `${name} ${view}`).toEqual([]);
  }
  // Wider than the screen would scroll sideways; tables and figures scroll inside themselves.
  const overflow = await page.evaluate(
    () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
  );
  expect(overflow, `${name} ${view} scrolls sideways`).toBe(0);
  page.off("console", note);
  expect(faults, `${name} ${view} reports to the console`).toEqual([]);
  if (!PICTURES || !PICTURED.has(`${name}-${view}`)) return;
  const { width, height } = page.viewportSize() ?? { width: 1280, height: 900 };
  const clip = { x: 0, y: 0, width, height: Math.round(height * (width > height ? 1.35 : 1)) };
  await page.screenshot({ path: `${PICTURES}/${name}-${view}.png`, fullPage: true, clip });
}

for (const scheme of ["light", "dark"] as const) {
  for (const width of [1280, 390]) {
    const view = width === 1280 ? scheme : `${scheme}-phone`;
    test(`every page is in order, ${scheme}, ${width} px`, async ({ browser }) => {
      test.setTimeout(600_000);
      const context = await browser.newContext({
        colorScheme: scheme,
        viewport: { width, height: width === 1280 ? 900 : 844 },
      });
      const page = await context.newPage();
      for (const [name, address] of Object.entries(PUBLIC)) await look(page, name, address, view);
      await signInAs(page, "Jo Ferrande");
      for (const [name, address] of Object.entries(await addresses(page)))
        await look(page, name, address, view);
      await context.close();
    });
  }
}
