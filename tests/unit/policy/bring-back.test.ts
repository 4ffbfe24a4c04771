import { describe, expect, test } from "vitest";
import { ROLES } from "@/lib/policy/actor";
import { canBringBack } from "@/lib/policy/bring-back";

const BY_OTHER = { setAsideBy: "other", otherActive: true };

// Row N05 of authorisation.csv: leads only, "not the one who set it aside, where another active tester or lead exists".
describe("canBringBack", () => {
  test.each(ROLES)("what another set aside, as %s", (role) => {
    expect(canBringBack({ userId: "me", roles: [role] }, BY_OTHER).ok).toBe(role === "lead");
  });

  test.each([
    [true, false],
    [false, true],
  ])("what I set aside myself, others there: %s → %s", (otherActive, ok) => {
    const verdict = canBringBack(
      { userId: "me", roles: ["lead", "tester"] },
      { setAsideBy: "me", otherActive },
    );
    expect(verdict.ok).toBe(ok);
    if (!verdict.ok) expect(verdict.reason).toContain("another lead");
  });

  test("a tester alone with their own run still can't: the role comes first", () => {
    const verdict = canBringBack(
      { userId: "me", roles: ["tester"] },
      { setAsideBy: "me", otherActive: false },
    );
    expect(verdict).toMatchObject({ ok: false, reason: expect.stringContaining("lead") });
  });
});
