import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { countChecks, countPlaywright, countVitest } from "@/docker-less-setup/count-results.mjs";

const folder = mkdtempSync(join(tmpdir(), "twinpass-count-"));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function report(content: unknown): string {
  const file = join(folder, "report.json");
  writeFileSync(file, typeof content === "string" ? content : JSON.stringify(content));
  return file;
}

const VITEST = { numPassedTests: 5, numFailedTests: 0, numPendingTests: 0, numTodoTests: 0, testResults: [] };
const STATS = { expected: 4, unexpected: 0, flaky: 0, skipped: 0 };

describe("the last line of npm test", () => {
  it("counts what passed and what failed", () => {
    expect(countVitest(report(VITEST), 0)).toMatchObject({ passed: 5, failed: 0 });
    expect(countVitest(report({ ...VITEST, numFailedTests: 2 }), 1)).toMatchObject({ passed: 5, failed: 2 });
    expect(countPlaywright(report({ stats: STATS }), 0)).toMatchObject({ passed: 4, failed: 0 });
    expect(countPlaywright(report({ stats: { ...STATS, unexpected: 1 } }), 1)).toMatchObject({ failed: 1 });
    expect(countChecks(report({ passed: 4, failed: 1 }), 1)).toMatchObject({ passed: 4, failed: 1 });
  });

  it("counts a test that did not run, or only at a second try, as failed", () => {
    expect(countVitest(report({ ...VITEST, numPendingTests: 1, numTodoTests: 1 }), 0).failed).toBe(2);
    expect(countPlaywright(report({ stats: { ...STATS, skipped: 1, flaky: 1 } }), 0).failed).toBe(2);
  });

  it("counts a test file that could not be loaded as failed", () => {
    const testResults = [{ status: "failed", assertionResults: [] }];
    expect(countVitest(report({ ...VITEST, testResults }), 1).failed).toBe(1);
  });

  it("never takes a runner that failed, ran nothing or left no report for a success", () => {
    expect(countVitest(report(VITEST), 1).failed).toBe(1);
    expect(countVitest(report({ ...VITEST, numPassedTests: 0 }), 0).failed).toBe(1);
    expect(countPlaywright(report({ stats: STATS }), null).failed).toBe(1);
    expect(countPlaywright(join(folder, "nowhere.json"), 0).failed).toBe(1);
    expect(countVitest(report('{ "numPassed'), 0).failed).toBe(1);
    expect(countChecks(join(folder, "nowhere.json"), 0).failed).toBe(1);
  });
});
