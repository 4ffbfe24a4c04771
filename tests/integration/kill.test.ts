import { spawn } from "node:child_process";
import { randomUUID } from "node:crypto";
import { and, eq } from "drizzle-orm";
import { afterAll, beforeAll, expect } from "vitest";
import { descriptions, idempotencyKeys, ledger, revisions } from "@/db/tables";
import { readBlob } from "@/lib/services/blobs";
import { mintCtx } from "@/lib/services/ctx";
import { addRevision } from "@/lib/services/revisions/create";
import type { TestDatabase } from "@/tests/support/database";
import { test } from "@/tests/support/database";
import { createMember, createProgrammeRow, createWorkspaceRow } from "@/tests/support/factories";
import type { KillOrder } from "@/tests/support/kill-child";
import { smallA2l } from "@/tests/support/small-calibration";
import { createTestStore } from "@/tests/support/store";
import { sha256Of, uploadBytes } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

/** Intel HEX of four bytes at 0x0000 that differ each time, so that no two campaigns share a blob. */
function someImage(): Buffer {
  const data = Buffer.from(randomUUID().replaceAll("-", "").slice(0, 8), "hex");
  const record = Buffer.concat([Buffer.from([data.length, 0, 0, 0]), data]);
  const checksum = (256 - (record.reduce((sum, byte) => sum + byte, 0) & 0xff)) & 0xff;
  return Buffer.from(
    `:${record.toString("hex")}${checksum.toString(16).padStart(2, "0")}\n:00000001FF\n`.toUpperCase(),
  );
}

interface Outcome {
  signal: NodeJS.Signals | null;
  code: number | null;
  out: string;
  err: string;
}

function runChild(order: KillOrder): Promise<Outcome> {
  return new Promise((resolve) => {
    const child = spawn(
      process.execPath,
      ["--conditions=react-server", "--import", "tsx", "tests/support/kill-child.ts", JSON.stringify(order)],
      { stdio: ["ignore", "pipe", "pipe"] },
    );
    let out = "";
    let err = "";
    child.stdout.on("data", (chunk) => (out += chunk));
    child.stderr.on("data", (chunk) => (err += chunk));
    child.on("close", (code, signal) => resolve({ code, signal, out, err }));
  });
}

/** An uploaded image that waits to become a revision. */
async function prepare(database: TestDatabase): Promise<KillOrder> {
  const workspaceId = await createWorkspaceRow(database.db);
  const ctx = await createMember(database.db, { workspaceId, roles: ["calibrator"], store: files.store });
  const programmeId = await createProgrammeRow(database.db, { workspaceId, createdBy: ctx.userId });
  const uploadId = await uploadBytes(ctx, "image", "image.hex", someImage());
  const a2l = smallA2l({ unit: randomUUID().slice(0, 8) });
  const descriptionUploadIds = [await uploadBytes(ctx, "description", "image.a2l", a2l)];
  return {
    databaseUrl: database.url,
    storeRoot: files.root,
    workspaceId,
    userId: ctx.userId,
    roles: ["calibrator"],
    idempotencyKey: randomUUID(),
    killAtCall: 0,
    request: {
      programmeId,
      parentId: null,
      uploadId,
      descriptionUploadIds,
      title: "boost ramp",
      note: "",
      changeReason: "",
      intendedUse: null,
      touchesEmissionOrSafety: null,
    },
  };
}

/** The same request again, from a process that lives. */
async function repeat(database: TestDatabase, order: KillOrder) {
  const { userId, workspaceId, roles } = order;
  const ctx = mintCtx({
    userId,
    userName: "A calibrator",
    workspaceId,
    roles,
    db: database.db,
    store: files.store,
  });
  return await addRevision(ctx, order.request, order.idempotencyKey);
}

/** What must hold after every kill and every repeat. */
async function check(database: TestDatabase, order: KillOrder, expected: number): Promise<void> {
  const { workspaceId } = order;
  const rows = await database.db.select().from(revisions).where(eq(revisions.workspaceId, workspaceId));
  const entries = await database.db
    .select()
    .from(ledger)
    .where(and(eq(ledger.workspaceId, workspaceId), eq(ledger.event, "revision.created")));
  const answers = await database.db
    .select()
    .from(idempotencyKeys)
    .where(eq(idempotencyKeys.key, order.idempotencyKey));
  expect(rows.length).toBe(expected);
  expect(entries.length).toBe(rows.length);
  expect(answers.length).toBe(rows.length);
  for (const row of rows) {
    const bytes = await readBlob({ store: files.store, workspaceId }, row.imageSha256);
    expect(sha256Of(bytes)).toBe(row.imageSha256);
    expect(bytes.length).toBe(row.imageBytes);
  }
  const described = await database.db
    .select()
    .from(descriptions)
    .where(eq(descriptions.workspaceId, workspaceId));
  expect(described.map(({ id }) => id)).toEqual(rows.map(({ descriptionId }) => descriptionId));
  for (const { files: parts } of described)
    for (const { sha256 } of parts)
      expect(sha256Of(await readBlob({ store: files.store, workspaceId }, sha256))).toBe(sha256);
}

test("a kill before any call of database or store loses nothing and doubles nothing", {
  timeout: 600_000,
}, async ({ database }) => {
  const whole = await prepare(database);
  const first = await runChild(whole);
  expect(first.err).toBe("");
  const { calls } = JSON.parse(first.out) as { calls: number };
  await check(database, whole, 1);
  expect(calls).toBeGreaterThan(10);

  for (let killAtCall = 1; killAtCall <= calls; killAtCall += 1) {
    const order = { ...(await prepare(database)), killAtCall };
    const killed = await runChild(order);
    // Counting may end a call earlier in a repeat; then the work is done and the repeat must replay it.
    expect(killed.signal === "SIGKILL" || killed.code === 0).toBe(true);
    const [row] = await database.db
      .select()
      .from(revisions)
      .where(eq(revisions.workspaceId, order.workspaceId));
    await check(database, order, row ? 1 : 0);

    const answer = await repeat(database, order);
    expect(answer.number).toBe(1);
    if (row) expect(answer.revisionId).toBe(row.id);
    await check(database, order, 1);
  }
});
