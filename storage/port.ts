import type { Readable } from "node:stream";
import type { KeyPrefix, ObjectKey } from "@/storage/keys";

/** Largest part of an upload, and of one request to an S3 store: 8 MiB. */
export const PART_BYTES = 8 * 1024 * 1024;
/** Longest life of a signed link. */
export const LINK_SECONDS_MAX = 60;

/** Bytes in order. A Node stream, a web stream and an async generator all are one. */
export type ByteSource = AsyncIterable<Uint8Array>;

/** What the sender says the bytes are. The store compares before it answers. */
export interface DeclaredBytes {
  sizeBytes: number;
  /** 64 hexadecimal digits, lower case. For a blob key the digest in the key counts and this may be left out. */
  sha256?: string;
}

/** `created`: these bytes are now there, durably. `existed`: the key was taken, its bytes are as they were. */
export type CreateOutcome = "created" | "existed";

export interface ObjectStat {
  sizeBytes: number;
  /** By the clock of the store. */
  modifiedAtMs: number;
}

/** Both ends inclusive, as in HTTP; without `lastByte` to the end. */
export interface ByteRange {
  firstByte: number;
  lastByte?: number;
}

export interface StoredBytes {
  /** Exactly `sizeBytes` bytes, else it ends with an UnavailableError. Destroy it when not read to the end. */
  body: Readable;
  /** Bytes in `body`. */
  sizeBytes: number;
  /** Bytes of the whole object. */
  totalBytes: number;
}

export interface ListPage {
  objects: ({ key: ObjectKey } & ObjectStat)[];
  /** Pass as `after` for the next page; undefined after the last page. */
  next?: string;
}

export interface SignedGetOptions {
  /** 1 to LINK_SECONDS_MAX. */
  expiresInSeconds: number;
  /** Header values of the answer, printable ASCII. */
  contentType: string;
  contentDisposition: string;
}

export interface SignedGet {
  /** A whole address (S3), or a path with parameters on our own site (filesystem). */
  url: string;
  expiresAtMs: number;
}

/** What this store can do, to be said at start-up. */
export interface StoreFacts {
  driver: "filesystem" | "s3";
  /**
   * `atomic`: a taken key was refused when tried. `none`: the store can't do it and a check before the write stands in,
   * which two writers at once can both pass. Either way "created once" rests on the unique row in the database.
   */
  conditionalCreate: "atomic" | "none";
  /** Who checks a signed link: the store itself, or our own route through verifySignedLink. */
  signedLinks: "store" | "route";
}

/**
 * The one way to bytes. Keys come from storage/keys, never from user text.
 * Every method throws UnavailableError where the store does not answer, and InvalidInputError `bad_object_key`.
 */
export interface ObjectStore {
  /**
   * Puts, reads, creates again and deletes a probe. For start-up and readiness.
   * @throws UnavailableError, OutOfSpaceError
   */
  check(): Promise<StoreFacts>;

  /**
   * Creates an object once; its bytes are hashed as they pass and nothing is visible before size and digest agree.
   * Acknowledged means durable, and for a blob also read back and compared, whether created or there before.
   * An error, an abort or a kill leaves nothing under the key, or the whole of it.
   * @throws InvalidInputError `digest_mismatch`, `body_too_short`, `body_interrupted`, `bad_declaration`;
   *   TooLargeError `body_too_long`; OutOfSpaceError; UnavailableError `stored_bytes_damaged`;
   *   a TwinpassError of the source passes through
   */
  create(
    key: ObjectKey,
    source: ByteSource,
    declared: DeclaredBytes,
    signal?: AbortSignal,
  ): Promise<CreateOutcome>;

  /** @throws NotFoundError `object_not_found` */
  stat(key: ObjectKey): Promise<ObjectStat>;

  /** Opens the bytes, or a range of them. @throws NotFoundError, InvalidInputError `range_outside` */
  get(key: ObjectKey, options?: { range?: ByteRange; signal?: AbortSignal }): Promise<StoredBytes>;

  /** Deletes. A key that isn't there is no error. Delete the row first. */
  remove(key: ObjectKey): Promise<void>;

  /** Keys under a folder in byte order, at most `limit` (1 to 1,000, default 1,000) a page. Foreign names are left out. */
  list(prefix: KeyPrefix, options?: { after?: string; limit?: number }): Promise<ListPage>;

  /** A link to one object, one method (GET), for a short time. @throws InvalidInputError `bad_link` */
  signedGet(key: ObjectKey, options: SignedGetOptions): Promise<SignedGet>;

  /** Clears what killed writers left invisible (temporary files, open multipart uploads). @returns how many */
  removeUnfinished(olderThanMs: number): Promise<number>;
}
