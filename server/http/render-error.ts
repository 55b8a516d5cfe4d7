import type { ErrorRequestHandler } from "express";
import { ERROR_STATUS, type ErrorBody, type ErrorCode } from "#contracts/errors.ts";
import { isContention, isDatabaseAway } from "../database/connection.ts";
import { HttpFault } from "./fault.ts";
import { JobFault } from "../compute/pool.ts";

/** Refusals that somebody looking into an attack wants to see. */
const NOTED: ReadonlySet<ErrorCode> = new Set(["not-signed-in", "wrong-sign-in", "wrong-role", "not-found", "key-reused", "too-large", "too-many"]);

interface Known {
  readonly code: ErrorCode;
  readonly message: string;
  readonly more?: Partial<ErrorBody["error"]>;
  readonly retryAfter?: number | undefined;
}

/** The one renderer of errors: every answer that is not 2xx has the shape of contracts/errors.ts. Details only go to the log. */
export const renderError: ErrorRequestHandler = (error, request, response, next) => {
  const known = recognise(error);
  if (known.code === "failed") request.log.error({ err: error }, "request failed");
  else if (known.code === "away") request.log.error({ event: "database-away", cause: error instanceof Error ? error.message : String(error) });
  else if (NOTED.has(known.code)) request.log.info({ event: "refused", code: known.code, personId: request.asker?.personId ?? null });
  if (response.headersSent) return next(error);
  if (known.retryAfter !== undefined) response.setHeader("Retry-After", String(known.retryAfter));
  // the rest of what was too large is not read: the connection ends with the answer
  if (known.code === "too-large") response.setHeader("Connection", "close");
  response.status(ERROR_STATUS[known.code]).json({ error: { code: known.code, message: known.message, requestId: String(request.id), ...known.more } } satisfies ErrorBody);
};

function recognise(error: unknown): Known {
  if (error instanceof HttpFault) {
    return { code: error.code, message: error.message, more: { ...(error.fields ? { fields: error.fields } : {}), ...(error.current ? { current: error.current } : {}) }, retryAfter: error.retryAfter };
  }
  if (error instanceof JobFault) {
    if (error.reason === "busy") return { code: "busy", message: error.message, retryAfter: 5 };
    if (error.reason === "deadline") return { code: "busy", message: error.message, retryAfter: 30 };
    return { code: "failed", message: "This could not be computed. Tell us the request number." };
  }
  const { type, status } = (error ?? {}) as { type?: string; status?: number };
  if (type === "entity.too.large") return { code: "too-large", message: "That is more than can be taken at once." };
  if (type === "entity.parse.failed" || type === "entity.verify.failed") return { code: "bad-json", message: "The body is not JSON that can be read." };
  if (type === "encoding.unsupported" || type === "charset.unsupported") return { code: "wrong-type", message: "Send plain JSON in UTF-8, not compressed." };
  if (type === "request.aborted" || type === "request.size.invalid") return { code: "bad-input", message: "The request ended before all of it came." };
  if (status === 404) return { code: "not-found", message: "There is nothing at this address." };
  if (error instanceof URIError || (status === 400 && error instanceof Error)) return { code: "bad-input", message: "The address cannot be read." };
  if (isDatabaseAway(error)) return { code: "away", message: "The database is away for a moment. Nothing was changed; try again.", retryAfter: 2 };
  if (isContention(error)) return { code: "busy", message: "Somebody else was just here. Nothing was changed; try again.", retryAfter: 1 };
  return { code: "failed", message: "Something went wrong on our side. Nothing was changed; tell us the request number." };
}
