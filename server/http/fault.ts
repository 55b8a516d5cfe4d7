import type { ErrorBody, ErrorCode } from "#contracts/errors.ts";

type Fields = NonNullable<ErrorBody["error"]["fields"]>;
type Current = ErrorBody["error"]["current"];

/** An answer that is not the asked-for one: thrown anywhere in a request, rendered in one place. */
export class HttpFault extends Error {
  override readonly name = "HttpFault";
  readonly code: ErrorCode;
  readonly fields: Fields | undefined;
  readonly current: Current | undefined;
  readonly retryAfter: number | undefined;
  constructor(code: ErrorCode, message: string, more: { fields?: Fields | undefined; current?: Current | undefined; retryAfter?: number } = {}) {
    super(message);
    this.code = code;
    this.fields = more.fields;
    this.current = more.current;
    this.retryAfter = more.retryAfter;
  }
}

export const notFound = (what: string) => new HttpFault("not-found", `There is no such ${what}, or it is not yours to see.`);
