/** An answer that is not what was asked for, told in the server's own sentence. */
export class ApiError extends Error {
  override readonly name = "ApiError";
  constructor(
    readonly status: number,
    readonly code: string,
    message: string,
    readonly details: Record<string, unknown> = {},
  ) {
    super(message);
  }
}

interface Call {
  method?: "GET" | "POST" | "PUT" | "DELETE";
  /** Sent as JSON. */
  json?: unknown;
  /** Sent as it is. */
  bytes?: Blob;
  idempotencyKey?: string;
  signal?: AbortSignal;
}

/**
 * The one way for the browser to ask the server.
 * @throws ApiError with the server's sentence; `offline` when nothing answered, which means: not known to be done
 */
export async function callApi<T>(
  path: string,
  { method = "GET", json, bytes, idempotencyKey, signal }: Call = {},
): Promise<T> {
  const headers = new Headers({ accept: "application/json" });
  if (json !== undefined) headers.set("content-type", "application/json");
  if (idempotencyKey) headers.set("idempotency-key", idempotencyKey);
  let response: Response;
  try {
    response = await fetch(path, {
      method,
      headers,
      body: json === undefined ? bytes : JSON.stringify(json),
      signal,
    });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw new ApiError(
      0,
      "offline",
      "The server does not answer. Nothing is lost; check the line and try again.",
    );
  }
  const body = (await response.json().catch(() => ({}))) as Record<string, unknown>;
  if (response.ok) return body as T;
  const message =
    typeof body.message === "string" ? body.message : `The server answered ${response.status}. Try again.`;
  throw new ApiError(
    response.status,
    String(body.error ?? "unknown"),
    message,
    (body.details as Record<string, unknown>) ?? {},
  );
}
