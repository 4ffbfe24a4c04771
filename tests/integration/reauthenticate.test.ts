import { eq, sql } from "drizzle-orm";
import { beforeEach, describe, expect, vi } from "vitest";
import type { Database } from "@/db/client";
import { savePassphrase } from "@/db/queries/people";
import { mailQueue, signingPassphrases } from "@/db/tables";
import { reauthenticate } from "@/lib/auth/reauthenticate";
import { test } from "@/tests/support/database";
import { createMember, createWorkspaceRow } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

/** What happens while a passphrase is hashed; what is stored is the passphrase itself. */
const { hashing } = vi.hoisted(() => ({ hashing: { meanwhile: async (): Promise<void> => undefined } }));
vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => {
    await hashing.meanwhile();
    return given === stored;
  },
}));

beforeEach(() => {
  hashing.meanwhile = async () => undefined;
});

const RIGHT = "out and back again";

async function createSigner(db: Database) {
  const workspaceId = await createWorkspaceRow(db);
  const me = await createMember(db, { workspaceId, roles: ["lead"], store: noStore });
  await savePassphrase(db, { userId: me.userId, scryptHash: RIGHT });
  return me;
}

/** "right", or the code of the refusal. */
const answer = (work: Promise<unknown>) =>
  work.then(
    () => "right",
    (error) => (error as { code: string }).code,
  );

describe("a signing passphrase", () => {
  test("is hashed while no transaction is open", async ({ database: { db } }) => {
    const me = await createSigner(db);
    let open = -1;
    hashing.meanwhile = async () => {
      const { rows } = await db.execute<{ n: number }>(sql`select count(*)::int as n from pg_stat_activity
        where datname = current_database() and state like 'idle in transaction%'`);
      open = rows[0].n;
    };
    expect(await answer(reauthenticate(me, RIGHT))).toBe("right");
    expect(open).toBe(0);
  });

  test("tried wrong twenty times at once is answered five times, then locked and told once", async ({
    database: { db },
  }) => {
    const me = await createSigner(db);
    // All of them are past the first look before any of them counts.
    let arrived = 0;
    let letGo: () => void = () => undefined;
    const all = new Promise<void>((resolve) => {
      letGo = resolve;
    });
    hashing.meanwhile = async () => {
      arrived += 1;
      if (arrived === 20) letGo();
      await all;
    };
    const tries = Array.from({ length: 20 }, (_, nth) => answer(reauthenticate(me, `wrong ${nth}`)));
    const answers = await Promise.all(tries);
    expect(answers.filter((code) => code === "wrong_passphrase")).toHaveLength(5);
    expect(answers.filter((code) => code === "passphrase_locked")).toHaveLength(15);
    expect(await answer(reauthenticate(me, RIGHT))).toBe("passphrase_locked");
    expect(await db.select().from(mailQueue)).toHaveLength(1);
  });

  test("that is right but counted after the lock opens nothing", async ({ database: { db } }) => {
    const me = await createSigner(db);
    hashing.meanwhile = async () => {
      hashing.meanwhile = async () => undefined;
      for (let nth = 1; nth <= 5; nth += 1) await answer(reauthenticate(me, "wrong"));
    };
    expect(await answer(reauthenticate(me, RIGHT))).toBe("passphrase_locked");
  });

  test("that was replaced while it was hashed opens nothing", async ({ database: { db } }) => {
    const me = await createSigner(db);
    hashing.meanwhile = () => savePassphrase(db, { userId: me.userId, scryptHash: "another one" });
    expect(await answer(reauthenticate(me, RIGHT))).toBe("wrong_passphrase");
    const [row] = await db.select().from(signingPassphrases).where(eq(signingPassphrases.userId, me.userId));
    expect(row.failedTries).toBe(1);
  });
});
