import { randomUUID } from "node:crypto";

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

/** The id that proxy.ts gave the request; a fresh one where a client sent something of its own past it. */
export function requestIdOf(headers: Headers): string {
  const given = headers.get("x-request-id");
  return given && UUID.test(given) ? given : randomUUID();
}
