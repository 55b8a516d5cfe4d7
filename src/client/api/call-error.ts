import type { ErrorBody, ErrorCode } from "#contracts/errors.ts";

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

  /** The message for one field, by its path. */
  at(path: string): string | undefined {
    return this.fields.find((field) => field.path === path)?.message;
  }
}
