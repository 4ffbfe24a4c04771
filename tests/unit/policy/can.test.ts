import { readFileSync } from "node:fs";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { type Facts, ROLES } from "@/lib/policy/actor";
import { can } from "@/lib/policy/can";
import { type Action, RULES, type Rule } from "@/lib/policy/rules";

const csv = readFileSync("lib/policy/authorisation.csv", "utf8");
const rows = Papa.parse<Record<string, string>>(csv, { header: true, skipEmptyLines: true }).data;
const byId = new Map(rows.map((row) => [row.id, row]));
const actions = Object.keys(RULES) as Action[];

describe("policy against the authorisation table", () => {
  it("reads the whole table", () => {
    expect(rows.length).toBeGreaterThan(80);
    expect(new Set(rows.map((row) => row.id)).size).toBe(rows.length);
  });

  for (const action of actions) {
    for (const role of ROLES) {
      it(`${RULES[action].row} ${action}: ${role} is as the table says`, () => {
        const rule: Rule = RULES[action];
        expect(rule.cells[role] ?? "deny").toBe(byId.get(rule.row)?.[role]);
      });
    }
  }
});

/** For each kind of cell the facts that decide it, and the answer. */
const MEANING: Record<string, { facts: Facts; ok: boolean }[]> = {
  deny: [{ facts: { ownerId: "me", granted: true }, ok: false }],
  allow: [{ facts: { ownerId: "other" }, ok: true }],
  masked: [{ facts: {}, ok: true }],
  own: [
    { facts: { ownerId: "me" }, ok: true },
    { facts: { ownerId: "other" }, ok: false },
  ],
  granted: [
    { facts: { granted: true }, ok: true },
    { facts: { granted: false }, ok: false },
    { facts: {}, ok: false },
  ],
  "not-author": [
    { facts: { authorId: "other", submitterId: "third", otherActiveLead: true }, ok: true },
    { facts: { authorId: "me", submitterId: "other", otherActiveLead: true }, ok: false },
    { facts: { authorId: "other", submitterId: "me", otherActiveLead: true }, ok: false },
    { facts: { authorId: "me", submitterId: "me", otherActiveLead: false }, ok: true },
  ],
};

describe("each cell as one role alone", () => {
  for (const action of actions) {
    for (const role of ROLES) {
      const cell = byId.get(RULES[action].row)?.[role] ?? "missing";
      for (const [index, { facts, ok }] of (MEANING[cell] ?? []).entries()) {
        it(`${action} as ${role} (${cell}, case ${index + 1}) is ${ok ? "allowed" : "refused"}`, () => {
          expect(can({ userId: "me", roles: [role] }, action, facts).ok).toBe(ok);
        });
      }
    }
  }
});

describe("several roles", () => {
  it("gives the union of the roles", () => {
    expect(can({ userId: "me", roles: ["tester", "lead"] }, "gate_plan.version").ok).toBe(true);
  });

  it("still keeps the author from deciding, whatever roles they hold", () => {
    const facts = { authorId: "me", submitterId: "me", otherActiveLead: true };
    const verdict = can({ userId: "me", roles: [...ROLES] }, "decision.promote", facts);
    expect(verdict).toMatchObject({ ok: false });
  });

  it("marks a decision as self-released where nobody else could take it", () => {
    const facts = { authorId: "me", submitterId: "me", otherActiveLead: false };
    expect(can({ userId: "me", roles: ["lead"] }, "decision.promote", facts)).toEqual({
      ok: true,
      selfReleased: true,
    });
  });

  it("names the roles that could in the refusal", () => {
    expect(can({ userId: "me", roles: ["admin"] }, "road_day.edit")).toEqual({
      ok: false,
      reason: "You can't create or edit road days: it takes the role tester or lead.",
    });
  });
});
