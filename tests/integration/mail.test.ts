import { mkdtemp, readdir, readFile, rm, stat } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { asc, sql } from "drizzle-orm";
import { afterEach, beforeEach, describe, expect, vi } from "vitest";
import { emptyUselessMail, enqueueMail } from "@/db/queries/mail";
import { mailQueue } from "@/db/tables";
import { queueSignInMail } from "@/lib/auth/sign-in-mail";
import { readMailFolder } from "@/lib/mail/read-folder";
import { sendDueMail } from "@/lib/mail/send-due";
import { type Letter, mailTransport } from "@/lib/mail/transport";
import { serveFrom } from "@/tests/support/browser";
import { test } from "@/tests/support/database";

const { folder } = vi.hoisted(() => ({ folder: { path: "" } }));
vi.mock("@/lib/env", () => ({
  env: () => ({
    AUTH_URL: "https://twinpass.example",
    MAIL_FROM: "Twinpass <twinpass@example.org>",
    MAIL_FOLDER: folder.path,
  }),
}));

beforeEach(async () => {
  folder.path = join(await mkdtemp(join(tmpdir(), "twinpass-mail-")), "mail");
});
afterEach(() => rm(folder.path, { recursive: true, force: true }));

const LINK = `https://twinpass.example/sign-in/link?email=a%40example.org&token=${"x".repeat(90)}`;
const MAIL = {
  workspaceId: null,
  toAddress: "a@example.org",
  subject: "Größe, 5 ≤ 6",
  body: `Hello\n\n${LINK}\n`,
};

describe("due mail", () => {
  test("lands in the folder once, as a message and in plain parts", async ({ database: { db } }) => {
    serveFrom(db);
    await enqueueMail(db, MAIL);
    expect(await sendDueMail(db)).toBe(1);
    expect(await sendDueMail(db)).toBe(0);
    const [row] = await db.select().from(mailQueue);
    expect(row.sentAt).toBeInstanceOf(Date);
    // What was sent is a key to the door; it stays in the letter only.
    expect(row.body).toBe("");
    expect((await readdir(folder.path)).sort()).toEqual([`${row.id}.eml`, `${row.id}.json`]);

    const eml = await readFile(join(folder.path, `${row.id}.eml`), "utf8");
    expect(eml).toContain(`Message-ID: <${row.id}@twinpass.example>`);
    // RFC 5322, 2.1.1: no line longer than 998 characters; the link is folded, which is why the plain parts exist.
    expect(Math.max(...eml.split("\r\n").map((line) => line.length))).toBeLessThanOrEqual(998);
    const [letter] = await readMailFolder(10);
    expect(letter).toMatchObject({ id: row.id, to: MAIL.toAddress, subject: MAIL.subject, text: MAIL.body });
    // A sign-in link is a key: nobody else on the machine reads it.
    expect((await stat(join(folder.path, `${row.id}.json`))).mode & 0o077).toBe(0);
  });

  test("goes out in the order it was caused, each once, also with four workers", async ({
    database: { db },
  }) => {
    serveFrom(db);
    for (let nth = 0; nth < 20; nth += 1) await enqueueMail(db, { ...MAIL, subject: String(nth) });
    const sent: string[] = [];
    const send = async (letter: Letter) => void sent.push(letter.subject);
    const counts = await Promise.all(Array.from({ length: 4 }, () => sendDueMail(db, send)));
    expect(counts.reduce((sum, count) => sum + count)).toBe(20);
    expect(new Set(sent).size).toBe(20);
  });

  test("is not sent once it is of no use any more, and is emptied by the sweep", async ({
    database: { db },
  }) => {
    serveFrom(db);
    await queueSignInMail("a@example.org", "x".repeat(43));
    await enqueueMail(db, { ...MAIL, subject: "of use for ever" });
    const wait = (minutes: number) =>
      db.execute(
        sql`update mail_queue set useful_until = useful_until - make_interval(mins => ${minutes}::int)`,
      );
    const [young] = await db.select().from(mailQueue).orderBy(asc(mailQueue.createdAt));
    expect(young.body).toContain("x".repeat(43));
    await wait(59);
    expect(await emptyUselessMail(db)).toBe(0);
    await wait(2);
    const sent: string[] = [];
    await sendDueMail(db, async (letter) => void sent.push(letter.subject));
    expect(sent).toEqual(["of use for ever"]);
    expect(await emptyUselessMail(db)).toBe(1);
    expect((await db.select().from(mailQueue)).map((row) => row.body)).toEqual(["", ""]);
  });

  test("that fails is tried again after 1, 2, 4 … minutes and stops no other", async ({
    database: { db },
  }) => {
    serveFrom(db);
    await enqueueMail(db, { ...MAIL, subject: "refused" });
    await enqueueMail(db, { ...MAIL, subject: "fine" });
    const send = async (letter: Letter) => {
      if (letter.subject === "refused") throw new Error("the mail server says no");
    };
    expect(await sendDueMail(db, send)).toBe(1);
    const waits: number[] = [];
    for (let attempt = 1; attempt <= 8; attempt += 1) {
      const [row] = await db
        .select({ s: sql<number>`extract(epoch from next_try_at - now())::float8`, n: mailQueue.attempts })
        .from(mailQueue)
        .orderBy(asc(mailQueue.createdAt));
      expect(row.n).toBe(attempt);
      waits.push(Math.round(row.s / 60));
      await db.execute(
        sql`update mail_queue set next_try_at = now() - interval '1 second' where sent_at is null`,
      );
      await sendDueMail(db, send);
    }
    expect(waits).toEqual([1, 2, 4, 8, 16, 32, 60, 60]);
  });

  test("sent but not marked goes out again under the same Message-ID", async ({ database: { db } }) => {
    serveFrom(db);
    await enqueueMail(db, MAIL);
    const send = mailTransport();
    const crash = sendDueMail(db, async (letter) => {
      await send(letter);
      await db.execute(sql`select pg_terminate_backend(pid) from pg_stat_activity
        where datname = current_database() and state = 'idle in transaction'`);
    });
    await expect(crash).rejects.toThrow();
    expect(await sendDueMail(db)).toBe(1);
    expect(await readMailFolder(10)).toHaveLength(1);
  });
});
