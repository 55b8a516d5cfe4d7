import { call, CallError } from "../api/call.ts";
import type { Link, Meaning, TheirChange, Waiting } from "./document-store.ts";

/** The document store's way to the server. */
export function serverLink(buildId: string, layoutId: string): Link {
  const params = { buildId, layoutId };
  return {
    send: (waiting: Waiting) => call("postCommand", { params, body: { commandId: waiting.commandId, base: waiting.base, command: waiting.command, label: waiting.label.slice(0, 200) } }),
    async changesAfter(seq) {
      const all: TheirChange[] = [];
      for (let after = seq; ; ) {
        const { changes, more } = await call("listChanges", { params, query: { after, limit: 200 } });
        all.push(...changes);
        const last = changes[changes.length - 1];
        if (!more || !last) return all;
        after = last.seq;
      }
    },
    meaning,
  };
}

/** What an error of a call means for what waits. Anything that may pass by itself is tried again; nothing is ever dropped. */
export function meaning(error: unknown): Meaning {
  if (!(error instanceof CallError)) return { kind: "later", message: error instanceof Error ? error.message : "The server cannot be reached." };
  switch (error.code) {
    case "conflict":
      return { kind: "conflict", message: error.message, theirs: error.current?.items ?? [] };
    case "key-reused":
      return { kind: "taken" };
    case "not-signed-in":
      return { kind: "later", message: "Your sign-in has ended. Sign in again in another tab or window; what waits here is sent then." };
    case "offline":
    case "away":
    case "busy":
    case "failed":
    case "too-many":
      return { kind: "later", message: error.message };
    default:
      return { kind: "refused", message: error.message };
  }
}
