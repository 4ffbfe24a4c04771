import { createHash } from "node:crypto";
import { setTimeout as sleep } from "node:timers/promises";
import {
  AbortMultipartUploadCommand,
  type CompletedPart,
  CompleteMultipartUploadCommand,
  CreateMultipartUploadCommand,
  HeadObjectCommand,
  PutObjectCommand,
  type S3Client,
  UploadPartCommand,
} from "@aws-sdk/client-s3";
import { UnavailableError } from "@/lib/errors";
import { type ByteSource, type CreateOutcome, PART_BYTES } from "@/storage/port";
import { isUnknownUpload, statusOf } from "@/storage/s3-errors";

const CONFLICT_TRIES = 5;

/** Gathers a source into buffers of PART_BYTES; the last may be shorter. No bytes give no buffer. */
async function* inParts(source: ByteSource): AsyncGenerator<Buffer> {
  let chunks: Uint8Array[] = [];
  let gathered = 0;
  for await (const chunk of source) {
    for (let from = 0; from < chunk.byteLength; ) {
      const piece = chunk.subarray(from, from + PART_BYTES - gathered);
      chunks.push(piece);
      gathered += piece.byteLength;
      from += piece.byteLength;
      if (gathered < PART_BYTES) continue;
      yield Buffer.concat(chunks);
      chunks = [];
      gathered = 0;
    }
  }
  if (gathered > 0) yield Buffer.concat(chunks);
}

/** Length and MD5 of a body in memory; the SDK adds its SHA-256 as x-amz-content-sha256. Stores check one or the other. */
function described(body: Buffer) {
  // MD5 only guards the way to the store, where the protocol offers no other header that all stores check.
  return {
    Body: body,
    ContentLength: body.length,
    ContentMD5: createHash("md5").update(body).digest("base64"),
  };
}

/**
 * Creates objects once in a bucket. Every body is in memory when its request starts, so a source that fails
 * never leaves a request hanging, and the SDK can repeat a request that the network lost.
 */
export class S3Creator {
  /** False once the store said 501 to If-None-Match, or was seen to overwrite: then a HEAD before the write stands in. */
  conditional = true;

  constructor(
    private readonly client: S3Client,
    private readonly bucket: string,
  ) {}

  /** One request up to PART_BYTES, else a multipart upload that is aborted on any error. @param source checked already */
  async create(
    key: string,
    source: ByteSource,
    sizeBytes: number,
    abortSignal: AbortSignal | undefined,
  ): Promise<CreateOutcome> {
    if (sizeBytes > PART_BYTES) return await this.#createInParts(key, source, abortSignal);
    let body: Buffer = Buffer.alloc(0);
    for await (const part of inParts(source)) body = part;
    const target = { Bucket: this.bucket, Key: key };
    return await this.#once(key, (IfNoneMatch) =>
      this.client.send(new PutObjectCommand({ ...target, ...described(body), IfNoneMatch }), { abortSignal }),
    );
  }

  async #createInParts(
    key: string,
    source: ByteSource,
    abortSignal: AbortSignal | undefined,
  ): Promise<CreateOutcome> {
    const object = { Bucket: this.bucket, Key: key };
    const { UploadId } = await this.client.send(new CreateMultipartUploadCommand(object), { abortSignal });
    const upload = { ...object, UploadId };
    try {
      const Parts: CompletedPart[] = [];
      // The source throws at its end when size or digest differ: a wrong file is never completed.
      for await (const body of inParts(source)) {
        const PartNumber = Parts.length + 1;
        const part = new UploadPartCommand({ ...upload, ...described(body), PartNumber });
        const { ETag } = await this.client.send(part, { abortSignal });
        Parts.push({ ETag, PartNumber });
      }
      const outcome = await this.#once(key, (IfNoneMatch) =>
        this.client.send(
          new CompleteMultipartUploadCommand({ ...upload, MultipartUpload: { Parts }, IfNoneMatch }),
          { abortSignal },
        ),
      );
      if (outcome === "existed") await this.#abort(upload);
      return outcome;
    } catch (error) {
      await this.#abort(upload);
      throw error;
    }
  }

  /** Best effort and without the signal of the request; what stays is found by removeUnfinished. */
  async #abort(upload: { Bucket: string; Key: string; UploadId: string | undefined }): Promise<void> {
    await this.client.send(new AbortMultipartUploadCommand(upload)).catch(() => undefined);
  }

  async #exists(key: string): Promise<boolean> {
    try {
      await this.client.send(new HeadObjectCommand({ Bucket: this.bucket, Key: key }));
      return true;
    } catch (error) {
      if (statusOf(error) === 404) return false;
      throw error;
    }
  }

  /** 412: taken. 409: another writer is at it, try again. 501: no conditional create here, look first instead. */
  async #once(key: string, send: (ifNoneMatch: "*" | undefined) => Promise<unknown>): Promise<CreateOutcome> {
    for (let attempt = 1; attempt <= CONFLICT_TRIES; attempt++) {
      if (!this.conditional && (await this.#exists(key))) return "existed";
      try {
        await send(this.conditional ? "*" : undefined);
        return "created";
      } catch (error) {
        const status = statusOf(error);
        if (status === 412) return "existed";
        // A repeated "complete" whose first answer was lost finds its upload gone and its object there.
        if (isUnknownUpload(error) && (await this.#exists(key))) return "existed";
        if (status === 501 && this.conditional) this.conditional = false;
        else if (status !== 409) throw error;
        else if (attempt < CONFLICT_TRIES) await sleep(25 * 2 ** attempt * (0.5 + Math.random()));
      }
    }
    throw new UnavailableError(
      "store_busy",
      "Another upload of the same file is still being written. Try again in a moment.",
    );
  }
}
