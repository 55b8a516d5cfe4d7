import type { z } from "zod";
import type { Endpoint } from "#contracts/endpoint.ts";
import { errorSchema, type ErrorBody, type ErrorCode } from "#contracts/errors.ts";

/** What the server refused, or that it could not be reached (code "offline"). */
export class CallError extends Error {
  override readonly name = "CallError";
  readonly code: ErrorCode | "offline";
  readonly fields: NonNullable<ErrorBody["error"]["fields"]>;
  readonly current: ErrorBody["error"]["current"];
  readonly requestId: string | null;
  constructor(code: ErrorCode | "offline", message: string, body?: ErrorBody["error"]) {
    super(message);
    this.code = code;
    this.fields = body?.fields ?? [];
    this.current = body?.current;
    this.requestId = body?.requestId ?? null;
  }
}

type Input<E extends Endpoint> = {
  params?: z.input<E["params"]>;
  query?: z.input<E["query"]>;
  body?: z.input<E["body"]>;
  /** The body as text that is JSON already, such as a file. */
  text?: string;
  signal?: AbortSignal;
};

/** The address of an endpoint with its parameters filled in. */
export function addressOf(endpoint: Endpoint, params: object = {}, query: object = {}): string {
  const path = endpoint.path.replace(/:([A-Za-z]+)/g, (_, name: string) => encodeURIComponent(String((params as Record<string, unknown>)[name])));
  const search = new URLSearchParams(Object.entries(query).filter(([, value]) => value !== undefined).map(([key, value]) => [key, String(value)])).toString();
  return search ? `${path}?${search}` : path;
}

export async function call<E extends Endpoint>(endpoint: E, input: Input<E> = {}): Promise<z.output<E["response"]>> {
  let response: Response;
  try {
    const init: RequestInit = { method: endpoint.method, credentials: "same-origin", headers: { Accept: "application/json" } };
    if (endpoint.method !== "GET") {
      init.headers = { ...init.headers, "Content-Type": "application/json" };
      init.body = input.text ?? JSON.stringify(input.body ?? {});
    }
    if (input.signal) init.signal = input.signal;
    response = await fetch(addressOf(endpoint, input.params as object, input.query as object), init);
  } catch (error) {
    if (error instanceof DOMException && error.name === "AbortError") throw error;
    throw new CallError("offline", "The server cannot be reached.");
  }
  const json: unknown = await response.json().catch(() => null);
  if (response.ok) return json as z.output<E["response"]>;
  const parsed = errorSchema.safeParse(json);
  if (!parsed.success) throw new CallError(response.status >= 502 ? "offline" : "failed", "The server answered in a way that cannot be read.");
  throw new CallError(parsed.data.error.code, parsed.data.error.message, parsed.data.error);
}
