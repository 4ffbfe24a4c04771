import type { Readable } from "node:stream";
import {
  AbortMultipartUploadCommand,
  DeleteObjectCommand,
  GetObjectCommand,
  HeadBucketCommand,
  HeadObjectCommand,
  ListMultipartUploadsCommand,
  ListObjectsV2Command,
  S3Client,
} from "@aws-sdk/client-s3";
import { getSignedUrl } from "@aws-sdk/s3-request-presigner";
import { NotFoundError, UnavailableError } from "@/lib/errors";
import { verifyBlob } from "@/storage/blob";
import { checkedSource, interrupted } from "@/storage/checked-source";
import { checkedKey, checkedPrefix, type KeyPrefix, type ObjectKey, parseObjectKey } from "@/storage/keys";
import { checkedStream, declaredFor, pageLimit, rangeOutside } from "@/storage/object-checks";
import type { ByteRange, ListPage, ObjectStat, ObjectStore, StoredBytes } from "@/storage/port";
import { probeStore } from "@/storage/probe";
import { S3Creator } from "@/storage/s3-create";
import { s3Error, statusOf } from "@/storage/s3-errors";
import { checkLinkOptions } from "@/storage/signed-link";

export interface S3Config {
  driver: "s3";
  /** Address of any S3-compatible store; without it the region decides. */
  endpoint?: string;
  region: string;
  bucket: string;
  accessKeyId: string;
  secretAccessKey: string;
  /** True puts the bucket into the path instead of the host name; most stores of one's own need it. */
  forcePathStyle: boolean;
}

function clientOf(config: S3Config): S3Client {
  return new S3Client({
    endpoint: config.endpoint,
    region: config.region,
    forcePathStyle: config.forcePathStyle,
    credentials: { accessKeyId: config.accessKeyId, secretAccessKey: config.secretAccessKey },
    // The default adds trailing checksums that some stores refuse, and signs the checksum of an empty body into links.
    requestChecksumCalculation: "WHEN_REQUIRED",
    responseChecksumValidation: "WHEN_REQUIRED",
    maxAttempts: 3,
    requestHandler: {
      connectionTimeout: 5_000,
      requestTimeout: 60_000,
      throwOnRequestTimeout: true,
      socketTimeout: 30_000,
    },
  });
}

function headerRange(range: ByteRange | undefined): string | undefined {
  if (range === undefined) return undefined;
  const { firstByte, lastByte } = range;
  const whole = [firstByte, lastByte ?? firstByte].every(Number.isSafeInteger);
  if (!whole || firstByte < 0 || (lastByte !== undefined && lastByte < firstByte)) throw rangeOutside();
  return `bytes=${firstByte}-${lastByte ?? ""}`;
}

function unclear(what: string): never {
  throw new UnavailableError(
    "store_unfaithful",
    `The file store answered without ${what}. Check that it speaks the S3 protocol.`,
  );
}

class S3Store implements ObjectStore {
  readonly #client: S3Client;
  readonly #creator: S3Creator;

  constructor(private readonly config: S3Config) {
    this.#client = clientOf(config);
    this.#creator = new S3Creator(this.#client, config.bucket);
  }

  #object(key: ObjectKey) {
    return { Bucket: this.config.bucket, Key: checkedKey(key).key };
  }

  async check() {
    try {
      await this.#client.send(new HeadBucketCommand({ Bucket: this.config.bucket }));
    } catch (error) {
      const typed = s3Error(error);
      if (!(typed instanceof NotFoundError)) throw typed;
      throw new UnavailableError(
        "bucket_missing",
        "The bucket of the file store does not exist. Create it or set S3_BUCKET.",
      );
    }
    if ((await probeStore(this)) === "none") this.#creator.conditional = false;
    const conditionalCreate = this.#creator.conditional ? "atomic" : "none";
    return { driver: "s3", conditionalCreate, signedLinks: "store" } as const;
  }

  async create(...[key, source, declared, signal]: Parameters<ObjectStore["create"]>) {
    const parsed = checkedKey(key);
    const expected = declaredFor(parsed, declared);
    try {
      const checked = checkedSource(source, expected, signal);
      const { sizeBytes } = expected;
      const outcome = await this.#creator.create(parsed.key, checked, sizeBytes, signal);
      if (parsed.kind === "blob") await verifyBlob(this, parsed.key, { sizeBytes, outcome, signal });
      return outcome;
    } catch (error) {
      const typed = s3Error(error);
      // An abort can meet a request to the store half way; it is still the sender who left.
      throw signal?.aborted === true && typed !== error ? interrupted(error) : typed;
    }
  }

  async stat(key: ObjectKey): Promise<ObjectStat> {
    const head = await this.#client.send(new HeadObjectCommand(this.#object(key))).catch((error) => {
      throw s3Error(error);
    });
    return {
      sizeBytes: head.ContentLength ?? unclear("a size"),
      modifiedAtMs: head.LastModified?.getTime() ?? unclear("a time"),
    };
  }

  async get(key: ObjectKey, options: { range?: ByteRange; signal?: AbortSignal } = {}): Promise<StoredBytes> {
    const { range, signal } = options;
    const command = new GetObjectCommand({ ...this.#object(key), Range: headerRange(range) });
    const answer = await this.#client.send(command, { abortSignal: signal }).catch((error) => {
      throw statusOf(error) === 416 ? rangeOutside() : s3Error(error);
    });
    const source = answer.Body as Readable | undefined;
    if (source === undefined) unclear("a body");
    const sizeBytes = answer.ContentLength ?? unclear("a size");
    const total = answer.ContentRange?.split("/")[1];
    if (range !== undefined && total === undefined) {
      source.destroy();
      unclear("the asked range");
    }
    const body = checkedStream(source, sizeBytes, s3Error, signal, () => source.destroy());
    return { body, sizeBytes, totalBytes: total === undefined ? sizeBytes : Number(total) };
  }

  async remove(key: ObjectKey): Promise<void> {
    await this.#client.send(new DeleteObjectCommand(this.#object(key))).catch((error) => {
      if (statusOf(error) !== 404) throw s3Error(error);
    });
  }

  async list(prefix: KeyPrefix, options: { after?: string; limit?: number } = {}): Promise<ListPage> {
    const page = await this.#client
      .send(
        new ListObjectsV2Command({
          Bucket: this.config.bucket,
          Prefix: checkedPrefix(prefix),
          StartAfter: options.after,
          MaxKeys: pageLimit(options.limit),
        }),
      )
      .catch((error) => {
        throw s3Error(error);
      });
    const contents = page.Contents ?? [];
    const objects = contents.flatMap(({ Key, Size, LastModified }) => {
      const key = parseObjectKey(Key ?? "")?.key;
      if (key === undefined) return [];
      const modifiedAtMs = LastModified?.getTime() ?? unclear("a time");
      return [{ key, sizeBytes: Size ?? unclear("a size"), modifiedAtMs }];
    });
    return page.IsTruncated ? { objects, next: contents.at(-1)?.Key ?? unclear("names") } : { objects };
  }

  async signedGet(...[key, options]: Parameters<ObjectStore["signedGet"]>) {
    checkLinkOptions(options);
    const command = new GetObjectCommand({
      ...this.#object(key),
      ResponseContentType: options.contentType,
      ResponseContentDisposition: options.contentDisposition,
    });
    const signingDate = new Date();
    const expiresIn = options.expiresInSeconds;
    const url = await getSignedUrl(this.#client, command, { expiresIn, signingDate });
    return { url, expiresAtMs: signingDate.getTime() + expiresIn * 1000 };
  }

  async removeUnfinished(olderThanMs: number): Promise<number> {
    const { bucket: Bucket } = this.config;
    let marker: { KeyMarker?: string; UploadIdMarker?: string } = {};
    let removed = 0;
    try {
      for (;;) {
        const page = await this.#client.send(
          new ListMultipartUploadsCommand({ Bucket, Prefix: "ws/", ...marker }),
        );
        for (const { Key, UploadId, Initiated } of page.Uploads ?? []) {
          const ours = Key !== undefined && parseObjectKey(Key) !== undefined;
          if (!ours || Initiated === undefined || Initiated.getTime() >= olderThanMs) continue;
          await this.#client.send(new AbortMultipartUploadCommand({ Bucket, Key, UploadId }));
          removed++;
        }
        if (!page.IsTruncated) return removed;
        marker = { KeyMarker: page.NextKeyMarker, UploadIdMarker: page.NextUploadIdMarker };
      }
    } catch (error) {
      throw s3Error(error);
    }
  }
}

/** A bucket of any S3-compatible store. The bucket must exist; check() says what the store can do. */
export function s3Store(config: S3Config): ObjectStore {
  return new S3Store(config);
}
