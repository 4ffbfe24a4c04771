import { createHash } from "node:crypto";
import { Readable } from "node:stream";
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { UnavailableError } from "@/lib/errors";
import { checkedSource } from "@/storage/checked-source";
import type { ByteSource } from "@/storage/port";
import { sourceOf } from "@/tests/support/store-bytes";

// FIPS 180-4 example: SHA-256 of the three bytes "abc".
const ABC_SHA256 = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad";

async function collect(source: ByteSource): Promise<Buffer> {
  const chunks: Uint8Array[] = [];
  for await (const chunk of source) chunks.push(chunk);
  return Buffer.concat(chunks);
}

describe("checked source", () => {
  test("passes on bytes of the announced size and digest", async () => {
    const declared = { sizeBytes: 3, sha256: ABC_SHA256 };
    expect(await collect(checkedSource(sourceOf(Buffer.from("abc"), 1), declared))).toEqual(
      Buffer.from("abc"),
    );
    const wrong = { sizeBytes: 3, sha256: ABC_SHA256.replace("b", "c") };
    await expect(collect(checkedSource(sourceOf(Buffer.from("abc")), wrong))).rejects.toMatchObject({
      code: "digest_mismatch",
      details: { receivedSha256: ABC_SHA256 },
    });
  });

  test("reads web streams and Node streams alike", async () => {
    const web = new Response("abc").body as unknown as ByteSource;
    const declared = { sizeBytes: 3, sha256: ABC_SHA256 };
    expect((await collect(checkedSource(web, declared))).toString()).toBe("abc");
    const node = Readable.from([Buffer.from("ab"), Buffer.from("c")]);
    expect((await collect(checkedSource(node, declared))).toString()).toBe("abc");
  });

  test("passes bytes exactly where size and digest agree, for any bytes in any pieces", async () => {
    const check = async (bytes: Uint8Array, pieces: number, off: number, flip: boolean) => {
      const sha256 = createHash("sha256").update(bytes).digest("hex");
      const sent = Buffer.from(bytes);
      if (flip && sent.length > 0) sent[0] = (sent[0] ?? 0) ^ 255;
      const declared = { sizeBytes: Math.max(0, bytes.length + off), sha256 };
      const right = declared.sizeBytes === bytes.length && (!flip || sent.length === 0);
      const result = collect(checkedSource(sourceOf(sent, pieces), declared));
      if (right) expect(await result).toEqual(sent);
      else await expect(result).rejects.toMatchObject({ code: expect.stringMatching(/^(body|digest)_/) });
    };
    const property = fc.asyncProperty(
      fc.uint8Array({ maxLength: 200 }),
      fc.integer({ min: 1, max: 50 }),
      fc.constantFrom(0, 0, 0, -1, 1),
      fc.boolean(),
      check,
    );
    await fc.assert(property, { numRuns: 500 });
  });

  test("stops before the first byte too many is passed on, and closes the source", async () => {
    let closed = false;
    async function* endless() {
      try {
        for (;;) yield Buffer.alloc(10);
      } finally {
        closed = true;
      }
    }
    const passed: number[] = [];
    const reading = (async () => {
      for await (const chunk of checkedSource(endless(), { sizeBytes: 25 })) passed.push(chunk.byteLength);
    })();
    await expect(reading).rejects.toMatchObject({ code: "body_too_long", status: 413 });
    expect(passed).toEqual([10, 10]);
    await Promise.resolve();
    expect(closed).toBe(true);
  });

  test("ends a source that hangs when the signal aborts", async () => {
    async function* hangs() {
      yield Buffer.from("a");
      await new Promise(() => undefined);
    }
    const controller = new AbortController();
    const reading = collect(checkedSource(hangs(), { sizeBytes: 2 }, controller.signal));
    setTimeout(() => controller.abort(), 20);
    await expect(reading).rejects.toMatchObject({ code: "body_interrupted" });
    const already = collect(checkedSource(sourceOf(Buffer.from("a")), { sizeBytes: 1 }, AbortSignal.abort()));
    await expect(already).rejects.toMatchObject({ code: "body_interrupted" });
  });

  test("leaves a typed error of the source as it is", async () => {
    const inner = new UnavailableError("store_unavailable", "The store is away.");
    async function* fails() {
      yield Buffer.from("a");
      throw inner;
    }
    await expect(collect(checkedSource(fails(), { sizeBytes: 2 }))).rejects.toBe(inner);
  });
});
