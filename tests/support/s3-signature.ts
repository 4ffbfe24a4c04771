import { createHash, createHmac, timingSafeEqual } from "node:crypto";

/**
 * Signature version 4 of the S3 protocol, from its published description ("Authenticating Requests: Using the
 * Authorization Header" and "Using Query Parameters"), with node:crypto alone: it shares no code with the SDK's signer.
 */
export interface SignedParts {
  method: string;
  /** As on the wire, percent-encoded. */
  rawPath: string;
  /** As on the wire, without the question mark. */
  rawQuery: string;
  headers: ReadonlyMap<string, string>;
}

export interface Keys {
  accessKeyId: string;
  secretAccessKey: string;
  region: string;
}

/** A refusal as the protocol words it. */
export class S3Refusal extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
  ) {
    super(code);
  }
}

const ALGORITHM = "AWS4-HMAC-SHA256";
const SKEW_MS = 15 * 60_000;
const WEEK_SECONDS = 604_800;

const sha256 = (text: string | Buffer) => createHash("sha256").update(text).digest("hex");
const hmac = (key: string | Buffer, text: string) => createHmac("sha256", key).update(text).digest();

/** Every byte but the unreserved characters of RFC 3986. */
function encode(text: string): string {
  return encodeURIComponent(text).replace(
    /[!'()*]/g,
    (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`,
  );
}

function decode(text: string): string {
  try {
    return decodeURIComponent(text);
  } catch {
    throw new S3Refusal(400, "InvalidURI");
  }
}

/** Name and value pairs of a query, decoded, in the order of the wire. */
export function queryPairs(rawQuery: string): [string, string][] {
  if (rawQuery === "") return [];
  if (rawQuery.includes("+")) throw new S3Refusal(400, "InvalidURI");
  return rawQuery.split("&").map((pair) => {
    const at = pair.indexOf("=");
    return at < 0 ? [decode(pair), ""] : [decode(pair.slice(0, at)), decode(pair.slice(at + 1))];
  });
}

export function decodedPath(rawPath: string): string {
  return rawPath.split("/").map(decode).join("/");
}

function canonicalQuery(rawQuery: string): string {
  const pairs = queryPairs(rawQuery).filter(([name]) => name !== "X-Amz-Signature");
  const encoded = pairs.map(([name, value]) => [encode(name), encode(value)] as const);
  encoded.sort(([n1, v1], [n2, v2]) => (n1 === n2 ? (v1 < v2 ? -1 : 1) : n1 < n2 ? -1 : 1));
  return encoded.map(([name, value]) => `${name}=${value}`).join("&");
}

/** The signature that a request with these signed headers must carry, in hexadecimal digits. */
export function signatureOf(
  request: SignedParts,
  secretAccessKey: string,
  scope: { amzDate: string; date: string; region: string },
  signedHeaders: readonly string[],
  payloadHash: string,
): string {
  const headers = signedHeaders.map((name) => {
    const value = request.headers.get(name);
    if (value === undefined) throw new S3Refusal(403, "AccessDenied");
    return `${name}:${value.trim().replace(/ +/g, " ")}\n`;
  });
  const canonical = [
    request.method,
    decodedPath(request.rawPath).split("/").map(encode).join("/"),
    canonicalQuery(request.rawQuery),
    headers.join(""),
    signedHeaders.join(";"),
    payloadHash,
  ].join("\n");
  const place = `${scope.date}/${scope.region}/s3/aws4_request`;
  const text = [ALGORITHM, scope.amzDate, place, sha256(canonical)].join("\n");
  const dateKey = hmac(`AWS4${secretAccessKey}`, scope.date);
  const signingKey = hmac(hmac(hmac(dateKey, scope.region), "s3"), "aws4_request");
  return hmac(signingKey, text).toString("hex");
}

function timeOf(amzDate: string): number {
  const match = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(amzDate);
  if (match === null) throw new S3Refusal(403, "AccessDenied");
  const [, y, mo, d, h, mi, s] = match.map(Number);
  return Date.UTC(y ?? 0, (mo ?? 0) - 1, d, h, mi, s);
}

function check(
  request: SignedParts,
  keys: Keys,
  claim: {
    credential: string;
    amzDate: string;
    signedHeaders: string;
    signature: string;
    payloadHash: string;
  },
): void {
  const [accessKeyId, date = "", region, service, end, ...rest] = claim.credential.split("/");
  if (accessKeyId !== keys.accessKeyId) throw new S3Refusal(403, "InvalidAccessKeyId");
  const scoped = service === "s3" && end === "aws4_request" && rest.length === 0;
  if (!scoped || region !== keys.region || !claim.amzDate.startsWith(`${date}T`)) {
    throw new S3Refusal(400, "AuthorizationHeaderMalformed");
  }
  const names = claim.signedHeaders.split(";");
  const sorted = [...names].sort().join(";") === claim.signedHeaders;
  // The protocol wants the host and every x-amz- header that is sent under the signature; so do Content-MD5 and -Type here.
  const present = [...request.headers.keys()].filter((name) => /^(host|x-amz-.*|content-md5)$/.test(name));
  if (!sorted || present.some((name) => !names.includes(name))) throw new S3Refusal(403, "AccessDenied");
  const scope = { amzDate: claim.amzDate, date, region };
  const wanted = signatureOf(request, keys.secretAccessKey, scope, names, claim.payloadHash);
  const equal =
    wanted.length === claim.signature.length &&
    timingSafeEqual(Buffer.from(wanted), Buffer.from(claim.signature));
  if (!equal) throw new S3Refusal(403, "SignatureDoesNotMatch");
}

function verifyHeader(request: SignedParts, keys: Keys, authorization: string, nowMs: number): string {
  const match =
    /^AWS4-HMAC-SHA256 Credential=([^, ]+), ?SignedHeaders=([^, ]+), ?Signature=([0-9a-f]{64})$/.exec(
      authorization,
    );
  const amzDate = request.headers.get("x-amz-date");
  const payloadHash = request.headers.get("x-amz-content-sha256");
  if (match === null) throw new S3Refusal(400, "AuthorizationHeaderMalformed");
  if (amzDate === undefined || payloadHash === undefined) throw new S3Refusal(403, "AccessDenied");
  if (Math.abs(nowMs - timeOf(amzDate)) > SKEW_MS) throw new S3Refusal(403, "RequestTimeTooSkewed");
  const [, credential = "", signedHeaders = "", signature = ""] = match;
  check(request, keys, { credential, amzDate, signedHeaders, signature, payloadHash });
  return payloadHash;
}

function verifyQuery(request: SignedParts, keys: Keys, nowMs: number): void {
  const pairs = queryPairs(request.rawQuery);
  const only = (name: string) => {
    const values = pairs.filter(([key]) => key === name);
    if (values.length !== 1 || values[0] === undefined) {
      throw new S3Refusal(403, "AuthorizationQueryParametersError");
    }
    return values[0][1];
  };
  const amzDate = only("X-Amz-Date");
  const expires = Number(only("X-Amz-Expires"));
  const ageMs = nowMs - timeOf(amzDate);
  if (only("X-Amz-Algorithm") !== ALGORITHM || !(expires >= 1 && expires <= WEEK_SECONDS)) {
    throw new S3Refusal(403, "AuthorizationQueryParametersError");
  }
  const claim = {
    credential: only("X-Amz-Credential"),
    amzDate,
    signedHeaders: only("X-Amz-SignedHeaders"),
    signature: only("X-Amz-Signature"),
    payloadHash: "UNSIGNED-PAYLOAD",
  };
  check(request, keys, claim);
  if (ageMs < -SKEW_MS || ageMs > expires * 1000) throw new S3Refusal(403, "AccessDenied");
}

/**
 * Refuses a request that is not signed by the one key, in one of the two ways.
 * @returns the SHA-256 that the body must have; undefined for a presigned request, which must have no body
 * @throws S3Refusal
 */
export function verifySignature(request: SignedParts, keys: Keys, nowMs: number): string | undefined {
  const authorization = request.headers.get("authorization");
  const inQuery = request.rawQuery.includes("X-Amz-Signature");
  if (authorization !== undefined && inQuery) throw new S3Refusal(400, "InvalidArgument");
  if (inQuery) {
    verifyQuery(request, keys, nowMs);
    return undefined;
  }
  if (authorization === undefined) throw new S3Refusal(403, "AccessDenied");
  const payloadHash = verifyHeader(request, keys, authorization, nowMs);
  // No unsigned and no chunk-signed bodies: the driver always knows its bytes.
  if (!/^[0-9a-f]{64}$/.test(payloadHash)) throw new S3Refusal(501, "NotImplemented");
  return payloadHash;
}
