import { createRequire } from "node:module";
import { expect, it } from "vitest";
import { LEGAL, outcome } from "./sample-project";

const config: { forbidden: { name: string }[] } = createRequire(import.meta.url)(
  "../../.dependency-cruiser.cjs",
);

const x = "export const x = 1;\n";
const from = (path: string) => `import "${path}";\n${x}`;

/** For each rule: files that break it, and which of them is to be named. */
const VIOLATIONS: Record<string, { files: Record<string, string>; at: string }> = {
  "no-circular": {
    files: { "lib/format/a.ts": from("@/lib/format/b"), "lib/format/b.ts": from("@/lib/format/a") },
    at: "lib/format/a.ts",
  },
  "no-unresolved": {
    files: { "lib/client/gone.ts": from("@/lib/client/nowhere") },
    at: "lib/client/gone.ts",
  },
  "app-is-a-leaf": { files: { "lib/http/up.ts": from("@/app/page") }, at: "lib/http/up.ts" },
  "app-reads-through-services": {
    files: { "app/direct/page.tsx": from("@/db/queries/gains") },
    at: "app/direct/page.tsx",
  },
  "client-never-reaches-server": {
    files: {
      "lib/client/deep.ts": from("@/lib/http/middle"),
      "lib/http/middle.ts": from("@/storage/open"),
      "storage/open.ts": x,
    },
    at: "lib/client/deep.ts",
  },
  "client-sees-service-schemas-only": {
    files: { "components/features/gain/verb.ts": from("@/lib/services/gain/load") },
    at: "components/features/gain/verb.ts",
  },
  "ui-is-domain-free": {
    files: { "components/ui/knowing.ts": from("@/lib/signal/mean") },
    at: "components/ui/knowing.ts",
  },
  "charts-are-feature-free": {
    files: { "components/charts/knowing.ts": from("@/components/features/gain/gain") },
    at: "components/charts/knowing.ts",
  },
  "features-do-not-reach-into-each-other": {
    files: { "components/features/runs/other.ts": from("@/components/features/gain/gain") },
    at: "components/features/runs/other.ts",
  },
  "pure-lib-stays-pure": {
    files: { "lib/signal/clocked.ts": from("@/lib/clock"), "lib/clock.ts": x },
    at: "lib/signal/clocked.ts",
  },
  "pure-lib-no-framework": {
    files: { "lib/measure/files.ts": from("node:fs"), "lib/compare/checked.ts": from("zod") },
    at: "lib/measure/files.ts",
  },
  "services-are-framework-free": {
    files: { "lib/services/gain/page.ts": from("next/headers") },
    at: "lib/services/gain/page.ts",
  },
  "service-internals-are-private": {
    files: {
      "lib/services/runs/peek.ts": from("@/lib/services/gain/internal"),
      "lib/services/gain/internal.ts": x,
    },
    at: "lib/services/runs/peek.ts",
  },
  "schemas-are-isomorphic": {
    files: { "lib/services/gain/schema.ts": from("@/db/queries/gains") },
    at: "lib/services/gain/schema.ts",
  },
  "db-is-the-bottom": { files: { "db/queries/up.ts": from("@/lib/signal/mean") }, at: "db/queries/up.ts" },
  "storage-is-the-bottom": { files: { "storage/up.ts": from("@/db/queries/gains") }, at: "storage/up.ts" },
  "drizzle-only-in-db": { files: { "lib/http/query.ts": from("drizzle-orm") }, at: "lib/http/query.ts" },
  "s3-sdk-only-in-storage": {
    files: { "lib/http/bucket.ts": from("@aws-sdk/client-s3") },
    at: "lib/http/bucket.ts",
  },
  "charting-only-in-charts": {
    files: { "components/features/gain/axis.ts": from("@visx/axis") },
    at: "components/features/gain/axis.ts",
  },
  "descriptions-are-read-by-the-worker": {
    files: {
      "lib/services/gain/early.ts": from("@/lib/http/by-the-way"),
      "lib/http/by-the-way.ts": from("@/lib/calibration/a2l/read-description"),
      "lib/calibration/a2l/read-description.ts": x,
      "tests/unit/read-description.test.ts": from("@/lib/calibration/a2l/read-description"),
    },
    at: "lib/services/gain/early.ts",
  },
  "kernel-has-a-test": { files: { "lib/signal/untested.ts": x }, at: "lib/signal/untested.ts" },
  "product-never-imports-tests": {
    files: { "lib/http/golden.ts": from("@/tests/support/made"), "tests/support/made.ts": x },
    at: "lib/http/golden.ts",
  },
  "setup-runs-before-packages-are-there": {
    files: { "docker-less-setup/early.mjs": from("zod") },
    at: "docker-less-setup/early.mjs",
  },
  "setup-is-apart": {
    files: { "docker-less-setup/knowing.mjs": 'import "../lib/signal/mean.ts";\n' },
    at: "docker-less-setup/knowing.mjs",
  },
  "product-never-imports-setup": {
    files: { "lib/http/setup.ts": from("@/docker-less-setup/own.mjs"), "docker-less-setup/own.mjs": x },
    at: "lib/http/setup.ts",
  },
};

it("has a violation for each rule of .dependency-cruiser.cjs", () => {
  expect(Object.keys(VIOLATIONS).sort()).toEqual(config.forbidden.map(({ name }) => name).sort());
});

it("refuses what breaks a rule, and names the rule and the file", async () => {
  const files = Object.assign({}, LEGAL, ...Object.values(VIOLATIONS).map((violation) => violation.files));
  const { ok, output } = await outcome("boundaries", files);
  expect(ok).toBe(false);
  const lines = output.split("\n");
  const missed = Object.entries(VIOLATIONS).filter(
    ([rule, { at }]) => !lines.some((line) => line.startsWith(`${at} → `) && line.endsWith(`(${rule})`)),
  );
  expect(missed.map(([rule]) => rule)).toEqual([]);
  expect(lines).toContainEqual(
    expect.stringMatching(/^lib\/compare\/checked\.ts → .*\(pure-lib-no-framework\)$/),
  );
});

it("names nothing in the files that keep the rules", async () => {
  const { output } = await outcome("boundaries", {
    ...LEGAL,
    "lib/services/gain/schema.ts": 'import { z } from "zod";\n\nexport const gain = z.number();\n',
    "lib/client/gain.ts": from("@/lib/services/gain/schema"),
    "lib/logs/packed.ts":
      'import { createHash } from "node:crypto";\nimport "node:zlib";\nimport "papaparse";\nexport const h = createHash;\n',
    "tests/unit/packed.test.ts": from("@/lib/logs/packed"),
    "components/charts/axis.ts": from("@visx/axis"),
    "storage/bucket.ts": from("@aws-sdk/client-s3"),
    "docker-less-setup/own.mjs": 'import "node:fs";\nimport "./other.mjs";\n',
    "docker-less-setup/other.mjs": x,
    "db/schema.ts": from("drizzle-orm"),
  });
  expect(output).toBe("");
});

it("fails when it read no module, instead of finding no violation", async () => {
  const { ok, output } = await outcome("boundaries", {
    "tests/golden/README.md": "Nothing to read here.\n",
    "proxy.ts": x,
    "tsconfig.json": LEGAL["tsconfig.json"] ?? "",
  });
  expect(ok).toBe(false);
  expect(output).toContain("no module");
});
