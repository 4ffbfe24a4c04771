import { signOut } from "@/lib/auth/config";
import { env } from "@/lib/env";
import { isOwnOrigin } from "@/lib/http/origin";

/** Ends the session: its row, its cookie, and what the browser keeps of the pages. A form posts here, no script needed. */
export async function POST(request: Request): Promise<Response> {
  const origin = env().AUTH_URL;
  if (!isOwnOrigin(request.headers, origin))
    return new Response("Not from a page of Twinpass.", { status: 403 });
  await signOut({ redirect: false });
  return new Response(null, {
    status: 303,
    headers: {
      location: new URL("/sign-in", origin).toString(),
      "cache-control": "no-store",
      "clear-site-data": '"cache", "storage"',
    },
  });
}
