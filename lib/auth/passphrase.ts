import { randomBytes, scrypt, timingSafeEqual } from "node:crypto";
import { promisify } from "node:util";

const derive = promisify<string, Buffer, number, { N: number; r: number; p: number; maxmem: number }, Buffer>(
  scrypt,
);
/** OWASP Password Storage Cheat Sheet: scrypt with N 2^17, r 8, p 1 (from memory). */
const COST = { N: 2 ** 17, r: 8, p: 1, maxmem: 256 * 1024 * 1024 };

/** Hash of a passphrase: `scrypt$salt$hash` in base64url. Unicode is put into one form (NFKC) first. */
export async function hashPassphrase(passphrase: string): Promise<string> {
  const salt = randomBytes(16);
  const hash = await derive(passphrase.normalize("NFKC"), salt, 32, COST);
  return `scrypt$${salt.toString("base64url")}$${hash.toString("base64url")}`;
}

/** Whether a passphrase fits a stored hash, compared in constant time. */
export async function passphraseFits(passphrase: string, stored: string): Promise<boolean> {
  const [kind, salt, hash] = stored.split("$");
  if (kind !== "scrypt" || !salt || !hash) return false;
  const expected = Buffer.from(hash, "base64url");
  const actual = await derive(
    passphrase.normalize("NFKC"),
    Buffer.from(salt, "base64url"),
    expected.length,
    COST,
  );
  return timingSafeEqual(actual, expected);
}
