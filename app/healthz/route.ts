export const dynamic = "force-static";

/** The process is alive. No detail, no database: readiness is another question. */
export function GET(): Response {
  return new Response("ok", { headers: { "content-type": "text/plain; charset=utf-8" } });
}
