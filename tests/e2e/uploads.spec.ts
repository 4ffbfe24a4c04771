import { createHash, randomBytes } from "node:crypto";
import { expect, type Page, test } from "@playwright/test";
import { signInAs } from "./sign-in";

const MIB = 1024 * 1024;
const PART = 8 * MIB;

interface Answer {
  status: number;
  body: { uploadId?: string; receivedBytes?: number; error?: string; state?: string };
}

/** A request from the page itself: its own origin, its own session, as the product sends it. */
async function ask(page: Page, method: string, path: string, body?: Buffer | object): Promise<Answer> {
  const bytes = Buffer.isBuffer(body) ? body.toString("base64") : null;
  const json = body !== undefined && bytes === null ? JSON.stringify(body) : null;
  return await page.evaluate(
    async (call) => {
      const data =
        call.bytes === null ? call.json : Uint8Array.from(atob(call.bytes), (c) => c.charCodeAt(0));
      const response = await fetch(call.path, { method: call.method, body: data });
      return { status: response.status, body: await response.json() };
    },
    { method, path, bytes, json },
  );
}

const begin = (page: Page, bytes: Buffer, sizeBytes = bytes.length) =>
  ask(page, "POST", "/api/uploads", {
    purpose: "log",
    fileName: "bytes.csv",
    sizeBytes,
    sha256: createHash("sha256").update(bytes).digest("hex"),
  });

test.beforeEach(async ({ page }) => {
  await signInAs(page, "Sam Okabe");
});

// The production build stands behind these: a proxy in front of the path would cut what is over 10 MB without an error.
for (const size of [1, MIB - 1, MIB + 1, 10 * MIB - 1, 10 * MIB, 10 * MIB + 1, 30 * MIB]) {
  test(`keeps ${size} bytes to the last through the production build`, async ({ page }) => {
    const bytes = randomBytes(size);
    const begun = await begin(page, bytes);
    expect(begun.status).toBe(200);
    const path = `/api/uploads/${begun.body.uploadId}`;
    for (let offset = 0; offset < size; offset += PART) {
      const part = await ask(page, "PUT", `${path}?offset=${offset}`, bytes.subarray(offset, offset + PART));
      expect(part).toMatchObject({ status: 200, body: { receivedBytes: Math.min(size, offset + PART) } });
    }
    expect((await ask(page, "GET", path)).body).toMatchObject({ state: "open", receivedBytes: size });
  });
}

test("refuses a part over 8 MiB instead of keeping less of it", async ({ page }) => {
  const bytes = randomBytes(12 * MIB);
  const begun = await begin(page, bytes);
  const path = `/api/uploads/${begun.body.uploadId}`;
  expect(await ask(page, "PUT", `${path}?offset=0`, bytes)).toMatchObject({
    status: 413,
    body: { error: "part_too_large" },
  });
  expect((await ask(page, "GET", path)).body.receivedBytes).toBe(0);
});

test("refuses an empty and an oversized file before a byte is sent", async ({ page }) => {
  expect((await begin(page, Buffer.alloc(0))).status).toBe(422);
  expect((await begin(page, Buffer.alloc(1), 200_000_001)).status).toBe(422);
});

test("refuses a part from another site", async ({ page, request }) => {
  const begun = await begin(page, Buffer.alloc(4));
  const answer = await request.put(`/api/uploads/${begun.body.uploadId}?offset=0`, {
    data: Buffer.alloc(4),
    headers: { origin: "https://elsewhere.example" },
  });
  expect(answer.status()).toBe(403);
});
