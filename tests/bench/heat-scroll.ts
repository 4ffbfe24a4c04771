import { existsSync } from "node:fs";
import { type Browser, type CDPSession, chromium, type Page } from "@playwright/test";
import { createElement } from "react";
import { renderToStaticMarkup } from "react-dom/server";
import { build } from "vite";
import { heatStep } from "@/components/charts/heat/heat-ramp";
import { HeatTable, type HeatTableProps } from "@/components/charts/heat/heat-table";

const SIZE = 64;
const ROUNDS = 5;
const CHROMIUM = process.env.E2E_CHROMIUM ?? "/usr/bin/chromium";
const TRACED = "disabled-by-default-devtools.timeline.frame,devtools.timeline.frame";

/** A table of 64 × 64 in which every cell changed, as the product draws it. */
function table(): HeatTableProps {
  const points = Array.from({ length: SIZE }, (_, i) => String(100 * (i + 1)));
  const cells = points.map((_, row) =>
    points.map((_, column) => {
      const value = Math.sin(row / 9) * Math.cos(column / 7) * 9;
      return { text: value.toFixed(1), step: heatStep(value, 9), isUnvisited: (row + column) % 5 === 0 };
    }),
  );
  return { caption: "bench", x: { head: "x", points }, y: { head: "y", points }, cells };
}

/** The style sheet as the product builds it. */
async function styles(): Promise<string> {
  const made = await build({
    configFile: false,
    logLevel: "silent",
    build: { write: false, rollupOptions: { input: "app/globals.css" } },
  });
  const { output } = Array.isArray(made) ? made[0] : "output" in made ? made : { output: [] };
  return output.flatMap((file) => (file.type === "asset" ? [String(file.source)] : [])).join("\n");
}

interface Frames {
  dropped: number;
  drawn: number;
}

/** Scrolls down, across and back as a finger does, and counts what the compositor drew and dropped meanwhile. */
async function scroll(browser: Browser, page: Page, client: CDPSession): Promise<Frames> {
  await browser.startTracing(page, { categories: [TRACED] });
  for (const distance of [
    { yDistance: -1800 },
    { xDistance: -2500 },
    { yDistance: 1800 },
    { xDistance: 2500 },
  ])
    await client.send("Input.synthesizeScrollGesture", { x: 400, y: 400, speed: 1800, ...distance });
  const trace = JSON.parse(String(await browser.stopTracing())) as { traceEvents: { name: string }[] };
  const count = (name: string) => trace.traceEvents.filter((event) => event.name === name).length;
  return { dropped: count("DroppedFrame"), drawn: count("DrawFrame") };
}

/** Throws where axis points leave the box while its cells scroll: those of x stay at its top, those of y at its left. */
async function demandHeadsInSight(page: Page): Promise<void> {
  const off = await page.evaluate(() => {
    const box = document.querySelector(".heat-scroller");
    const [column, row] = ["thead tr:last-child th:nth-child(40)", "tbody tr:nth-child(40) th"].map((head) =>
      box?.querySelector(head),
    );
    if (!box || !column || !row) return null;
    box.scrollTo(700, 500);
    const [edge, top, left] = [box, column, row].map((part) => part.getBoundingClientRect());
    const moved = [box.scrollLeft, box.scrollTop];
    box.scrollTo(0, 0);
    return { moved, top: top.top - edge.top, left: left.left - edge.left };
  });
  if (off?.moved[0] !== 700 || off.moved[1] !== 500) throw new Error("the heat table did not scroll");
  if (Math.abs(off.top) > 2 || Math.abs(off.left) > 2)
    throw new Error(`axis points left the heat table: ${JSON.stringify(off)}`);
}

async function measure(browser: Browser, html: string, rounds: number, hasHeads = false): Promise<Frames> {
  const page = await browser.newPage({ viewport: { width: 1280, height: 900 } });
  await page.setContent(html);
  if (hasHeads) await demandHeadsInSight(page);
  const client = await page.context().newCDPSession(page);
  await scroll(browser, page, client);
  const seen: Frames[] = [];
  for (let round = 0; round < rounds; round += 1) seen.push(await scroll(browser, page, client));
  await page.close();
  return seen.sort((a, b) => a.dropped - b.dropped)[rounds >> 1];
}

/** A box that holds every frame up for 100 ms: where none of its frames counts as dropped, nothing can be measured. */
const STUTTER = `<div class="heat-scroller" id="s" style="height:500px;overflow:auto"><p style="height:5000px">x</p></div>
<script>const s = document.getElementById("s");
for (const name of ["wheel", "touchstart", "touchmove"]) s.addEventListener(name, () => {}, { passive: false });
const hold = () => { const end = performance.now() + 100; while (performance.now() < end); s.style.outlineOffset = Math.random() + "px"; requestAnimationFrame(hold); };
requestAnimationFrame(hold);</script>`;

/** Frames that Chromium drops while a heat table of 64 × 64 is scrolled: the middle of five rounds; none may be. */
export async function printHeatScroll(): Promise<boolean | null> {
  const against = "dropped frames".padEnd(40);
  const what = `scroll a heat table of ${SIZE} × ${SIZE} in Chromium`;
  if (!existsSync(CHROMIUM)) {
    console.log(`not run  ${against} ${what}: Chromium is not installed`);
    return null;
  }
  const css = await styles();
  const document = (body: string) => `<!doctype html><style>${css}</style><body><main>${body}</main>`;
  const args = process.getuid?.() === 0 ? ["--no-sandbox"] : [];
  const browser = await chromium.launch({ executablePath: CHROMIUM, args });
  try {
    if ((await measure(browser, document(STUTTER), 1)).dropped === 0) {
      console.log(
        `not run  ${against} ${what}: this Chromium tells of no dropped frame where every one is late`,
      );
      return null;
    }
    const html = renderToStaticMarkup(createElement(HeatTable, table()));
    const { dropped, drawn } = await measure(browser, document(html), ROUNDS, true);
    const inside = dropped === 0;
    console.log(
      `${dropped.toFixed(0).padStart(7)}  ${against} ${what}: ${inside ? "inside" : "OUTSIDE"} 0 (${drawn} frames drawn)`,
    );
    return inside;
  } finally {
    await browser.close();
  }
}
