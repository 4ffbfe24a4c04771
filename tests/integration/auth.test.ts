import { createHash } from "node:crypto";
import { eq, sql } from "drizzle-orm";
import { beforeEach, describe, expect, vi } from "vitest";
import type { Database } from "@/db/client";
import { mailQueue, rateLimits, sessions, users, verificationTokens } from "@/db/tables";
import { currentPerson } from "@/lib/auth/current";
import { consumeLink, requestLink, wasAskedHere } from "@/lib/auth/link";
import { startSampleSession } from "@/lib/auth/sample-people";
import { readSessionToken } from "@/lib/auth/session-cookie";
import { requireOwnOrigin } from "@/lib/http/respond";
import { logger } from "@/lib/logger";
import { ORIGIN, serveFrom, TestBrowser } from "@/tests/support/browser";
import { test } from "@/tests/support/database";
import { createMember, createPerson, createWorkspaceRow } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

const { browser } = vi.hoisted(() => ({ browser: { now: null as unknown as TestBrowser } }));
vi.mock("next/headers", () => ({
  cookies: async () => browser.now.jar,
  headers: async () => browser.now.headers(),
}));

beforeEach(() => {
  browser.now = new TestBrowser();
});

/** The newest sign-in mail of an address: its link's parts, and the address it leads to. */
async function newestLink(db: Database, email: string) {
  const rows = await db.select().from(mailQueue).where(eq(mailQueue.toAddress, email));
  const url = new URL(/https?:\/\/\S+/.exec(rows.at(-1)?.body ?? "")?.[0] ?? "http://none.invalid");
  return { url, email: url.searchParams.get("email") ?? "", token: url.searchParams.get("token") ?? "" };
}

const sessionRows = (db: Database) => db.select().from(sessions);

describe("a sign-in link", () => {
  test("starts one session, once, and nobody can use it again", async ({ database: { db } }) => {
    serveFrom(db);
    await requestLink("new@example.org", "/programmes");
    const link = await newestLink(db, "new@example.org");
    expect(await db.select().from(users)).toEqual([]);

    expect(await consumeLink(link.email, link.token)).toBe("/programmes");
    expect(await sessionRows(db)).toHaveLength(1);
    expect(await currentPerson()).toMatchObject({ email: "new@example.org", hasName: false });

    browser.now = new TestBrowser();
    expect(await consumeLink(link.email, link.token)).toBeNull();
    expect(await sessionRows(db)).toHaveLength(1);
    expect(await currentPerson()).toBeNull();
  });

  test("is used once even when two press at the same moment", async ({ database: { db } }) => {
    serveFrom(db);
    await requestLink("race@example.org", "/programmes");
    const link = await newestLink(db, "race@example.org");
    const answers = await Promise.all(Array.from({ length: 8 }, () => consumeLink(link.email, link.token)));
    expect(answers.filter((answer) => answer !== null)).toHaveLength(1);
    expect(await sessionRows(db)).toHaveLength(1);
  });

  test("keeps hashes only: neither the link's token nor the cookie's value lies in the database", async ({
    database: { db },
  }) => {
    serveFrom(db);
    await requestLink("hash@example.org", "/programmes");
    const link = await newestLink(db, "hash@example.org");
    const [kept] = await db.select().from(verificationTokens);
    expect(kept.token).toMatch(/^[0-9a-f]{64}$/);
    expect(kept.token).not.toBe(link.token);

    await consumeLink(link.email, link.token);
    const cookie = (await readSessionToken()) ?? "";
    // 32 random bytes in base64url: 43 characters, 256 bits.
    expect(cookie).toMatch(/^[\w-]{43}$/);
    const [row] = await sessionRows(db);
    expect(row.sessionToken).toBe(createHash("sha256").update(cookie).digest("hex"));
    // Who read the table and sends what stands there gets nothing.
    browser.now.jar.set("twinpass.session", row.sessionToken);
    expect(await currentPerson()).toBeNull();
  });

  test("lives ten minutes by the database's clock, and not a second longer", async ({ database: { db } }) => {
    serveFrom(db);
    await requestLink("old@example.org", "/programmes");
    const left = await db.execute<{ s: number }>(
      sql`select extract(epoch from expires - now())::float8 as s from verification_tokens`,
    );
    expect(left.rows[0].s).toBeGreaterThan(590);
    expect(left.rows[0].s).toBeLessThanOrEqual(600);
    await db.update(verificationTokens).set({ expires: sql`expires - interval '601 seconds'` });
    const link = await newestLink(db, "old@example.org");
    expect(await consumeLink(link.email, link.token)).toBeNull();
    expect(await sessionRows(db)).toEqual([]);
  });

  test("does not open another address, and stays good for its own", async ({ database: { db } }) => {
    serveFrom(db);
    await createPerson(db);
    await requestLink("mine@example.org", "/programmes");
    const link = await newestLink(db, "mine@example.org");
    expect(await consumeLink("other@example.org", link.token)).toBeNull();
    expect(await consumeLink(link.email, `${link.token.slice(0, -1)}_`)).toBeNull();
    expect(await consumeLink(link.email, link.token)).not.toBeNull();
  });

  test("leads back to the page that was asked for, in the browser that asked", async ({
    database: { db },
  }) => {
    serveFrom(db);
    await requestLink("back@example.org", "/ledger?before=7");
    expect(await wasAskedHere()).toBe(true);
    const link = await newestLink(db, "back@example.org");
    expect(await consumeLink(link.email, link.token)).toBe("/ledger?before=7");
    expect(await wasAskedHere()).toBe(false);

    await requestLink("back@example.org", "//elsewhere.example/");
    const other = await newestLink(db, "back@example.org");
    expect(await consumeLink(other.email, other.token)).toBe("/programmes");
  });

  test("opened on another device works too, and that device says so", async ({ database: { db } }) => {
    serveFrom(db);
    await requestLink("phone@example.org", "/ledger");
    const link = await newestLink(db, "phone@example.org");
    browser.now = new TestBrowser();
    expect(await wasAskedHere()).toBe(false);
    expect(await consumeLink(link.email, link.token)).toBe("/programmes");
  });

  test("ends the session that the browser had before", async ({ database: { db } }) => {
    serveFrom(db);
    const tokens: (string | null)[] = [];
    for (const round of [1, 2]) {
      await requestLink("twice@example.org", "/programmes");
      const link = await newestLink(db, "twice@example.org");
      expect(await consumeLink(link.email, link.token), `round ${round}`).not.toBeNull();
      tokens.push(await readSessionToken());
    }
    expect(tokens[0]).not.toBe(tokens[1]);
    expect(await sessionRows(db)).toHaveLength(1);
  });
});

describe("asking for a link", () => {
  test("does the same for a known and an unknown address", async ({ database: { db } }) => {
    serveFrom(db);
    const known = await createPerson(db);
    const outcomes = [await requestLink(known.email, "/"), await requestLink("nobody@example.org", "/")];
    expect(outcomes[0]).toBe(outcomes[1]);
    const mails = await db.select().from(mailQueue);
    const shape = (body: string) => body.replace(/https?:\/\/\S+/, "LINK");
    expect(mails).toHaveLength(2);
    expect(mails[0].subject).toBe(mails[1].subject);
    expect(shape(mails[0].body)).toBe(shape(mails[1].body));
    expect(await db.select().from(users)).toHaveLength(1);
  });

  test("carries the configured origin, whatever the request claims", async ({ database: { db } }) => {
    serveFrom(db);
    browser.now.sent.set("host", "evil.example");
    browser.now.sent.set("x-forwarded-host", "evil.example");
    browser.now.sent.set("x-forwarded-proto", "https");
    await requestLink("host@example.org", "/programmes");
    expect((await newestLink(db, "host@example.org")).url.origin).toBe(ORIGIN);
  });

  test("is refused after five in an hour for one address, not for another", async ({ database: { db } }) => {
    serveFrom(db);
    for (let nth = 1; nth <= 5; nth += 1) await requestLink("often@example.org", "/");
    await expect(requestLink("often@example.org", "/")).rejects.toMatchObject({ status: 429 });
    await requestLink("other@example.org", "/");
    await db.update(rateLimits).set({ windowStart: sql`now() - interval '61 minutes'` });
    await requestLink("often@example.org", "/");
  });

  test("by one sender with many addresses locks nobody else out, and alarms once", async ({
    database: { db },
  }) => {
    serveFrom(db);
    const alarm = vi.spyOn(logger(), "error");
    // Refused tries of one address, however many, are not counted against everybody.
    for (let nth = 1; nth <= 7; nth += 1) await requestLink("loud@example.org", "/").catch(() => undefined);
    const inAll = () => db.select().from(rateLimits).where(eq(rateLimits.bucket, "link"));
    expect(await inAll()).toMatchObject([{ count: 5 }]);

    const setTo = (count: number) =>
      db.update(rateLimits).set({ count }).where(eq(rateLimits.bucket, "link"));
    await setTo(199);
    await requestLink("a@example.org", "/");
    await requestLink("b@example.org", "/");
    expect(alarm.mock.calls).toEqual([[{ event: "security.many_links", inAnHour: 200 }]]);
    await setTo(2_000);
    await expect(requestLink("c@example.org", "/")).rejects.toMatchObject({ status: 429 });
  });

  test("is refused after twenty in an hour for one client, where a trusted edge names it", async ({
    database: { db },
  }) => {
    serveFrom(db);
    const ask = async (nth: number, hops: string) => {
      browser.now.sent.set("x-forwarded-for", hops);
      await requestLink(`${nth}@example.org`, "/");
    };
    for (let nth = 1; nth <= 22; nth += 1) await ask(nth, "192.0.2.1");
    vi.stubEnv("TRUST_PROXY", "1");
    vi.resetModules();
    const { requestLink: behindEdge } = await import("@/lib/auth/link");
    const askEdge = async (nth: number, hops: string) => {
      browser.now.sent.set("x-forwarded-for", hops);
      await behindEdge(`${nth}@example.org`, "/");
    };
    // What a client writes before the last hop changes nothing.
    for (let nth = 30; nth < 50; nth += 1) await askEdge(nth, `198.51.100.${nth}, 192.0.2.1`);
    await expect(askEdge(50, "198.51.100.50, 192.0.2.1")).rejects.toMatchObject({ status: 429 });
    await askEdge(51, "192.0.2.2");
    vi.stubEnv("TRUST_PROXY", "0");
  });
});

describe("a session", () => {
  test("ends after twelve idle hours and after thirty days, however busy", async ({ database: { db } }) => {
    serveFrom(db);
    await requestLink("idle@example.org", "/");
    const link = await newestLink(db, "idle@example.org");
    await consumeLink(link.email, link.token);
    const [{ hours }] = (
      await db.execute<{ hours: number }>(
        sql`select extract(epoch from expires - now())::float8 / 3600 as hours from sessions`,
      )
    ).rows;
    expect(hours).toBeCloseTo(12, 1);

    await db.update(sessions).set({ createdAt: sql`now() - interval '30 days 1 second'` });
    expect(await currentPerson()).toBeNull();
    await db.update(sessions).set({ createdAt: sql`now()` });
    expect(await currentPerson()).not.toBeNull();
    await db.update(sessions).set({ expires: sql`now() - interval '1 second'` });
    expect(await currentPerson()).toBeNull();
    expect(await sessionRows(db)).toEqual([]);
  });

  test("is renewed by use", async ({ database: { db } }) => {
    serveFrom(db);
    await requestLink("busy@example.org", "/");
    const link = await newestLink(db, "busy@example.org");
    await consumeLink(link.email, link.token);
    await db.update(sessions).set({ expires: sql`now() + interval '2 hours'` });
    expect(await currentPerson()).not.toBeNull();
    const [row] = await sessionRows(db);
    expect(row.expires.getTime() - Date.now()).toBeGreaterThan(11 * 3600 * 1000);
  });
});

describe("the demo's one-click sign-in", () => {
  test("opens sample people only", async ({ database: { db } }) => {
    serveFrom(db);
    const workspaceId = await createWorkspaceRow(db);
    const real = await createMember(db, { workspaceId, roles: ["admin"], store: noStore });
    await expect(startSampleSession(real.userId)).rejects.toMatchObject({ status: 404 });
    // A sample person in a real workspace is no door into it either.
    await db.update(users).set({ sample: true }).where(eq(users.id, real.userId));
    await expect(startSampleSession(real.userId)).rejects.toMatchObject({ status: 404 });
    expect(await sessionRows(db)).toEqual([]);
    await db.execute(sql`update workspaces set sample = true`);
    await startSampleSession(real.userId);
    expect(await currentPerson()).toMatchObject({ id: real.userId });
  });
});

describe("a form", () => {
  for (const [what, origin] of [
    ["an absent", null],
    ["a null", "null"],
    ["a foreign", "https://evil.example"],
    ["a longer", `${ORIGIN}.evil.example`],
  ] as const) {
    test(`with ${what} origin is refused`, async ({ database: { db } }) => {
      serveFrom(db);
      if (origin === null) browser.now.sent.delete("origin");
      else browser.now.sent.set("origin", origin);
      await expect(requireOwnOrigin()).rejects.toMatchObject({ status: 403 });
    });
  }

  test("from our own page passes, from a cross-site frame it does not", async ({ database: { db } }) => {
    serveFrom(db);
    await expect(requireOwnOrigin()).resolves.toBeUndefined();
    browser.now.sent.set("sec-fetch-site", "cross-site");
    await expect(requireOwnOrigin()).rejects.toMatchObject({ status: 403 });
  });
});
