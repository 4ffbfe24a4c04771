import "server-only";
import { headers } from "next/headers";
import { z } from "zod";
import { requireCtxOrThrow } from "@/lib/auth/current";
import { env } from "@/lib/env";
import { ForbiddenError, InvalidInputError, NotFoundError, TwinpassError } from "@/lib/errors";
import { isOwnOrigin } from "@/lib/http/origin";
import { requestIdOf } from "@/lib/http/request-id";
import { logger } from "@/lib/logger";
import type { Ctx } from "@/lib/services/ctx";

const PRIVATE = { "cache-control": "private, no-store", "x-content-type-options": "nosniff" };

/** The one mapping from an error to an answer. Unknown errors are logged whole and told as a plain sentence with an id. */
export function errorBody(
  error: unknown,
  requestId: string,
): { status: number; body: Record<string, unknown> } {
  if (error instanceof TwinpassError) {
    if (error.status === 403)
      logger().warn({ event: "security.denied", requestId, code: error.code, details: error.details });
    return {
      status: error.status,
      body: { error: error.code, message: error.message, details: error.details, requestId },
    };
  }
  if (error instanceof z.ZodError) {
    const fields = z.flattenError(error).fieldErrors;
    const first = error.issues[0];
    return {
      status: 422,
      body: {
        error: "invalid_input",
        message: first?.message ?? "The input is not valid.",
        fields,
        requestId,
      },
    };
  }
  logger().error({ event: "request.failed", requestId, err: error });
  return {
    status: 500,
    body: {
      error: "internal",
      message: `Something failed on our side. Nothing was changed. Quote ${requestId}.`,
      requestId,
    },
  };
}

/** A JSON answer that no cache keeps. */
function json(body: unknown, init: { status?: number; headers?: Record<string, string> } = {}): Response {
  return Response.json(body, { status: init.status ?? 200, headers: { ...PRIVATE, ...init.headers } });
}

interface Call<Params> {
  ctx: Ctx;
  request: Request;
  params: Params;
}

/**
 * Wraps a route handler: own origin for anything but GET and HEAD, session, verb, one error mapping.
 * The handler returns a body (200) or a Response of its own.
 * @param isDownload the handler notes in the ledger that somebody fetched a file: a HEAD fetches none (405), and another
 *   site's page may not cause the entry
 */
export function route<Params = Record<string, never>>(
  handle: (call: Call<Params>) => Promise<unknown>,
  { isDownload = false }: { isDownload?: boolean } = {},
) {
  return async (request: Request, segment: { params: Promise<Params> }): Promise<Response> => {
    const requestId = requestIdOf(request.headers);
    // Next answers a HEAD by the handler of GET.
    if (isDownload && request.method === "HEAD")
      return new Response(null, { status: 405, headers: { ...PRIVATE, allow: "GET" } });
    try {
      if (isDownload && request.headers.get("sec-fetch-site") === "cross-site") {
        throw new ForbiddenError(
          "foreign_origin",
          "This download was not asked for on a page of Twinpass. Open the page and download it there.",
        );
      }
      if (
        request.method !== "GET" &&
        request.method !== "HEAD" &&
        !isOwnOrigin(request.headers, env().AUTH_URL)
      ) {
        throw new ForbiddenError(
          "foreign_origin",
          "This request did not come from a page of Twinpass. Open the page again and retry.",
        );
      }
      const ctx = await requireCtxOrThrow();
      const answer = await handle({ ctx, request, params: await segment.params });
      return answer instanceof Response ? answer : json(answer);
    } catch (error) {
      const { status, body } = errorBody(error, requestId);
      return json(body, { status, headers: { "x-request-id": requestId } });
    }
  };
}

/**
 * Reads a JSON body. The type is what the verb asks for; the verb's own schema is what checks it.
 * @throws InvalidInputError `not_json`
 */
export async function readJson<Unchecked>(request: Request): Promise<Unchecked> {
  try {
    return (await request.json()) as Unchecked;
  } catch {
    throw new InvalidInputError("not_json", "The request body is not JSON.");
  }
}

/** For Server Actions: they can be posted to any address, so each checks the origin itself. @throws ForbiddenError */
export async function requireOwnOrigin(): Promise<void> {
  if (!isOwnOrigin(new Headers(await headers()), env().AUTH_URL)) {
    throw new ForbiddenError(
      "foreign_origin",
      "This form did not come from a page of Twinpass. Open the page again and retry.",
    );
  }
}

/** An id from an address; anything but a UUID names nothing. @throws NotFoundError */
export function requireUuid(text: string): string {
  if (!z.uuid().safeParse(text).success)
    throw new NotFoundError("not_found", "There is nothing at this address.");
  return text;
}
