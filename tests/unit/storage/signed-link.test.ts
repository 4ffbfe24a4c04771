import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { ForbiddenError, InvalidInputError } from "@/lib/errors";
import { blobKey } from "@/storage/keys";
import { signLink, verifySignedLink } from "@/storage/signed-link";

const SECRET = "a secret of the tests, 32 characters and more";
const NOW_MS = Date.UTC(2026, 11, 1);
const KEY = blobKey("workshop", "b".repeat(64));
const OPTIONS = {
  expiresInSeconds: 60,
  contentType: "application/octet-stream",
  contentDisposition: 'attachment; filename="image.bin"',
};
const link = () => signLink(SECRET, KEY, OPTIONS, NOW_MS).parameters;
const verify = (parameters: URLSearchParams, method = "GET", nowMs = NOW_MS, secret = SECRET) =>
  verifySignedLink(secret, method, parameters, nowMs);

describe("signed link of our own route", () => {
  test("allows what was signed until its time is over, to the millisecond", () => {
    const { contentType, contentDisposition } = OPTIONS;
    const claim = { key: KEY, contentType, contentDisposition, expiresAtMs: NOW_MS + 60_000 };
    expect(verify(link())).toEqual(claim);
    expect(verify(link(), "GET", NOW_MS + 59_999)).toEqual(claim);
    expect(() => verify(link(), "GET", NOW_MS + 60_000)).toThrow(
      expect.objectContaining({ code: "link_expired", status: 403 }),
    );
  });

  test.each(["HEAD", "PUT", "POST", "DELETE", "get", ""])("refuses the method %j", (method) => {
    expect(() => verify(link(), method)).toThrow(ForbiddenError);
  });

  test("refuses another secret", () => {
    expect(() => verify(link(), "GET", NOW_MS, `${SECRET}.`)).toThrow(ForbiddenError);
  });

  test("refuses any changed, missing, doubled or added parameter", () => {
    const names = ["key", "type", "disposition", "expires", "signature"];
    expect([...link().keys()].sort()).toEqual([...names].sort());
    for (const name of names) {
      const [missing, doubled] = [link(), link()];
      missing.delete(name);
      doubled.append(name, link().get(name) ?? "");
      for (const parameters of [missing, doubled]) expect(() => verify(parameters)).toThrow(ForbiddenError);
      const change = (value: string) => {
        fc.pre(value !== link().get(name));
        const changed = link();
        changed.set(name, value);
        expect(() => verify(changed)).toThrow(ForbiddenError);
      };
      const longer = fc.constantFrom("0", " ", "=", "é").map((tail) => `${link().get(name)}${tail}`);
      const other = fc.constantFrom(
        blobKey("workshop", "c".repeat(64)),
        String(NOW_MS + 90_000),
        "text/html",
      );
      fc.assert(fc.property(fc.oneof(fc.string(), longer, other), change), { numRuns: 300 });
    }
    const added = link();
    added.set("extra", "1");
    expect(() => verify(added)).toThrow(ForbiddenError);
  });

  test("text can't wander from one signed field into the next", () => {
    const shifted = link();
    shifted.set("type", `${OPTIONS.contentType}","x`);
    expect(() => verify(shifted)).toThrow(ForbiddenError);
  });

  test.each([
    { expiresInSeconds: 61 },
    { expiresInSeconds: 0 },
    { expiresInSeconds: 1.5 },
    { contentType: "text/plain\r\nset-cookie: a=b" },
    { contentDisposition: "" },
    { contentDisposition: "attachment; filename=é" },
  ])("does not sign %j", (wrong) => {
    expect(() => signLink(SECRET, KEY, { ...OPTIONS, ...wrong }, NOW_MS)).toThrow(InvalidInputError);
  });
});
