import { describe, expect, it } from "vitest";
import type { Role } from "@/lib/policy/actor";
import { whyNotChangeRoles, whyNotDisable } from "@/lib/policy/member-rules";

// Row M03 of authorisation.csv: not own role where another active admin exists; the last admin can't be demoted.
const ask = (targetId: string, targetRoles: Role[], otherAdmins: number) => ({
  actorId: "me",
  targetId,
  targetRoles,
  otherAdmins,
});

describe("changing roles", () => {
  for (const [what, question, to, allowed] of [
    ["another's, also away from admin", ask("other", ["admin"], 1), ["lead"], true],
    ["another's, to admin", ask("other", ["tester"], 1), ["tester", "admin"], true],
    ["one's own beside another admin", ask("me", ["admin"], 1), ["admin", "lead"], false],
    ["one's own as the only admin", ask("me", ["admin"], 0), ["admin", "lead"], true],
    ["the last admin away from admin", ask("me", ["admin"], 0), ["lead"], false],
  ] as const) {
    it(`${what} is ${allowed ? "allowed" : "refused"}`, () => {
      expect(whyNotChangeRoles({ ...question, to }) === null).toBe(allowed);
    });
  }

  it("says before the choice whether there is one", () => {
    expect(whyNotChangeRoles(ask("me", ["admin"], 1))).toMatch(/another admin does it/);
    expect(whyNotChangeRoles(ask("me", ["admin"], 0))).toBeNull();
  });
});

describe("disabling", () => {
  for (const [what, question, allowed] of [
    ["a tester", ask("other", ["tester"], 1), true],
    ["another admin", ask("other", ["admin"], 1), true],
    ["the last admin", ask("other", ["admin"], 0), false],
    ["oneself", ask("me", ["admin"], 1), false],
  ] as const) {
    it(`${what} is ${allowed ? "allowed" : "refused"}`, () => {
      expect(whyNotDisable(question) === null).toBe(allowed);
    });
  }
});
