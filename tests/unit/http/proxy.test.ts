import { unstable_doesMiddlewareMatch as doesMatch } from "next/experimental/testing/server";
import { NextRequest } from "next/server";
import { describe, expect, test } from "vitest";
import { config, proxy } from "@/proxy";

const policyOf = (path: string, headers: Record<string, string> = {}) =>
  proxy(new NextRequest(`http://localhost:3000${path}`, { headers })).headers.get("content-security-policy");

describe("the content security policy", () => {
  test.each(["/api/runs/1/log", "/api/revisions/1/image", "/api/road-days/1/runs"])(
    "of data and downloads lets nothing run: %s",
    (path) => {
      const policy = policyOf(path);
      expect(policy).toContain("default-src 'none'");
      expect(policy).toMatch(/(^|; )sandbox($|;)/);
      expect(policy).not.toContain("script-src");
    },
  );

  test("of a page names a nonce of its own each time and never the one that was asked for", () => {
    const asked = { "content-security-policy": "script-src 'nonce-forged'", "x-nonce": "forged" };
    const policies = [policyOf("/runs/1", asked), policyOf("/runs/1", asked)];
    const nonces = policies.map((policy) => /'nonce-([^']+)'/.exec(policy ?? "")?.[1]);
    expect(nonces[0]).toBeTruthy();
    expect(nonces[0]).not.toBe(nonces[1]);
    expect(policies.join()).not.toContain("forged");
    expect(policies.join()).not.toContain("sandbox");
  });
});

// A body behind the proxy is cut after 10 MB without an error (Next's own bound), so what is larger must not pass it.
test.each([
  ["/api/uploads", false],
  ["/api/uploads/1", false],
  ["/api/revisions/1/values-check", false],
  ["/api/revisions/1/values", true],
  ["/api/revisions/1", true],
  ["/revisions/1", true],
])("the proxy stands in front of %s: %s", (url, stands) => {
  expect(doesMatch({ config, nextConfig: {}, url })).toBe(stands);
});
