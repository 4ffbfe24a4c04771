import { describe, expect, it } from "vitest";
import { CHECKS, runChecks } from "./check.mjs";
import { LEGAL, makeProject, outcome } from "./sample-project";

describe("npm run check", () => {
  for (const { name } of CHECKS.filter((check) => ["structure", "boundaries", "lint"].includes(check.name))) {
    it(`${name} accepts a legal project`, async () => {
      expect(await outcome(name, LEGAL)).toMatchObject({ ok: true });
    });
  }

  it("counts what failed and goes on to the next check", async () => {
    const lines: string[] = [];
    const files = {
      ...LEGAL,
      "lib/signal/mean.ts": "export const mean = (values: number[]): string => values;\n",
    };
    const { passed, failed } = await runChecks(makeProject(files), (line) => lines.push(line));
    expect(passed + failed).toBe(CHECKS.length);
    expect(lines.filter((line) => /^(ok|FAILED) /.test(line))).toHaveLength(CHECKS.length);
    expect(lines.join("\n")).toContain("FAILED types");
    expect(lines.join("\n")).toContain("TS2322");
  });
});

describe("types", () => {
  it("refuses a wrong type in a test, and a link to a page that does not exist", async () => {
    const { ok, output } = await outcome("types", {
      ...LEGAL,
      "tests/unit/wrong.test.ts": "export const count: number = 'one';\n",
      "app/other/page.tsx":
        'import Link from "next/link";\n\nexport default () => <Link href="/nowhere">x</Link>;\n',
    });
    expect(ok).toBe(false);
    expect(output).toContain("tests/unit/wrong.test.ts");
    expect(output).toContain("/nowhere");
  });
});

describe("lint", () => {
  const faults: Record<string, string> = {
    noExplicitAny: "export const x: any = 1;\n",
    noNonNullAssertion: "export const first = (list: number[]) => list[0]!;\n",
    noUnusedVariables: "export function f() {\n  const unused = 1;\n}\n",
    noUnusedImports: 'import { mean } from "@/lib/signal/mean";\n\nexport const x = 1;\n',
    useNodejsImportProtocol: 'import { readFileSync } from "fs";\n\nexport const x = readFileSync;\n',
    noReExportAll: 'export * from "@/lib/signal/mean";\n',
    useHookAtTopLevel:
      'import { useState } from "react";\n\nexport function useX(on: boolean) {\n' +
      "  if (on) return useState(1);\n  return null;\n}\n",
    useAltText: 'export const Picture = () => <img src="/a.png" />;\n',
    format: "export  const x=1\n",
  };
  for (const [rule, text] of Object.entries(faults)) {
    it(`refuses what breaks ${rule}`, async () => {
      const { ok, output } = await outcome("lint", { ...LEGAL, "lib/format/fault.tsx": text });
      expect(ok).toBe(false);
      expect(output).toContain(rule);
    });
  }
});

describe("dead code", () => {
  it("names a file, an export and a package that nothing uses", async () => {
    const files = {
      ...LEGAL,
      "lib/format/orphan.ts": "export const orphan = 1;\n",
      "lib/format/percent.ts": `${LEGAL["lib/format/percent.ts"]}export const nobodyAsks = 1;\n`,
    };
    const { ok, output } = await outcome("dead code", files);
    expect(ok).toBe(false);
    for (const name of ["lib/format/orphan.ts", "nobodyAsks", "papaparse"]) expect(output).toContain(name);
    expect(output).not.toContain("formatPercent");
  });
});
