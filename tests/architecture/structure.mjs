import { readdirSync, readFileSync } from "node:fs";
import { join, relative, sep } from "node:path";

const LEFT_OUT = new Set([
  "node_modules",
  ".git",
  ".next",
  ".data",
  ".cache",
  "test-results",
  "playwright-report",
]);
const CODE = /\.(ts|tsx|mts|mjs|cjs)$/;
const TEXT =
  /\.(ts|tsx|mts|mjs|cjs|js|json|css|sql|csv|md|svg|yml|yaml|html|txt|sh)$|(^|\/)(run|\.gitignore)$/;
const PRODUCT = /^(app|components|db|lib|storage|docker-less-setup)\//;
const MAY_READ_ENVIRONMENT =
  /^lib\/env\.ts$|^docker-less-setup\/|^[^/]+\.config\.\w+$|^tests\/(support|e2e|architecture|bench)\//;
/** Where words for the screen, for mail and for prints stand. */
const SCREEN_TEXT = /^(app|components|lib\/(format|gates|jobs|mail|services))\//;
/** This file and its test name what they forbid. */
const NAMES_THE_FORBIDDEN = /^tests\/architecture\//;

const LONGEST_PRODUCT_FILE = 300;
const LONGEST_ROUTE = 40;
const LONGEST_TEST = 400;

/** @typedef {{ path: string, lines: string[] }} File path: relative to the root, with slashes */
/** @typedef {{ name: string, applies: (path: string) => boolean, complaints: (file: File) => string[] }} Rule */

/** @param {RegExp} pattern @param {string} sentence @returns {Rule["complaints"]} one complaint a matching line */
const eachLine = (pattern, sentence) => (file) =>
  file.lines.flatMap((line, index) => (pattern.test(line) ? [`line ${index + 1}: ${sentence}`] : []));

/** @param {number} longest @returns {Rule["complaints"]} */
const atMost = (longest) => (file) =>
  file.lines.length > longest ? [`${file.lines.length} lines, at most ${longest}: split it by reason`] : [];

const isRoute = (/** @type {string} */ path) => /^app\/.*\/route\.ts$/.test(path);
const isTest = (/** @type {string} */ path) => path.startsWith("tests/") && !path.startsWith("tests/golden/");
const isCode = (/** @type {string} */ path) => CODE.test(path);

/** @type {Rule[]} */
export const RULES = [
  {
    name: "product-file-fits",
    applies: (path) => isCode(path) && PRODUCT.test(path) && !isRoute(path),
    complaints: atMost(LONGEST_PRODUCT_FILE),
  },
  { name: "route-is-thin", applies: isRoute, complaints: atMost(LONGEST_ROUTE) },
  {
    name: "test-file-fits",
    applies: (path) => isCode(path) && isTest(path),
    complaints: atMost(LONGEST_TEST),
  },
  {
    name: "environment-in-one-place",
    applies: (path) => isCode(path) && !MAY_READ_ENVIRONMENT.test(path),
    // NODE_ENV and NEXT_RUNTIME are constants of the build, not settings.
    complaints: eachLine(
      /process\.env\b(?!\.(NODE_ENV|NEXT_RUNTIME)\b)|process\[["'`]env|\benv\b[^=]*\}\s*=\s*process\b|from "(node:)?process"/,
      "settings come from lib/env.ts",
    ),
  },
  {
    name: "no-export-all",
    applies: isCode,
    complaints: eachLine(/^\s*export\s+(type\s+)?\*/, "name what is exported"),
  },
  {
    name: "names-say-what",
    applies: isCode,
    complaints: ({ path }) =>
      /(^|\/)(utils?|helpers?|misc|common|index)(\/|\.\w+$)/.test(path)
        ? ["the name says nothing: name it after what it does"]
        : [],
  },
  {
    name: "no-notes-for-later",
    applies: (path) => isCode(path) && !NAMES_THE_FORBIDDEN.test(path),
    complaints: eachLine(/\b(TODO|FIXME|XXX|HACK)\b/, "do it or leave it out"),
  },
  {
    name: "no-test-set-aside",
    applies: (path) => isCode(path) && isTest(path) && !NAMES_THE_FORBIDDEN.test(path),
    complaints: eachLine(
      /\b(test|it|describe)(\.\w+)*\.(skip|skipIf|runIf|only|todo|fixme|fails?)\b/,
      "a test that does not run proves nothing",
    ),
  },
  {
    name: "no-claim-of-conformity",
    applies: (path) => isCode(path) && SCREEN_TEXT.test(path),
    complaints: eachLine(
      /\bcertified\b|\bcertifies\b|\bcomplies with\b|\bcompliant with\b|\bin compliance with\b/i,
      "the product claims no conformity",
    ),
  },
  {
    name: "stands-on-any-machine",
    applies: (path) => TEXT.test(path) && !NAMES_THE_FORBIDDEN.test(path),
    complaints: eachLine(
      /(^|[^\w.])\/(home|root|work|Users)\/\w|registry\.npmjs|"resolved": "http/,
      "names one machine or one registry",
    ),
  },
];

/**
 * @param {string} root
 * @returns {string[]} paths of all files of the project, with slashes
 */
function projectFiles(root) {
  /** @param {string} folder @returns {string[]} */
  const below = (folder) =>
    readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
      if (LEFT_OUT.has(entry.name)) return [];
      const path = join(folder, entry.name);
      return entry.isDirectory() ? below(path) : [relative(root, path).split(sep).join("/")];
    });
  return below(root);
}

/**
 * @param {string} root
 * @returns {{ files: number, complaints: string[] }} how many files were read, and what is wrong with them
 */
export function inspectStructure(root) {
  let files = 0;
  const complaints = projectFiles(root).flatMap((path) => {
    const rules = RULES.filter((rule) => rule.applies(path));
    if (rules.length === 0) return [];
    files += 1;
    const lines = readFileSync(join(root, path), "utf8").trimEnd().split("\n");
    return rules.flatMap((rule) =>
      rule.complaints({ path, lines }).map((complaint) => `${path} ${complaint} (${rule.name})`),
    );
  });
  return { files, complaints };
}
