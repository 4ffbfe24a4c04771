export const dynamic = "force-dynamic";

/** The process is alive. No detail, no database: readiness is another question. */
export function GET(): Response {
  return new Response("ok", {
    headers: { "content-type": "text/plain; charset=utf-8", "cache-control": "no-store" },
  });
}
