import { z } from "zod";

/** The one error shape, and the one table of what can go wrong over the wire. */
export const ERROR_STATUS = {
  "bad-input": 400, "bad-json": 400, "not-signed-in": 401, "wrong-sign-in": 401, "wrong-role": 403, "not-found": 404, "conflict": 409,
  "refused": 422, "key-reused": 422, "too-large": 413, "wrong-type": 415, "too-many": 429, "failed": 500, "busy": 503, "away": 503,
} as const;
export type ErrorCode = keyof typeof ERROR_STATUS;

export const errorSchema = z.object({
  error: z.object({
    code: z.enum(Object.keys(ERROR_STATUS) as [ErrorCode, ...ErrorCode[]]),
    message: z.string(),
    requestId: z.string(),
    fields: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
    /** With "conflict": the values now stored of the items that collide, and the seq they stand at. */
    current: z.object({ seq: z.int(), items: z.array(z.object({ list: z.string(), key: z.string(), value: z.unknown() })) }).optional(),
  }),
});
export type ErrorBody = z.output<typeof errorSchema>;
