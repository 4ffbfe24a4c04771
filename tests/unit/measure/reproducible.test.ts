import { execFile } from "node:child_process";
import { promisify } from "node:util";
import { describe, expect, it } from "vitest";
import type { CampaignResult } from "@/lib/measure/types";

const run = promisify(execFile);

/** The bytes that a process of its own prints for the same simulated campaign. */
async function inChild(direction: "as driven" | "reversed"): Promise<string> {
  const args = ["--conditions=react-server", "--import", "tsx", "tests/support/analyse-child.ts", direction];
  const { stdout } = await run(process.execPath, args, { maxBuffer: 1e8 });
  return stdout;
}

describe("the analysis", () => {
  it("gives the same bytes in two processes, and the same figures in whatever order the runs are named", {
    timeout: 240_000,
  }, async () => {
    const first = await inChild("as driven");
    expect(await inChild("as driven")).toBe(first);
    const [named, other] = [first, await inChild("reversed")].map(
      (text) => JSON.parse(text) as CampaignResult,
    );
    // Sums are taken in another order then, so the last of the seven digits may turn; the band's draws are its own.
    expect(other.runs.map((result) => result.id)).toEqual(named.runs.map((result) => result.id).reverse());
    named.delta?.pct.forEach((pct, k) => {
      expect(other.delta?.pct[k]).toBeCloseTo(pct ?? Number.NaN, 3);
    });
    expect(other.sides.A.peak?.engine_kw).toBeCloseTo(named.sides.A.peak?.engine_kw ?? Number.NaN, 2);
  });
});
