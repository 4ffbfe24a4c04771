import { describe, expect, it } from "vitest";
import { LEGAL, makeProject, outcome } from "./sample-project";
import { inspectStructure, RULES } from "./structure.mjs";

const lines = (count: number) => "const x = 1;\n".repeat(count);
const home = ["", "home", "somebody", "clone"].join("/");

/** For each rule: files that break it, and files just within it. */
const CASES: Record<string, { breaks: Record<string, string>; keeps: Record<string, string> }> = {
  "product-file-fits": {
    breaks: { "lib/signal/long.ts": lines(301), "docker-less-setup/long.mjs": lines(301) },
    keeps: { "lib/signal/full.ts": lines(300), "db/migrations/0000_long.sql": "select 1;\n".repeat(900) },
  },
  "route-is-thin": {
    breaks: { "app/api/runs/[run]/route.ts": lines(41) },
    keeps: { "app/api/runs/route.ts": lines(40), "app/page.tsx": lines(41) },
  },
  "test-file-fits": {
    breaks: { "tests/unit/long.test.ts": lines(401) },
    keeps: { "tests/unit/full.test.ts": lines(400), "tests/golden/table.ts": lines(401) },
  },
  "environment-in-one-place": {
    breaks: {
      "lib/mail/a.ts": "const url = process.env.SMTP_URL;\n",
      "lib/mail/b.ts": 'const url = process["env"].SMTP_URL;\n',
      "lib/mail/c.ts": "const { env } = process;\n",
      "lib/mail/d.ts": 'import { env } from "node:process";\n',
      "tests/unit/e.test.ts": "process.env.PORT = '1';\n",
    },
    keeps: {
      "lib/env.ts": "export const all = process.env;\n",
      "next.config.mjs": "export default { distDir: process.env.NEXT_DIST_DIR };\n",
      "proxy.ts": 'const dev = process.env.NODE_ENV === "development";\n',
    },
  },
  "no-export-all": {
    breaks: {
      "lib/format/all.ts": 'export * from "./a";\n',
      "lib/format/t.ts": 'export type * from "./a";\n',
    },
    keeps: { "lib/format/named.ts": 'export { a } from "./a";\n' },
  },
  "names-say-what": {
    breaks: {
      "lib/format/utils.ts": "",
      "lib/helpers/round.ts": "",
      "components/ui/index.tsx": "",
      "lib/common/x.ts": "",
    },
    keeps: { "lib/format/round-to-step.ts": "", "db/schema/index-cards.ts": "" },
  },
  "no-notes-for-later": {
    breaks: { "lib/format/a.ts": "// TODO mend\n", "tests/unit/a.test.ts": "/* FIXME */\n" },
    keeps: { "lib/format/b.ts": "const todos = 1;\n" },
  },
  "no-test-set-aside": {
    breaks: {
      "tests/unit/a.test.ts": 'it.skip("x", () => undefined);\n',
      "tests/unit/b.test.ts": 'describe.only("x", () => undefined);\n',
      "tests/e2e/c.spec.ts": 'test.fixme("x", async () => undefined);\n',
    },
    keeps: { "tests/unit/d.test.ts": 'it("takes the skip out", () => expect(list.only).toBe(1));\n' },
  },
  "no-claim-of-conformity": {
    breaks: {
      "app/about/page.tsx": "export default () => <p>Certified by nobody</p>;\n",
      "lib/mail/letter.ts": 'const text = "This record complies with it.";\n',
    },
    keeps: { "lib/signal/nist.ts": "// certified value of a reference data set\n" },
  },
  "stands-on-any-machine": {
    breaks: {
      "lib/format/path.ts": `const clone = "${home}";\n`,
      "DEVELOPERS.md": `Go to ${home} first.\n`,
      "package-lock.json": '{ "resolved": "https://a.example/a.tgz" }\n',
    },
    keeps: { "lib/format/url.ts": 'const page = "/workspaces/home/runs";\n' },
  },
};

describe("structure", () => {
  it("has a violation for each rule", () => {
    expect(Object.keys(CASES).sort()).toEqual(RULES.map(({ name }) => name).sort());
  });

  for (const [rule, { breaks, keeps }] of Object.entries(CASES)) {
    it(`refuses what breaks ${rule}, and only that`, () => {
      const { complaints } = inspectStructure(makeProject({ ...LEGAL, ...breaks, ...keeps }));
      const named = complaints.filter((line) => line.endsWith(`(${rule})`)).map((line) => line.split(" ")[0]);
      expect([...new Set(named)].sort()).toEqual(Object.keys(breaks).sort());
    });
  }

  it("fails the check with the complaint", async () => {
    const { ok, output } = await outcome("structure", { ...LEGAL, "lib/format/utils.ts": "" });
    expect(ok).toBe(false);
    expect(output).toContain("lib/format/utils.ts");
  });
});
