import type { RequestHandler } from "express";
import type { Db } from "../../database/connection.ts";
import { findLiveSignIn, touchSignIn } from "./people.repository.ts";

declare module "express-session" {
  interface SessionData {
    signInId?: string;
  }
}

/**
 * Settles who is asking, on every request, from the sign-in's own row: an ended sign-in stays ended even where a session row comes back.
 * The session itself is never changed after sign-in.
 */
export function whoIsAsking(db: Db, { demo }: { demo: boolean }): RequestHandler {
  return async (request, _response, next) => {
    const signInId = request.session?.signInId;
    if (signInId === undefined) return next();
    const live = await findLiveSignIn(db, signInId, demo);
    if (live) {
      request.asker = { personId: live.person_id, signInId };
      if (Date.now() - live.last_seen_at.getTime() > 60_000) await touchSignIn(db, signInId);
    }
    next();
  };
}
