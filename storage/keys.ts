import { randomUUID } from "node:crypto";
import { InvalidInputError } from "@/lib/errors";

declare const kind: unique symbol;
type Branded<Kind extends string> = string & { readonly [kind]: Kind };

/** Final place of one file: `ws/<workspace>/blob/<sha256>`. Its bytes never change. */
export type BlobKey = Branded<"blob">;
/** One upload on its way in: `ws/<workspace>/staging/<upload>`. A folder of parts, not an object. */
export type StagingKey = Branded<"staging">;
/** One part of an upload: `<staging key>/<first byte, 15 digits>`. Names sort in the order of the bytes. */
export type PartKey = Branded<"part">;
/** Written and deleted again by a check of the store. */
export type ProbeKey = Branded<"probe">;
export type ObjectKey = BlobKey | PartKey | ProbeKey;
/** A folder to list; always ends in a slash. */
export type KeyPrefix = Branded<"prefix">;

const WORKSPACE = "[0-9a-z-]{1,64}";
const UPLOAD = "[0-9a-f-]{36}";
const SHA256 = /^[0-9a-f]{64}$/;
const BLOB_KEY = new RegExp(`^ws/(${WORKSPACE})/blob/([0-9a-f]{64})$`);
const STAGING_KEY = new RegExp(`^ws/(${WORKSPACE})/staging/(${UPLOAD})$`);
const PART_KEY = new RegExp(`^(ws/(${WORKSPACE})/staging/${UPLOAD})/([0-9]{15})$`);
const PROBE_KEY = new RegExp(`^probe/${UPLOAD}$`);
const PREFIX = new RegExp(`^ws/(${WORKSPACE}/(blob/|staging/(${UPLOAD}/)?)?)?$`);

/** What a key says about itself. */
export type ParsedKey =
  | { kind: "blob"; key: BlobKey; workspaceId: string; sha256: string }
  | { kind: "part"; key: PartKey; workspaceId: string; staging: StagingKey; offsetBytes: number }
  | { kind: "probe"; key: ProbeKey };

function refuse(what: string): never {
  throw new InvalidInputError(
    "bad_object_key",
    `This ${what} can't be a place in the store. Start the upload anew.`,
  );
}

function built<Key extends string>(text: string, pattern: RegExp, what: string): Key {
  if (!pattern.test(text)) refuse(what);
  return text as Key;
}

/**
 * The final key of a file.
 * @param sha256 64 hexadecimal digits, lower case
 * @throws InvalidInputError `bad_object_key` for any other text
 */
export function blobKey(workspaceId: string, sha256: string): BlobKey {
  return built(`ws/${workspaceId}/blob/${sha256}`, BLOB_KEY, "workspace or fingerprint");
}

/** A new, random staging key. Keep it in the upload's row. @throws InvalidInputError `bad_object_key` */
export function newStagingKey(workspaceId: string): StagingKey {
  return built(`ws/${workspaceId}/staging/${randomUUID()}`, STAGING_KEY, "workspace");
}

/** Reads a staging key back from a row. @throws InvalidInputError `bad_object_key` */
export function parseStagingKey(text: string): StagingKey {
  return built(text, STAGING_KEY, "staging key");
}

/** The workspace that a staging key belongs to. */
export function workspaceOfStaging(staging: StagingKey): string {
  return STAGING_KEY.exec(staging)?.[1] ?? refuse("staging key");
}

/** The key of the part that starts at a byte offset. @throws InvalidInputError `bad_object_key` */
export function partKey(staging: StagingKey, offsetBytes: number): PartKey {
  return built(`${staging}/${String(offsetBytes).padStart(15, "0")}`, PART_KEY, "part");
}

/** A new, random probe key. */
export function newProbeKey(): ProbeKey {
  return `probe/${randomUUID()}` as ProbeKey;
}

/** The folder that holds all workspaces, one workspace, its blobs, its uploads, or one upload. */
export function prefixOf(
  place: { workspaceId?: undefined } | { workspaceId: string; folder?: "blob" | "staging" } | StagingKey,
): KeyPrefix {
  if (typeof place === "string") return built(`${place}/`, PREFIX, "staging key");
  if (place.workspaceId === undefined) return "ws/" as KeyPrefix;
  const folder = place.folder === undefined ? "" : `${place.folder}/`;
  return built(`ws/${place.workspaceId}/${folder}`, PREFIX, "workspace");
}

/** Reads a key. Gives undefined for text that is none of the forms above; never throws. */
export function parseObjectKey(text: string): ParsedKey | undefined {
  const blob = BLOB_KEY.exec(text);
  if (blob?.[1] !== undefined && blob[2] !== undefined) {
    return { kind: "blob", key: text as BlobKey, workspaceId: blob[1], sha256: blob[2] };
  }
  const part = PART_KEY.exec(text);
  if (part?.[1] !== undefined && part[2] !== undefined) {
    const staging = part[1] as StagingKey;
    return {
      kind: "part",
      key: text as PartKey,
      workspaceId: part[2],
      staging,
      offsetBytes: Number(part[3]),
    };
  }
  return PROBE_KEY.test(text) ? { kind: "probe", key: text as ProbeKey } : undefined;
}

/** The last wall before a driver: types can be cast, text can't pass here. @throws InvalidInputError `bad_object_key` */
export function checkedKey(key: ObjectKey): ParsedKey {
  return parseObjectKey(key) ?? refuse("key");
}

/** As checkedKey, for a folder. @throws InvalidInputError `bad_object_key` */
export function checkedPrefix(prefix: KeyPrefix): KeyPrefix {
  return built(prefix, PREFIX, "folder");
}

/** True for 64 lower-case hexadecimal digits. */
export function isSha256(text: string): boolean {
  return SHA256.test(text);
}
