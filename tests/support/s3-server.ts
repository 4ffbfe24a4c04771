import { createHash } from "node:crypto";
import { createServer, type IncomingMessage, type ServerResponse } from "node:http";
import type { AddressInfo } from "node:net";
import { S3Objects } from "@/tests/support/s3-objects";
import { decodedPath, type Keys, queryPairs, S3Refusal, verifySignature } from "@/tests/support/s3-signature";

/** What to do to one request instead of serving it, or to its answer. */
export type Fault = { status: number; code: string } | "reset" | "lose-answer" | "cut-answer" | "store-less";

export interface S3Server {
  endpoint: string;
  keys: Keys;
  bucket: S3Objects;
  /** Names of the operations served or refused so far, in order. */
  operations: string[];
  /** Asked before each operation. */
  fault: (operation: string, key: string) => Fault | undefined;
  /** Moves the server's clock. */
  advanceMs: (ms: number) => void;
  close: () => Promise<void>;
}

interface Operation {
  name: string;
  /** Query parameters that this operation knows; any other is refused. */
  query: readonly string[];
}

const OPERATIONS: Readonly<Record<string, Operation>> = {
  "PUT bucket": { name: "CreateBucket", query: [] },
  "HEAD bucket": { name: "HeadBucket", query: [] },
  "GET bucket list-type": {
    name: "ListObjectsV2",
    query: ["list-type", "prefix", "start-after", "max-keys"],
  },
  "GET bucket uploads": {
    name: "ListMultipartUploads",
    query: ["uploads", "prefix", "key-marker", "upload-id-marker"],
  },
  "PUT object": { name: "PutObject", query: [] },
  "GET object": { name: "GetObject", query: ["response-content-type", "response-content-disposition"] },
  "HEAD object": { name: "HeadObject", query: [] },
  "DELETE object": { name: "DeleteObject", query: [] },
  "POST object uploads": { name: "CreateMultipartUpload", query: ["uploads"] },
  "PUT object uploadId": { name: "UploadPart", query: ["uploadId", "partNumber"] },
  "POST object uploadId": { name: "CompleteMultipartUpload", query: ["uploadId"] },
  "DELETE object uploadId": { name: "AbortMultipartUpload", query: ["uploadId"] },
};
const SELECTORS = ["list-type", "uploads", "uploadId"];
const HEADERS = /^x-amz-(date|content-sha256|user-agent)$/;

function headersOf(request: IncomingMessage): Map<string, string> {
  const headers = new Map<string, string>();
  for (let i = 0; i < request.rawHeaders.length; i += 2) {
    const name = (request.rawHeaders[i] ?? "").toLowerCase();
    const value = (request.rawHeaders[i + 1] ?? "").trim();
    const before = headers.get(name);
    headers.set(name, before === undefined ? value : `${before},${value}`);
  }
  return headers;
}

async function bodyOf(
  request: IncomingMessage,
  headers: ReadonlyMap<string, string>,
  sha256: string | undefined,
) {
  const chunks: Buffer[] = [];
  for await (const chunk of request) chunks.push(chunk as Buffer);
  const body = Buffer.concat(chunks);
  const wantsLength = request.method === "PUT" || request.method === "POST";
  const declared = headers.get("content-length");
  if (headers.has("transfer-encoding") || (wantsLength && declared === undefined)) {
    throw new S3Refusal(411, "MissingContentLength");
  }
  if (declared !== undefined && Number(declared) !== body.length) throw new S3Refusal(400, "IncompleteBody");
  if (sha256 === undefined && body.length > 0) throw new S3Refusal(501, "NotImplemented");
  if (sha256 !== undefined && createHash("sha256").update(body).digest("hex") !== sha256) {
    throw new S3Refusal(400, "XAmzContentSHA256Mismatch");
  }
  const md5 = headers.get("content-md5");
  if (md5 !== undefined && !/^[A-Za-z0-9+/]{22}==$/.test(md5)) throw new S3Refusal(400, "InvalidDigest");
  if (md5 !== undefined && createHash("md5").update(body).digest("base64") !== md5) {
    throw new S3Refusal(400, "BadDigest");
  }
  return body;
}

interface Answer {
  status: number;
  headers?: Record<string, string>;
  body?: string | Buffer;
}

function getObject(
  bucket: S3Objects,
  key: string,
  range: string | undefined,
  query: Map<string, string>,
): Answer {
  const { bytes, etag, modifiedAt } = bucket.get(key);
  const headers: Record<string, string> = {
    etag,
    "last-modified": modifiedAt.toUTCString(),
    "accept-ranges": "bytes",
    "content-type": query.get("response-content-type") ?? "application/octet-stream",
  };
  const disposition = query.get("response-content-disposition");
  if (disposition !== undefined) headers["content-disposition"] = disposition;
  if (range === undefined) return { status: 200, headers, body: bytes };
  const match = /^bytes=(\d*)-(\d*)$/.exec(range);
  if (match === null || (match[1] === "" && match[2] === "")) throw new S3Refusal(501, "NotImplemented");
  const suffix = match[1] === "";
  const first = suffix ? Math.max(0, bytes.length - Number(match[2])) : Number(match[1]);
  const last = suffix || match[2] === "" ? bytes.length - 1 : Math.min(Number(match[2]), bytes.length - 1);
  if (first > last) throw new S3Refusal(416, "InvalidRange");
  headers["content-range"] = `bytes ${first}-${last}/${bytes.length}`;
  return { status: 206, headers, body: bytes.subarray(first, last + 1) };
}

class StrictServer {
  readonly operations: string[] = [];
  fault: S3Server["fault"] = () => undefined;
  skewMs = 0;
  readonly bucket = new S3Objects(() => new Date(this.nowMs()));
  #created = false;

  constructor(
    readonly keys: Keys,
    readonly bucketName: string,
  ) {}

  nowMs(): number {
    return Date.now() + this.skewMs;
  }

  async handle(request: IncomingMessage, response: ServerResponse): Promise<void> {
    let answer: Answer;
    let fault: Fault | undefined;
    try {
      const url = request.url ?? "";
      const at = url.indexOf("?");
      const rawPath = at < 0 ? url : url.slice(0, at);
      const rawQuery = at < 0 ? "" : url.slice(at + 1);
      const headers = headersOf(request);
      const method = request.method ?? "";
      const sha256 = verifySignature({ method, rawPath, rawQuery, headers }, this.keys, this.nowMs());
      const query = new Map(queryPairs(rawQuery).filter(([name]) => !/^(X-Amz-.*|x-id)$/.test(name)));
      const { operation, key } = this.#operation(method, decodedPath(rawPath), query, headers);
      this.operations.push(operation);
      fault = this.fault(operation, key);
      const whole = await bodyOf(request, headers, sha256);
      if (fault === "reset") {
        request.socket.destroy();
        return;
      }
      if (typeof fault === "object") throw new S3Refusal(fault.status, fault.code);
      const body = fault === "store-less" ? whole.subarray(0, whole.length - 1) : whole;
      answer = this.#serve(operation, key, query, headers, body);
    } catch (error) {
      if (request.socket.destroyed) return;
      if (!(error instanceof S3Refusal)) throw error;
      const body = `<Error><Code>${error.code}</Code><Message>${error.code}</Message></Error>`;
      answer = { status: error.status, headers: { "content-type": "application/xml" }, body };
    }
    if (fault === "lose-answer") {
      request.socket.destroy();
      return;
    }
    const body = answer.body ?? "";
    response.writeHead(answer.status, {
      ...answer.headers,
      "content-length": String(Buffer.byteLength(body)),
    });
    if (fault === "cut-answer") {
      response.write(Buffer.from(body).subarray(0, Buffer.byteLength(body) >> 1), () =>
        request.socket.destroy(),
      );
    } else {
      response.end(request.method === "HEAD" ? undefined : body);
    }
  }

  #operation(method: string, path: string, query: Map<string, string>, headers: Map<string, string>) {
    const [, bucket, ...rest] = path.split("/");
    const key = rest.join("/");
    const selector = SELECTORS.find((name) => query.has(name));
    const wanted = [method, key === "" ? "bucket" : "object", ...(selector === undefined ? [] : [selector])];
    const operation = OPERATIONS[wanted.join(" ")];
    const known =
      operation !== undefined && [...query.keys()].every((name) => operation.query.includes(name));
    const foreign = [...headers.keys()].some((name) => name.startsWith("x-amz-") && !HEADERS.test(name));
    if (!known || foreign) throw new S3Refusal(501, "NotImplemented");
    if (operation.name === "CreateBucket") this.#created ||= bucket === this.bucketName;
    if (bucket !== this.bucketName || !this.#created) throw new S3Refusal(404, "NoSuchBucket");
    if (Buffer.byteLength(key) > 1024) throw new S3Refusal(400, "KeyTooLongError");
    if (key.includes("\0")) throw new S3Refusal(400, "InvalidURI");
    return { operation: operation.name, key };
  }

  #serve(
    operation: string,
    key: string,
    query: Map<string, string>,
    headers: Map<string, string>,
    body: Buffer,
  ): Answer {
    const { bucket } = this;
    const ifNoneMatch = headers.get("if-none-match");
    const uploadId = query.get("uploadId") ?? "";
    const prefix = query.get("prefix") ?? "";
    switch (operation) {
      case "PutObject":
        return { status: 200, headers: { etag: bucket.put(key, body, ifNoneMatch) } };
      case "GetObject":
      case "HeadObject":
        return getObject(bucket, key, headers.get("range"), query);
      case "DeleteObject":
        bucket.objects.delete(key);
        return { status: 204 };
      case "CreateMultipartUpload":
        return { status: 200, body: bucket.begin(key) };
      case "UploadPart":
        return {
          status: 200,
          headers: { etag: bucket.putPart(key, uploadId, query.get("partNumber") ?? "", body) },
        };
      case "CompleteMultipartUpload":
        return { status: 200, body: bucket.complete(key, uploadId, body.toString(), ifNoneMatch) };
      case "AbortMultipartUpload":
        bucket.abort(key, uploadId);
        return { status: 204 };
      case "ListObjectsV2":
        return {
          status: 200,
          body: bucket.list(prefix, query.get("start-after") ?? "", query.get("max-keys")),
        };
      case "ListMultipartUploads": {
        const markers = [query.get("key-marker") ?? "", query.get("upload-id-marker") ?? ""] as const;
        return { status: 200, body: bucket.listUploads(prefix, ...markers) };
      }
      default:
        return { status: 200 };
    }
  }
}

/**
 * A strict S3 server on loopback, in memory: it checks signatures, digests and lengths and refuses everything it does
 * not know, so a driver that passes here leaned on nothing lenient.
 */
export async function startS3Server(bucketName = "twinpass-test"): Promise<S3Server> {
  const keys = {
    accessKeyId: "loopback-key",
    secretAccessKey: "loopback/secret+for=tests",
    region: "us-east-1",
  };
  const strict = new StrictServer(keys, bucketName);
  const server = createServer((request, response) => {
    strict.handle(request, response).catch((error) => response.destroy(error));
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const { port } = server.address() as AddressInfo;
  return Object.assign(strict, {
    endpoint: `http://127.0.0.1:${port}`,
    advanceMs: (ms: number) => {
      strict.skewMs += ms;
    },
    close: () =>
      new Promise<void>((resolve) => {
        server.closeAllConnections();
        server.close(() => resolve());
      }),
  });
}
