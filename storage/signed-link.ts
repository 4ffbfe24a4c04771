import { createHmac, timingSafeEqual } from "node:crypto";
import { ForbiddenError, InvalidInputError } from "@/lib/errors";
import { checkedKey, type ObjectKey, parseObjectKey } from "@/storage/keys";
import { LINK_SECONDS_MAX, type SignedGetOptions } from "@/storage/port";

const FIELDS = ["key", "type", "disposition", "expires", "signature"] as const;

/** What a link that passed allows: a GET of one object, with these headers on the answer. */
export interface SignedLinkClaim {
  key: ObjectKey;
  contentType: string;
  contentDisposition: string;
  expiresAtMs: number;
}

function signatureOf(secret: string, method: string, claim: SignedLinkClaim): string {
  // A JSON array keeps the fields apart: no two claims share one text.
  const text = JSON.stringify([
    "signed-link-1",
    method,
    claim.key,
    claim.contentType,
    claim.contentDisposition,
    claim.expiresAtMs,
  ]);
  return createHmac("sha256", secret).update(text).digest("base64url");
}

/** Refuses a life or a header that no link may carry. @throws InvalidInputError `bad_link` */
export function checkLinkOptions(options: SignedGetOptions): void {
  const { expiresInSeconds: seconds, contentType, contentDisposition } = options;
  const printable = [contentType, contentDisposition].every((value) => /^[\x20-\x7e]{1,1024}$/.test(value));
  if (!printable || !Number.isInteger(seconds) || seconds < 1 || seconds > LINK_SECONDS_MAX) {
    throw new InvalidInputError(
      "bad_link",
      `A download link lives 1 to ${LINK_SECONDS_MAX} seconds and its header values are plain printable text. Ask for the file again.`,
    );
  }
}

/**
 * Parameters of a link that our own route checks.
 * @param secret at least 32 characters, the same in every process
 * @throws InvalidInputError `bad_link`
 */
export function signLink(
  secret: string,
  key: ObjectKey,
  options: SignedGetOptions,
  nowMs: number,
): { parameters: URLSearchParams; expiresAtMs: number } {
  checkedKey(key);
  checkLinkOptions(options);
  const expiresAtMs = nowMs + options.expiresInSeconds * 1000;
  const { contentType, contentDisposition } = options;
  const claim = { key, contentType, contentDisposition, expiresAtMs };
  const parameters = new URLSearchParams({
    key,
    type: contentType,
    disposition: contentDisposition,
    expires: String(expiresAtMs),
    signature: signatureOf(secret, "GET", claim),
  });
  return { parameters, expiresAtMs };
}

/**
 * Checks a link before a byte is read: method, each parameter exactly once, signature, then time.
 * @throws ForbiddenError `bad_link` or `link_expired`
 */
export function verifySignedLink(
  secret: string,
  method: string,
  parameters: URLSearchParams,
  nowMs: number,
): SignedLinkClaim {
  const refused = new ForbiddenError(
    "bad_link",
    "This download link is not valid. Open the page it came from again.",
  );
  const value = (name: (typeof FIELDS)[number]) => parameters.get(name) ?? "";
  const exact = parameters.size === FIELDS.length && FIELDS.every((name) => parameters.has(name));
  const parsed = parseObjectKey(value("key"));
  const expires = value("expires");
  if (!exact || parsed === undefined || !/^[1-9][0-9]{0,15}$/.test(expires)) throw refused;
  const claim = {
    key: parsed.key,
    contentType: value("type"),
    contentDisposition: value("disposition"),
    expiresAtMs: Number(expires),
  };
  const wanted = Buffer.from(signatureOf(secret, method, claim));
  const given = Buffer.from(value("signature"));
  if (wanted.length !== given.length || !timingSafeEqual(wanted, given)) throw refused;
  if (method !== "GET") throw refused;
  if (nowMs >= claim.expiresAtMs) {
    throw new ForbiddenError(
      "link_expired",
      "This download link has expired. Open the page it came from again.",
    );
  }
  return claim;
}
