import { z } from "zod";
import type { Role } from "#core/layout/commands.ts";

/**
 * One description of an endpoint for both sides: the server mounts it with its policy, the browser calls it by it, tests
 * generate the role matrix from it.
 */
export type Policy =
  | { readonly who: "anyone" }
  | { readonly who: "signed-in" }
  /** Members of the build named by `:buildId` holding one of these roles. Not a member: 404. */
  | { readonly who: "member"; readonly roles: readonly Role[] };

export interface Endpoint<Params extends z.ZodType = z.ZodType, Query extends z.ZodType = z.ZodType, Body extends z.ZodType = z.ZodType, Response extends z.ZodType = z.ZodType> {
  readonly name: string;
  readonly method: "GET" | "POST" | "PATCH" | "PUT" | "DELETE";
  /** Express path, starting with /api. */
  readonly path: string;
  readonly policy: Policy;
  readonly params: Params;
  readonly query: Query;
  readonly body: Body;
  readonly response: Response;
  /** What is sent when not JSON. */
  readonly produces?: "application/pdf" | "application/json" | "text/csv" | "image/svg+xml";
  /** Largest request body, bytes; 100 kB where absent. */
  readonly bodyLimit?: number;
  /** The handler takes the body as text and has it parsed in a worker: large files stay off the event loop. */
  readonly bodyAsText?: boolean;
}

export const nothing = z.strictObject({});

export function endpoint<P extends z.ZodType = typeof nothing, Q extends z.ZodType = typeof nothing, B extends z.ZodType = typeof nothing, R extends z.ZodType = typeof nothing>(
  description: Partial<Pick<Endpoint<P, Q, B, R>, "params" | "query" | "body" | "produces" | "bodyLimit" | "bodyAsText">> &
    Pick<Endpoint<P, Q, B, R>, "name" | "method" | "path" | "policy" | "response">,
): Endpoint<P, Q, B, R> {
  return { params: nothing as unknown as P, query: nothing as unknown as Q, body: nothing as unknown as B, ...description };
}

export const anyone: Policy = { who: "anyone" };
export const signedIn: Policy = { who: "signed-in" };
export const members = (...roles: readonly Role[]): Policy => ({ who: "member", roles });
export const EVERY_ROLE: readonly Role[] = ["owner", "designer", "fabricator", "viewer"];

/** Identifiers made by the server. */
export const id = z.uuid();
