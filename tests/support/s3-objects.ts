import { createHash, randomUUID } from "node:crypto";
import { S3Refusal } from "@/tests/support/s3-signature";

const PART_MIN_BYTES = 5 * 1024 * 1024;
const PAGE_MAX = 1000;

interface Stored {
  bytes: Buffer;
  etag: string;
  modifiedAt: Date;
}

interface Upload {
  key: string;
  initiatedAt: Date;
  parts: Map<number, { bytes: Buffer; etag: string }>;
}

const md5 = (bytes: Buffer) => createHash("md5").update(bytes).digest();
const escapeXml = (text: string) => text.replace(/[<>&"']/g, (character) => `&#${character.charCodeAt(0)};`);

/** `refused` answers 501, `ignored` overwrites in silence: both are seen in the wild. */
export type ConditionalCreate = "atomic" | "refused" | "ignored";

/** The bucket of the strict server: objects and open uploads, in memory, with the rules of the protocol. */
export class S3Objects {
  readonly objects = new Map<string, Stored>();
  readonly uploads = new Map<string, Upload>();
  conditionalCreate: ConditionalCreate = "atomic";
  uploadsPageMax = PAGE_MAX;

  constructor(private readonly now: () => Date) {}

  #refuseTaken(key: string, ifNoneMatch: string | undefined): void {
    if (ifNoneMatch === undefined || this.conditionalCreate === "ignored") return;
    if (ifNoneMatch !== "*" || this.conditionalCreate === "refused") {
      throw new S3Refusal(501, "NotImplemented");
    }
    if (this.objects.has(key)) throw new S3Refusal(412, "PreconditionFailed");
  }

  put(key: string, bytes: Buffer, ifNoneMatch: string | undefined): string {
    this.#refuseTaken(key, ifNoneMatch);
    const etag = `"${md5(bytes).toString("hex")}"`;
    this.objects.set(key, { bytes, etag, modifiedAt: this.now() });
    return etag;
  }

  get(key: string): Stored {
    const stored = this.objects.get(key);
    if (stored === undefined) throw new S3Refusal(404, "NoSuchKey");
    return stored;
  }

  begin(key: string): string {
    const id = randomUUID();
    this.uploads.set(id, { key, initiatedAt: this.now(), parts: new Map() });
    return `<InitiateMultipartUploadResult><UploadId>${id}</UploadId></InitiateMultipartUploadResult>`;
  }

  #upload(key: string, id: string): Upload {
    const upload = this.uploads.get(id);
    if (upload === undefined || upload.key !== key) throw new S3Refusal(404, "NoSuchUpload");
    return upload;
  }

  putPart(key: string, id: string, partNumber: string, bytes: Buffer): string {
    const number = /^[1-9][0-9]{0,4}$/.test(partNumber) ? Number(partNumber) : 0;
    if (number < 1 || number > 10_000) throw new S3Refusal(400, "InvalidArgument");
    const etag = `"${md5(bytes).toString("hex")}"`;
    this.#upload(key, id).parts.set(number, { bytes, etag });
    return etag;
  }

  complete(key: string, id: string, xml: string, ifNoneMatch: string | undefined): string {
    const upload = this.#upload(key, id);
    const blocks = xml.match(/<Part>.*?<\/Part>/gs) ?? [];
    const named = blocks.map((block) => ({
      number: Number(/<PartNumber>(\d+)<\/PartNumber>/.exec(block)?.[1]),
      etag: /<ETag>(.*?)<\/ETag>/.exec(block)?.[1]?.replaceAll("&quot;", '"'),
    }));
    if (named.length === 0) throw new S3Refusal(400, "MalformedXML");
    const parts = named.map(({ number, etag }, index) => {
      const before = named[index - 1]?.number ?? 0;
      if (!(number > before)) throw new S3Refusal(400, "InvalidPartOrder");
      const part = upload.parts.get(number);
      if (part === undefined || part.etag !== etag) throw new S3Refusal(400, "InvalidPart");
      const isLast = index === named.length - 1;
      if (!isLast && part.bytes.length < PART_MIN_BYTES) throw new S3Refusal(400, "EntityTooSmall");
      return part.bytes;
    });
    this.#refuseTaken(key, ifNoneMatch);
    const etag = `"${md5(Buffer.concat(parts.map(md5))).toString("hex")}-${parts.length}"`;
    this.objects.set(key, { bytes: Buffer.concat(parts), etag, modifiedAt: this.now() });
    this.uploads.delete(id);
    return `<CompleteMultipartUploadResult><ETag>${escapeXml(etag)}</ETag></CompleteMultipartUploadResult>`;
  }

  abort(key: string, id: string): void {
    this.#upload(key, id);
    this.uploads.delete(id);
  }

  list(prefix: string, startAfter: string, maxKeys: string | undefined): string {
    const limit = Math.min(Number(maxKeys ?? PAGE_MAX), PAGE_MAX);
    if (!Number.isInteger(limit) || limit < 0) throw new S3Refusal(400, "InvalidArgument");
    const keys = [...this.objects.keys()]
      .filter((key) => key.startsWith(prefix) && key > startAfter)
      .sort((a, b) => Buffer.compare(Buffer.from(a), Buffer.from(b)));
    const contents = keys.slice(0, limit).map((key) => {
      const { bytes, modifiedAt } = this.get(key);
      return `<Contents><Key>${escapeXml(key)}</Key><Size>${bytes.length}</Size><LastModified>${modifiedAt.toISOString()}</LastModified></Contents>`;
    });
    const truncated = `<IsTruncated>${keys.length > limit}</IsTruncated>`;
    return `<ListBucketResult><KeyCount>${contents.length}</KeyCount>${truncated}${contents.join("")}</ListBucketResult>`;
  }

  listUploads(prefix: string, keyMarker: string, idMarker: string): string {
    const order = (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0);
    const open = [...this.uploads]
      .filter(([, { key }]) => key.startsWith(prefix))
      .sort(([id1, a], [id2, b]) => order(a.key, b.key) || order(id1, id2))
      .filter(([id, { key }]) => key > keyMarker || (key === keyMarker && idMarker !== "" && id > idMarker));
    const page = open.slice(0, this.uploadsPageMax);
    const items = page.map(
      ([id, { key, initiatedAt }]) =>
        `<Upload><Key>${escapeXml(key)}</Key><UploadId>${id}</UploadId><Initiated>${initiatedAt.toISOString()}</Initiated></Upload>`,
    );
    const last = page.at(-1);
    const next =
      last === undefined || page.length === open.length
        ? "<IsTruncated>false</IsTruncated>"
        : `<IsTruncated>true</IsTruncated><NextKeyMarker>${escapeXml(last[1].key)}</NextKeyMarker><NextUploadIdMarker>${last[0]}</NextUploadIdMarker>`;
    return `<ListMultipartUploadsResult>${next}${items.join("")}</ListMultipartUploadsResult>`;
  }
}
