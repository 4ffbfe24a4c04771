import { describe, expect, it } from "vitest";
import { ownPath } from "@/lib/auth/own-path";

describe("the way back after signing in", () => {
  for (const path of ["/programmes", "/ledger?before=7", "/revisions/1/decide", "/a%2F%2Fb"]) {
    it(`keeps ${path}`, () => {
      expect(ownPath(path)).toBe(path);
    });
  }

  // Redirects to elsewhere: OWASP Unvalidated Redirects and Forwards Cheat Sheet (from memory).
  for (const path of [
    "https://evil.example/",
    "//evil.example/",
    "/\\evil.example/",
    "/\t/evil.example",
    "/./\\/evil.example",
    "/..//evil.example",
    "javascript:alert(1)",
    "programmes",
    "",
    null,
    undefined,
    ["/a"],
    42,
  ]) {
    it(`turns ${JSON.stringify(path) ?? "nothing"} into the start`, () => {
      expect(ownPath(path)).toBe("/programmes");
    });
  }
});
