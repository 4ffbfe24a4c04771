import { randomUUID } from "node:crypto";
import { type NextRequest, NextResponse } from "next/server";

/** Data and downloads: nothing in them may run or load, whatever a stored file claims to be. */
const DATA_POLICY = "default-src 'none'; base-uri 'none'; frame-ancestors 'none'; sandbox";

/**
 * Content security policy with a nonce for each answer, the request id, and the path for the way back after signing in.
 * It decides no access: pages, routes and actions do. What a client sends under these header names is overwritten.
 * Uploads and values files are outside the matcher: a proxy in front of them cuts bodies over 10 MB without an error.
 */
export function proxy(request: NextRequest): NextResponse {
  const nonce = Buffer.from(randomUUID()).toString("base64");
  const isDevelopment = process.env.NODE_ENV === "development";
  const policy = [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}' 'strict-dynamic'${isDevelopment ? " 'unsafe-eval'" : ""}`,
    `style-src 'self' ${isDevelopment ? "'unsafe-inline'" : `'nonce-${nonce}'`}`,
    "img-src 'self' blob: data:",
    "font-src 'self'",
    "connect-src 'self'",
    "worker-src 'self' blob:",
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'self'",
    "frame-ancestors 'none'",
  ].join("; ");
  const requestHeaders = new Headers(request.headers);
  requestHeaders.set("x-nonce", nonce);
  requestHeaders.set("x-request-id", randomUUID());
  requestHeaders.set("x-path", request.nextUrl.pathname + request.nextUrl.search);
  requestHeaders.set("content-security-policy", policy);
  const response = NextResponse.next({ request: { headers: requestHeaders } });
  const isData = request.nextUrl.pathname.startsWith("/api/");
  response.headers.set("content-security-policy", isData ? DATA_POLICY : policy);
  // Only over https (RFC 6797, 7.2); the server itself speaks plain http behind whatever ends TLS and says so here.
  if (request.headers.get("x-forwarded-proto") === "https")
    response.headers.set("strict-transport-security", "max-age=31536000; includeSubDomains");
  return response;
}

export const config = {
  matcher: ["/((?!api/uploads|api/revisions/[^/]+/values-check|_next/static|_next/image|icon.svg).*)"],
};
