import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { seedPeople } from "@/db/seed/demo-people";
import { tellStory } from "@/db/seed/demo-story";
import { imageChecks, revisions } from "@/db/tables";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import { getDecisionDesk } from "@/lib/services/decisions/load-desk";
import { test } from "@/tests/support/database";
import { createTestStore } from "@/tests/support/store";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

describe("the demo's story, told with the product's own steps", () => {
  test("each revision's changes are worked out by the description, with where the runs went", {
    timeout: 240_000,
  }, async ({ tx: db }) => {
    const people = await seedPeople(db, files.store);
    await tellStory(people);
    const { workspaceId } = people.ana;
    const rows = await db
      .select({ id: revisions.id, number: revisions.number, state: revisions.state })
      .from(revisions)
      .where(eq(revisions.workspaceId, workspaceId))
      .orderBy(revisions.number);
    expect(rows.map(({ state }) => state)).toEqual(["promoted", "rolled_back", "turned_down", "in_review"]);
    const view = await getRevisionChanges(people.ana, rows[3].id);
    expect([view.state, view.against?.number, view.contradiction]).toEqual(["ready", 1, null]);
    expect(view.changes?.characteristics.map(({ name, kind }) => [name, kind]).sort()).toEqual([
      ["Boost.Target", "changed"],
      ["Data_label", "changed"],
      ["Ignition.Base", "changed"],
    ]);
    const { state, result } = view.coverage;
    expect(state).toBe("ready");
    // What moves along the axes was found by its name in the logs; full pedal was driven, so most of what changed was visited.
    expect(result?.maps.map(({ name, links }) => [name, links.map((link) => link?.channel)]).sort()).toEqual([
      ["Boost.Target", ["engine_speed", "pedal"]],
      ["Ignition.Base", ["engine_speed", "manifold_pressure"]],
    ]);
    for (const { name, changedVisited, changedCells } of result?.maps ?? []) {
      expect(changedVisited, name).toBeGreaterThan(0);
      expect(changedVisited, name).toBeLessThanOrEqual(changedCells);
    }
    // The checksum had to change with the data; it is declared, so it is nothing that nobody described.
    const { gates } = await getDecisionDesk(people.ana, rows[3].id);
    expect(gates.results.find(({ id }) => id === "touched")?.state).toBe("met");
    expect(gates.results.find(({ id }) => id === "integrity")?.state).toBe("met");
    const [check] = await db.select().from(imageChecks).where(eq(imageChecks.revisionId, rows[3].id));
    expect(check.result).toMatchObject({ fingerprintHolds: true, regions: [{ state: "holds" }] });
  });
});
