import type { z } from "zod";
import { ADDRESSES, type EndpointName } from "#contracts/addresses.ts";
import type * as builds from "#contracts/builds.contract.ts";
import type { ErrorBody } from "#contracts/errors.ts";
import type * as layouts from "#contracts/layouts.contract.ts";
import type * as reports from "#contracts/reports.contract.ts";
import type * as signIn from "#contracts/sign-in.contract.ts";
import { CallError } from "./call-error.ts";

export { CallError };

/** The contracts, as types alone: their schemas are not loaded here. */
type Contracts = typeof builds & typeof layouts & typeof reports & typeof signIn;
type Input<Name extends EndpointName> = {
  params?: z.input<Contracts[Name]["params"]>;
  query?: z.input<Contracts[Name]["query"]>;
  body?: z.input<Contracts[Name]["body"]>;
  /** The body as text that is JSON already, such as a file. */
  text?: string;
  signal?: AbortSignal;
};

/** Longest wait for an answer, ms: a server that says nothing for so long counts as away. */
const PATIENCE = 30_000;

/** The address of an endpoint with its parameters filled in. */
export function addressOf(name: EndpointName, params: object = {}, query: object = {}): string {
  const path = ADDRESSES[name][1].replace(/:([A-Za-z]+)/g, (_, key: string) => encodeURIComponent(String((params as Record<string, unknown>)[key])));
  const search = new URLSearchParams(Object.entries(query).filter(([, value]) => value !== undefined).map(([key, value]) => [key, String(value)])).toString();
  return search ? `${path}?${search}` : path;
}

/**
 * Calls an endpoint. Writes are JSON from this page only: the cookie is SameSite, and the server refuses a write that the browser says comes from elsewhere.
 * @throws CallError with the server's code, message and fields; "offline" where no answer came; what an abort throws
 */
export async function call<Name extends EndpointName>(name: Name, input: Input<Name> = {}): Promise<z.output<Contracts[Name]["response"]>> {
  const method = ADDRESSES[name][0];
  const patience = AbortSignal.timeout(PATIENCE);
  let response: Response;
  let json: unknown;
  try {
    const init: RequestInit = { method, credentials: "same-origin", headers: { Accept: "application/json" }, signal: input.signal ? AbortSignal.any([input.signal, patience]) : patience };
    if (method !== "GET") {
      init.headers = { ...init.headers, "Content-Type": "application/json" };
      init.body = input.text ?? JSON.stringify(input.body ?? {});
    }
    response = await fetch(addressOf(name, input.params as object, input.query as object), init);
    json = await response.json().catch(() => null);
  } catch (error) {
    if (input.signal?.aborted) throw error;
    throw new CallError("offline", "The server cannot be reached.");
  }
  if (response.ok) return json as z.output<Contracts[Name]["response"]>;
  if (!isErrorBody(json)) throw new CallError(response.status >= 502 ? "offline" : "failed", response.status >= 502 ? "The server cannot be reached." : "The server answered in a way that cannot be read.");
  throw new CallError(json.error.code, json.error.message, json.error);
}

function isErrorBody(json: unknown): json is ErrorBody {
  const error = (json as ErrorBody | null)?.error;
  return typeof error === "object" && error !== null && typeof error.code === "string" && typeof error.message === "string";
}
