import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { RULES } from "@/lib/policy/rules";

/**
 * Default deny, as a test: every page, every method of a route handler and every Server Action that can be reached stands
 * in lib/policy/inventory.csv with the rule that it asks, and nothing stands there that is gone.
 * Beside the rules: `public` for anybody, `session` for any signed-in person, `demo` for demo mode only. `a|b`: which
 * of the rules is asked depends on the thing.
 */
const OPEN = ["public", "session", "demo"];
const METHODS = ["GET", "HEAD", "POST", "PUT", "PATCH", "DELETE", "OPTIONS"];
const KNOWN_FILES =
  /^(page|layout|template|loading|error|global-error|not-found|forbidden|unauthorized|default)\.tsx$|^route\.ts$|^actions\.ts$/;

const files = readdirSync("app", { recursive: true, encoding: "utf8" })
  .map((path) => path.replaceAll("\\", "/"))
  .filter((path) => /\.tsx?$/.test(path))
  .map((path) => ({ path: `app/${path}`, text: readFileSync(join("app", path), "utf8") }));

/** `app/(workspace)/runs/[run]/page.tsx` → `/runs/[run]`: groups leave no trace in an address. */
function address(path: string): string {
  const parts = path.split("/").slice(1, -1);
  return `/${parts.filter((part) => !/^\(.*\)$/.test(part)).join("/")}`;
}

const exported = (text: string): string[] => [
  ...[...text.matchAll(/export\s+(?:async\s+)?function\s+(\w+)/g)].map((match) => match[1]),
  ...[...text.matchAll(/export\s+const\s+(\w+)/g)].map((match) => match[1]),
  ...[...text.matchAll(/export\s*\{([^}]*)\}/g)].flatMap((match) =>
    match[1].split(",").map(
      (name) =>
        name
          .trim()
          .split(/\s+as\s+/)
          .at(-1) ?? "",
    ),
  ),
];

function reachable(): string[] {
  return files.flatMap(({ path, text }) => {
    if (path.endsWith("/page.tsx")) return [`page ${address(path)}`];
    if (path.endsWith("/route.ts"))
      return exported(text)
        .filter((name) => METHODS.includes(name))
        .map((method) => `route ${method} ${address(path)}`);
    if (path.endsWith("/actions.ts")) return exported(text).map((name) => `action ${path}#${name}`);
    return [];
  });
}

const csv = readFileSync("lib/policy/inventory.csv", "utf8");
const rows = Papa.parse<{ kind: string; where: string; action: string }>(csv, {
  header: true,
  skipEmptyLines: true,
}).data;
const listed = rows.map((row) => `${row.kind} ${row.where}`);

describe("the inventory", () => {
  it("was read, and so was the app", () => {
    expect(rows.length).toBeGreaterThan(30);
    expect(files.length).toBeGreaterThan(30);
  });

  it("lists every page, route method and action that can be reached", () => {
    expect(reachable().filter((thing) => !listed.includes(thing))).toEqual([]);
  });

  it("lists nothing that is gone, and nothing twice", () => {
    const there = reachable();
    expect(listed.filter((thing) => !there.includes(thing))).toEqual([]);
    expect(listed.filter((thing, index) => listed.indexOf(thing) !== index)).toEqual([]);
  });

  it("names for each a rule of the policy, or that it is open on purpose", () => {
    const names = [...Object.keys(RULES), ...OPEN];
    const unknown = rows.filter((row) => !row.action.split("|").every((name) => names.includes(name)));
    expect(unknown).toEqual([]);
  });
});

describe("the app", () => {
  it("has Server Actions in files named actions.ts only, each marked as such", () => {
    const marked = files.filter(({ text }) => /^\s*["']use server["']/m.test(text)).map(({ path }) => path);
    const named = files.filter(({ path }) => path.endsWith("/actions.ts")).map(({ path }) => path);
    expect(marked.sort()).toEqual(named.sort());
    expect(named.length).toBeGreaterThan(3);
  });

  it("has no further way in: no route in another spelling, no pages folder", () => {
    const odd = files.filter(
      ({ path }) =>
        /\/(page|route)\.(jsx?|ts|tsx|mdx?)$/.test(path) && !KNOWN_FILES.test(path.split("/").at(-1) ?? ""),
    );
    expect(odd.map(({ path }) => path)).toEqual([]);
    expect(readdirSync(".").filter((name) => name === "pages" || name === "src")).toEqual([]);
  });

  it("checks origin, schema and errors of every action in the one wrapper", () => {
    for (const { path, text } of files.filter((file) => file.path.endsWith("/actions.ts"))) {
      const [head, ...bodies] = text.split(/export\s+async\s+function\s+/);
      // A helper of the same file that calls the wrapper is as good as the wrapper.
      const helpers = head
        .split(/async function /)
        .slice(1)
        .filter((body) => /\brun(Form|Person|Open)Action\s*\(/.test(body))
        .map((body) => /^\w+/.exec(body)?.[0] ?? "-");
      const wrapped = new RegExp(`\\b(run(Form|Person|Open)Action|${["-", ...helpers].join("|")})\\s*[(<]`);
      const bare = bodies.filter((body) => !wrapped.test(body.split(/\n}\n/)[0]));
      expect(bare.map((body) => `${path}#${body.split("(")[0]}`)).toEqual([]);
    }
  });

  it("answers every route method through the one wrapper, or says here why not", () => {
    const ON_THEIR_OWN = new Set(["/sign-out", "/healthz"]);
    const bare = files.filter(
      ({ path, text }) =>
        path.endsWith("/route.ts") &&
        !/\broute(<[^>]*>)?\s*\(/.test(text) &&
        !ON_THEIR_OWN.has(address(path)),
    );
    expect(bare.map(({ path }) => path)).toEqual([]);
  });
});
