import type { RequestHandler } from "express";
import { HttpFault } from "./fault.ts";

/**
 * Refuses writes that another site's page sends: browsers say where a write comes from (Origin, Sec-Fetch-Site). Together with SameSite cookies and
 * JSON-only bodies, which no plain form can send.
 */
export function sameOrigin(publicUrl: string | null): RequestHandler {
  const expected = publicUrl === null ? null : new URL(publicUrl).origin;
  return (request, _response, next) => {
    if (request.method === "GET" || request.method === "HEAD" || request.method === "OPTIONS") return next();
    const site = request.headers["sec-fetch-site"];
    if (site !== undefined && site !== "same-origin" && site !== "none") throw new HttpFault("wrong-role", "This write came from another site and was refused.");
    const origin = request.headers.origin;
    if (origin !== undefined && origin !== (expected ?? `${request.protocol}://${request.headers.host}`)) throw new HttpFault("wrong-role", "This write came from another site and was refused.");
    next();
  };
}
