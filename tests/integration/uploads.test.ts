import { randomBytes } from "node:crypto";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import type { Transaction } from "@/db/client";
import { revisions, uploads } from "@/db/tables";
import { readBlob } from "@/lib/services/blobs";
import type { Ctx } from "@/lib/services/ctx";
import { withTransaction } from "@/lib/services/ctx";
import { addRevision } from "@/lib/services/revisions/create";
import { addPart } from "@/lib/services/uploads/add-part";
import { openUpload } from "@/lib/services/uploads/begin";
import { cancelUpload } from "@/lib/services/uploads/cancel";
import { getUpload } from "@/lib/services/uploads/load";
import { LARGEST_BYTES } from "@/lib/services/uploads/schema";
import { sealUpload, spendSealedUpload } from "@/lib/services/uploads/seal";
import { PART_BYTES } from "@/storage/port";
import { test } from "@/tests/support/database";
import { createMember, createProgrammeRow, createWorkspaceRow } from "@/tests/support/factories";
import { createTestStore } from "@/tests/support/store";
import { sha256Of, uploadBytes } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

async function tester(tx: Transaction): Promise<Ctx> {
  const workspaceId = await createWorkspaceRow(tx);
  return await createMember(tx, { workspaceId, roles: ["tester"], store: files.store });
}

async function* once(bytes: Uint8Array) {
  yield bytes;
}

describe("sending a file in parts", () => {
  for (const size of [1, 1024, PART_BYTES - 1, PART_BYTES, PART_BYTES + 1, 2 * PART_BYTES + 7]) {
    test(`keeps ${size} bytes exactly as sent`, async ({ tx }) => {
      const ctx = await tester(tx);
      const bytes = randomBytes(size);
      const sealed = await sealUpload(ctx, {
        uploadId: await uploadBytes(ctx, "log", "a.csv", bytes),
        purpose: "log",
      });
      await withTransaction(ctx, (inner, c) => spendSealedUpload(inner, c, sealed));
      expect(sealed).toMatchObject({ sizeBytes: size, sha256: sha256Of(bytes), fileName: "a.csv" });
      expect(Buffer.compare(await readBlob(ctx, sealed.sha256), bytes)).toBe(0);
    });
  }

  test("refuses bytes that are not the declared ones and keeps nothing under the fingerprint", async ({
    tx,
  }) => {
    const ctx = await tester(tx);
    const declared = sha256Of(Buffer.from("what was declared"));
    const uploadId = await uploadBytes(ctx, "log", "a.csv", Buffer.from("what has arrived!"), declared);
    await expect(sealUpload(ctx, { uploadId, purpose: "log" })).rejects.toMatchObject({
      code: "digest_mismatch",
    });
    await expect(readBlob(ctx, declared)).rejects.toMatchObject({ code: "object_not_found" });
  });

  test("asks a sender of known content for the bytes too", async ({ tx }) => {
    const ctx = await tester(tx);
    const bytes = randomBytes(64);
    await sealUpload(ctx, { uploadId: await uploadBytes(ctx, "log", "a.csv", bytes), purpose: "log" });
    const pretender = await uploadBytes(ctx, "log", "b.csv", randomBytes(64), sha256Of(bytes));
    await expect(sealUpload(ctx, { uploadId: pretender, purpose: "log" })).rejects.toMatchObject({
      code: "digest_mismatch",
    });
  });

  test("does not seal while bytes are missing, and says how many", async ({ tx }) => {
    const ctx = await tester(tx);
    const { uploadId } = await openUpload(ctx, {
      purpose: "log",
      fileName: "a.csv",
      sizeBytes: 10,
      sha256: "0".repeat(64),
    });
    await addPart(ctx, { uploadId, offsetBytes: 0, sizeBytes: 4, body: once(Buffer.alloc(4)) });
    await expect(sealUpload(ctx, { uploadId, purpose: "log" })).rejects.toMatchObject({
      code: "upload_incomplete",
      message: "a.csv: 4 of 10 bytes have arrived. Go on sending.",
    });
  });

  test("takes a repeated part as the same part, and no part out of order", async ({ tx }) => {
    const ctx = await tester(tx);
    const { uploadId } = await openUpload(ctx, {
      purpose: "log",
      fileName: "a.csv",
      sizeBytes: 10,
      sha256: "0".repeat(64),
    });
    const part = (offsetBytes: number) =>
      addPart(ctx, { uploadId, offsetBytes, sizeBytes: 5, body: once(Buffer.alloc(5)) });
    await expect(part(5)).rejects.toMatchObject({ code: "wrong_offset", details: { receivedBytes: 0 } });
    expect(await part(0)).toMatchObject({ receivedBytes: 5 });
    expect(await part(0)).toMatchObject({ receivedBytes: 5 });
    expect(await part(5)).toMatchObject({ receivedBytes: 10 });
    expect(await getUpload(ctx, uploadId)).toMatchObject({ state: "open", receivedBytes: 10 });
  });

  test("counts no part that was cut short on its way", async ({ tx }) => {
    const ctx = await tester(tx);
    const { uploadId } = await openUpload(ctx, {
      purpose: "log",
      fileName: "a.csv",
      sizeBytes: 10,
      sha256: "0".repeat(64),
    });
    const short = addPart(ctx, { uploadId, offsetBytes: 0, sizeBytes: 10, body: once(Buffer.alloc(6)) });
    await expect(short).rejects.toMatchObject({ code: "body_too_short" });
    expect(await getUpload(ctx, uploadId)).toMatchObject({ receivedBytes: 0 });
  });

  test("closes a cancelled upload", async ({ tx }) => {
    const ctx = await tester(tx);
    const uploadId = await uploadBytes(ctx, "log", "a.csv", randomBytes(8));
    await cancelUpload(ctx, uploadId);
    await expect(sealUpload(ctx, { uploadId, purpose: "log" })).rejects.toMatchObject({
      code: "upload_closed",
    });
  });
});

describe("who may send what", () => {
  test("gives another person's upload no existence", async ({ tx }) => {
    const ctx = await tester(tx);
    const colleague = await createMember(tx, {
      workspaceId: ctx.workspaceId,
      roles: ["tester"],
      store: files.store,
    });
    const stranger = await tester(tx);
    const uploadId = await uploadBytes(ctx, "log", "a.csv", randomBytes(8));
    for (const other of [colleague, stranger]) {
      await expect(getUpload(other, uploadId)).rejects.toMatchObject({ status: 404 });
      await expect(sealUpload(other, { uploadId, purpose: "log" })).rejects.toMatchObject({ status: 404 });
    }
  });

  test("stops an upload at once when the role is taken away", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    for (const [role, purpose] of [
      ["tester", "log"],
      ["calibrator", "image"],
    ] as const) {
      const ctx = await createMember(tx, { workspaceId, roles: [role], store: files.store });
      const bytes = randomBytes(10);
      const declared = { purpose, fileName: "a.bin", sizeBytes: 10, sha256: sha256Of(bytes) };
      const { uploadId } = await openUpload(ctx, declared);
      const part = (who: Ctx) => addPart(who, { uploadId, offsetBytes: 0, sizeBytes: 10, body: once(bytes) });
      const without: Ctx = { ...ctx, roles: ["reader", "lead", "admin"] };
      await expect(part(without)).rejects.toMatchObject({ status: 403 });
      await part(ctx);
      await expect(sealUpload(without, { uploadId, purpose })).rejects.toMatchObject({ status: 403 });
      await expect(getUpload(without, uploadId)).rejects.toMatchObject({ status: 403 });
      await expect(cancelUpload(without, uploadId)).rejects.toMatchObject({ status: 403 });
      expect(await getUpload(ctx, uploadId)).toMatchObject({ state: "open", receivedBytes: 10 });
    }
  });

  test("lets no upload serve twice, and none that was cancelled meanwhile", async ({ tx }) => {
    const ctx = await tester(tx);
    const send = async () => {
      const uploadId = await uploadBytes(ctx, "log", "a.csv", randomBytes(8));
      return await sealUpload(ctx, { uploadId, purpose: "log" });
    };
    const use = (sealed: Awaited<ReturnType<typeof send>>) =>
      withTransaction(ctx, (inner, c) => spendSealedUpload(inner, c, sealed));
    const used = await send();
    await use(used);
    await expect(use(used)).rejects.toMatchObject({ code: "upload_used" });
    await cancelUpload(ctx, used.uploadId);
    expect(await getUpload(ctx, used.uploadId)).toMatchObject({ state: "used" });
    const ended = await send();
    await cancelUpload(ctx, ended.uploadId);
    await expect(use(ended)).rejects.toMatchObject({ code: "upload_used" });
  });

  test("lets a tester send logs but no images", async ({ tx }) => {
    const ctx = await tester(tx);
    const image = { purpose: "image" as const, fileName: "a.hex", sizeBytes: 10, sha256: "0".repeat(64) };
    await expect(openUpload(ctx, image)).rejects.toMatchObject({ status: 403 });
  });

  test("does not let a log stand in for an image", async ({ tx }) => {
    const ctx = await tester(tx);
    const uploadId = await uploadBytes(ctx, "log", "a.csv", randomBytes(8));
    await expect(sealUpload(ctx, { uploadId, purpose: "image" })).rejects.toMatchObject({
      code: "wrong_purpose",
    });
  });
});

describe("declarations", () => {
  const declared = { purpose: "log" as const, sizeBytes: 10, sha256: "0".repeat(64) };

  for (const [given, kept] of [
    ["../../etc/passwd", "passwd"],
    ["C:\\logs\\run 1.csv", "run 1.csv"],
    ["run\u0000\u202e.csv", "run.csv"],
    [`${"x".repeat(4096)}.csv`, "x".repeat(200)],
  ]) {
    test(`keeps of the name ${JSON.stringify(given.slice(0, 20))} only what can be shown`, async ({ tx }) => {
      const { uploadId } = await openUpload(await tester(tx), { ...declared, fileName: given });
      const [row] = await tx.select().from(uploads).where(eq(uploads.id, uploadId));
      expect(row.fileName).toBe(kept);
      expect(row.stagingKey).toMatch(/^ws\/[0-9a-f-]{36}\/staging\/[0-9a-f-]{36}$/);
    });
  }

  test("refuses empty and oversized files before a byte is sent, in plain words", async ({ tx }) => {
    const ctx = await tester(tx);
    const empty = openUpload(ctx, { ...declared, fileName: "a.csv", sizeBytes: 0 });
    await expect(empty).rejects.toThrow("The file is empty: it has 0 bytes. Choose another.");
    const huge = openUpload(ctx, { ...declared, fileName: "a.csv", sizeBytes: LARGEST_BYTES.log + 1 });
    await expect(huge).rejects.toThrow("a.csv has 201 MB; the limit is 200 MB.");
    expect(
      await openUpload(ctx, { ...declared, fileName: "a.csv", sizeBytes: LARGEST_BYTES.log }),
    ).toBeTruthy();
  });
});

describe("a revision from an upload", () => {
  test("is made once of it, whatever key the second wish carries", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const ctx = await createMember(tx, { workspaceId, roles: ["calibrator"], store: files.store });
    const programmeId = await createProgrammeRow(tx, { workspaceId, createdBy: ctx.userId });
    const request = {
      programmeId,
      parentId: null,
      uploadId: await uploadBytes(ctx, "image", "a.bin", randomBytes(64)),
      baseAddress: "8000",
      title: "Base",
      changeReason: "",
      intendedUse: null,
      touchesEmissionOrSafety: null,
      note: "",
    };
    const made = await addRevision(ctx, request, "key-of-the-first-wish");
    expect(await addRevision(ctx, request, "key-of-the-first-wish")).toEqual(made);
    await expect(addRevision(ctx, request, "key-of-another-wish")).rejects.toMatchObject({
      status: 409,
      code: "upload_used",
    });
    expect(await tx.select().from(revisions)).toHaveLength(1);
  });
});
