import express, { type Request, type Response, type Router } from "express";
import { z } from "zod";
import type { Role } from "#core/layout/commands.ts";
import { faultsOf } from "#core/layout/parse-layout.ts";
import type { Endpoint } from "#contracts/endpoint.ts";
import type { Db } from "../database/connection.ts";
import { HttpFault, notFound } from "./fault.ts";
import { isTooDeep, wellFormed } from "./well-formed.ts";

/** Who is asking, as the sign-in row of this request says. */
export interface Asker {
  readonly personId: string;
  readonly signInId: string;
}
declare module "express-serve-static-core" {
  interface Request {
    asker?: Asker;
  }
}

export interface Context<P, Q, B> {
  readonly params: P;
  readonly query: Q;
  readonly body: B;
  /** The person asking; only for endpoints that want one. */
  readonly personId: string;
  /** The asker's role in the build; only for endpoints of members. */
  readonly role: Role;
  readonly request: Request;
  readonly response: Response;
  /** One transaction that writes, all or nothing. Whether the asker may is read again inside it: a role that was taken away meanwhile commits nothing. */
  readonly write: <T>(work: (tx: Db) => Promise<T>) => Promise<T>;
}

export interface MountOptions {
  readonly db: Db;
  /** Responses are held against their schema: in tests and development. */
  readonly checkResponses: boolean;
}

/** Every endpoint that is mounted, for the generated role matrix. */
export interface Mounted {
  readonly router: Router;
  readonly endpoints: Endpoint[];
  readonly options: MountOptions;
}

export const SENT = Symbol("the handler has sent the response itself");

/**
 * Mounts an endpoint: policy, then input by schema, then the handler, then the response. Order matters: who is asking is settled before any of the body is
 * read; not a member is 404 like a build that does not exist.
 */
export function mount<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, R extends z.ZodType>(
  mounted: Mounted,
  endpoint: Endpoint<P, Q, B, R>,
  handler: (context: Context<z.output<P>, z.output<Q>, z.output<B>>) => Promise<z.input<R> | typeof SENT>,
): void {
  if (!endpoint.policy) throw new Error(`${endpoint.name} has no policy: it cannot be served`);
  mounted.endpoints.push(endpoint);
  const { db, checkResponses } = mounted.options;
  const readBody = bodyReader(endpoint);
  const method = endpoint.method.toLowerCase() as "get" | "post" | "patch" | "put" | "delete";
  mounted.router[method](endpoint.path, async (request, response) => {
    const params = endpoint.params.safeParse({ ...request.params });
    const { personId, role } = await admit(db, endpoint, request, params.success);
    if (!params.success) throw notFound("page");
    const query = take(endpoint.query, { ...request.query }, "query");
    await readBody(request, response);
    const body = endpoint.bodyAsText || endpoint.method === "GET" ? request.body : take(endpoint.body, request.body ?? {}, "");
    const write = <T>(work: (tx: Db) => Promise<T>) =>
      db.transaction().execute(async (tx) => {
        await admit(tx, endpoint, request, true, "held");
        return work(tx);
      });
    const result = await handler({ params: params.data, query, body: body as z.output<B>, personId, role, request, response, write });
    if (result === SENT) return;
    if (checkResponses) checkResponse(endpoint, result);
    response.json(result);
  });
}

function checkResponse(endpoint: Endpoint, result: unknown): void {
  const checked = endpoint.response.safeParse(result);
  if (!checked.success) throw new Error(`${endpoint.name} answers what its contract does not say: ${JSON.stringify(checked.error.issues.slice(0, 5))}`);
}

/** Settles whether the asker may. "held": the membership keeps as it is until the transaction has ended. */
async function admit(db: Db, endpoint: Endpoint, request: Request, paramsFit: boolean, membership: "looked at" | "held" = "looked at"): Promise<{ personId: string; role: Role }> {
  const { policy } = endpoint;
  if (policy.who === "anyone") return { personId: request.asker?.personId ?? "", role: "viewer" };
  if (!request.asker) throw new HttpFault("not-signed-in", "Sign in first.");
  const { personId } = request.asker;
  if (policy.who === "signed-in") return { personId, role: "viewer" };
  if (!paramsFit) throw notFound("build");
  const buildId = String(request.params["buildId"]);
  const query = db.selectFrom("membership").select("role").where("build_id", "=", buildId).where("person_id", "=", personId);
  const member = await (membership === "held" ? query.forShare() : query).executeTakeFirst();
  if (!member) throw notFound("build");
  if (!policy.roles.includes(member.role)) throw new HttpFault("wrong-role", `Only ${wordList(policy.roles)} may do this; you are ${member.role} here.`);
  return { personId, role: member.role };
}

const wordList = (roles: readonly Role[]) => (roles.length === 1 ? `the ${roles[0]}` : `${roles.slice(0, -1).join(", ")} or ${roles[roles.length - 1]}`);

function take<S extends z.ZodType>(schema: S, value: unknown, place: string): z.output<S> {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const faults = faultsOf(parsed.error, value).map((fault) => ({ ...fault, path: place && fault.path ? `${place}.${fault.path}` : fault.path || place }));
  throw new HttpFault("bad-input", faults.length === 1 ? `${faults[0]!.path ? `${faults[0]!.path}: ` : ""}${faults[0]!.message}` : `${faults.length} things in what was sent cannot be taken.`, { fields: faults });
}

/** Reads the body as JSON (or text), only after the policy; refuses other types, compression, and strings that no database can hold. */
function bodyReader(endpoint: Endpoint): (request: Request, response: Response) => Promise<void> {
  if (endpoint.method === "GET") return () => Promise.resolve();
  const limit = endpoint.bodyLimit ?? 100 * 1024;
  const parse = endpoint.bodyAsText ? express.text({ type: "application/json", limit, inflate: false }) : express.json({ limit, inflate: false, strict: false, reviver: wellFormed });
  return (request, response) => {
    // on every write, also without a body: no form of another site can send this type without being asked first
    if (!/^application\/json\s*(;|$)/i.test(request.headers["content-type"] ?? "")) throw new HttpFault("wrong-type", "Send JSON (Content-Type: application/json).");
    return new Promise((resolve, reject) =>
      parse(request, response, (error?: unknown) => {
        if (error) reject(error instanceof Error ? error : new Error(String(error)));
        else if (!endpoint.bodyAsText && isTooDeep(request.body)) reject(new HttpFault("bad-json", "The body is nested too deep."));
        else resolve();
      }));
  };
}
