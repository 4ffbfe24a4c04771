import { copyFileSync, mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { afterEach } from "vitest";
import { CHECKS } from "./check.mjs";

const HOME = join(import.meta.dirname, "../..");
const SETTINGS = [".dependency-cruiser.cjs", "biome.json", "knip.json", "next.config.mjs", "package.json"];

/** A small project that every check accepts: each layer with one legal import. */
export const LEGAL: Record<string, string> = {
  "app/layout.tsx":
    'import type { ReactNode } from "react";\nimport "./globals.css";\n\n' +
    "export default function Layout({ children }: { children: ReactNode }) {\n" +
    '  return (\n    <html lang="en">\n      <body>{children}</body>\n    </html>\n  );\n}\n',
  "app/globals.css": "body {\n  margin: 0;\n}\n",
  "app/page.tsx":
    'import { Gain } from "@/components/features/gain/gain";\n' +
    'import { loadGain } from "@/lib/services/gain/load";\n\n' +
    "export default async function Page() {\n  return <Gain percent={await loadGain()} />;\n}\n",
  "components/features/gain/gain.tsx":
    'import { formatPercent } from "@/lib/format/percent";\n\n' +
    "export function Gain({ percent }: { percent: number }) {\n  return <p>{formatPercent(percent)}</p>;\n}\n",
  "lib/format/percent.ts":
    "export function formatPercent(percent: number): string {\n  return percent.toFixed(1);\n}\n",
  "lib/signal/mean.ts":
    "export function mean(values: number[]): number {\n" +
    "  return values.reduce((sum, value) => sum + value, 0) / values.length;\n}\n",
  "lib/services/gain/load.ts":
    'import { readGains } from "@/db/queries/gains";\nimport { mean } from "@/lib/signal/mean";\n\n' +
    "export async function loadGain(): Promise<number> {\n  return mean(await readGains());\n}\n",
  "db/queries/gains.ts": "export async function readGains(): Promise<number[]> {\n  return [1, 2];\n}\n",
  "tests/unit/mean.test.ts":
    'import { expect, it } from "vitest";\nimport { mean } from "@/lib/signal/mean";\n\n' +
    'it("averages", () => {\n  expect(mean([1, 3])).toBe(2);\n});\n',
  "tsconfig.json": `${JSON.stringify({
    extends: [],
    compilerOptions: {
      target: "ES2023",
      lib: ["ES2023", "DOM"],
      module: "esnext",
      moduleResolution: "bundler",
      strict: true,
      noEmit: true,
      jsx: "react-jsx",
      skipLibCheck: true,
      paths: { "@/*": ["./*"] },
    },
    include: ["**/*.ts", "**/*.tsx", "next-env.d.ts", ".next/types/**/*.ts"],
    exclude: ["node_modules"],
  })}\n`,
  ".gitignore": "node_modules\n.next\nnext-env.d.ts\npackage.json\n*.cjs\n*.mjs\n*.json\n",
};

let root = "";

/** Writes a project into a temporary folder, with this project's settings and packages; gone after the test. */
export function makeProject(files: Record<string, string>): string {
  root = mkdtempSync(join(tmpdir(), "twinpass-check-"));
  for (const name of SETTINGS) copyFileSync(join(HOME, name), join(root, name));
  symlinkSync(join(HOME, "node_modules"), join(root, "node_modules"));
  for (const [path, text] of Object.entries(files)) {
    mkdirSync(dirname(join(root, path)), { recursive: true });
    writeFileSync(join(root, path), text);
  }
  return root;
}

/** What one check says about a project of these files. */
export async function outcome(name: string, files: Record<string, string>) {
  const check = CHECKS.find((candidate) => candidate.name === name);
  if (!check) throw new Error(`there is no check named ${name}`);
  return check.run(makeProject(files));
}

afterEach(() => rmSync(root, { recursive: true, force: true }));
