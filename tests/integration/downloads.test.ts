import { eq } from "drizzle-orm";
import { describe, expect, vi } from "vitest";
import { GET as getCsv } from "@/app/api/comparisons/[comparison]/csv/route";
import { GET as getImage } from "@/app/api/revisions/[revision]/image/route";
import { GET as getLog } from "@/app/api/runs/[run]/log/route";
import { ledger, runs } from "@/db/tables";
import type { Ctx } from "@/lib/services/ctx";
import { serveFrom } from "@/tests/support/browser";
import { test } from "@/tests/support/database";
import { createScene } from "@/tests/support/decision-scene";

const { signedIn } = vi.hoisted(() => ({ signedIn: { ctx: null as Ctx | null } }));
vi.mock("@/lib/auth/current", () => ({ requireCtxOrThrow: async () => signedIn.ctx }));
vi.mock("next/headers", () => ({ cookies: async () => null, headers: async () => new Headers() }));

const ADDRESS = "http://localhost:3061/";

describe("a download", () => {
  test("is noted once it is fetched, neither by asking for its head nor by another site's page", async ({
    database: { db },
  }) => {
    serveFrom(db);
    const scene = await createScene(db);
    signedIn.ctx = scene.lead;
    const [run] = await db.select().from(runs).where(eq(runs.number, 1));
    const entries = async () => (await db.select().from(ledger)).length;
    const before = await entries();
    const { comparisonId: comparison, standingId: revision } = scene;
    const ask = {
      csv: (init: RequestInit) =>
        getCsv(new Request(ADDRESS, init), { params: Promise.resolve({ comparison }) }),
      image: (init: RequestInit) =>
        getImage(new Request(ADDRESS, init), { params: Promise.resolve({ revision }) }),
      log: (init: RequestInit) =>
        getLog(new Request(ADDRESS, init), { params: Promise.resolve({ run: run.id }) }),
    };
    for (const [what, fetchIt] of Object.entries(ask)) {
      const head = await fetchIt({ method: "HEAD" });
      expect([head.status, head.headers.get("allow")], what).toEqual([405, "GET"]);
      const foreign = await fetchIt({ headers: { "sec-fetch-site": "cross-site" } });
      expect([foreign.status, (await foreign.json()).error], what).toEqual([403, "foreign_origin"]);
    }
    expect(await entries()).toBe(before);

    // Typed into the address bar, and from a page of ours.
    for (const site of ["none", "same-origin"]) {
      const csv = await ask.csv({ headers: { "sec-fetch-site": site } });
      expect([csv.status, csv.headers.get("content-type")]).toEqual([200, "text/csv; charset=utf-8"]);
    }
    expect(await entries()).toBe(before + 2);
  });
});
