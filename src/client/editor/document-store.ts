import { createStore, type StoreApi } from "zustand/vanilla";
import type { GapReport } from "#core/gaps/gap.ts";
import { buildScene, updateScene, type Scene } from "#core/gaps/scene.ts";
import { applyCommand } from "#core/layout/apply-command.ts";
import { readsAndWrites } from "#core/layout/command-access.ts";
import type { Command, Diff } from "#core/layout/commands.ts";
import { applyDiff, invertDiff, itemOf, sameValue } from "#core/layout/diff.ts";
import type { Fault } from "#core/layout/fault.ts";
import type { Layout } from "#core/layout/schema.ts";
import type { Keeper } from "./keeper.ts";

/** A command on its way: kept in the browser until the server has it. */
export interface Waiting {
  readonly commandId: string;
  readonly command: Command;
  readonly label: string;
  /** Before and after of what it wrote when it was given: what a conflict shows. */
  readonly diff: Diff;
  /** The seq that its author had seen when it was given; moves on only past changes that it does not touch. */
  readonly base: number;
}

/** saved: the server has everything; saving: on its way; waiting: the server is away, kept here; choice: somebody has to decide first. */
export type SaveState = "saved" | "saving" | "waiting" | "choice";

export interface Theirs {
  readonly list: string;
  readonly key: string;
  readonly value: unknown;
}

/** What stands in the way of the first waiting command, until its author decides. */
export interface Trouble {
  readonly kind: "conflict" | "refused";
  readonly waiting: Waiting;
  readonly message: string;
  readonly theirs: readonly Theirs[];
}

/** One step that undo takes back. */
export interface Step {
  readonly commandId: string;
  readonly label: string;
  readonly diff: Diff;
}

export interface DocumentState {
  /** The working document: what the server has, with what waits on top. */
  readonly document: Layout;
  readonly scene: Scene;
  readonly report: GapReport;
  readonly past: readonly Step[];
  readonly future: readonly Step[];
  readonly waiting: readonly Waiting[];
  readonly saveState: SaveState;
  /** Everything that waits is kept in this browser: the page may be closed. */
  readonly kept: boolean;
  /** Why the server cannot be reached, in words. */
  readonly away: string | null;
  readonly savedAt: Date | null;
  /** The last change of the server that is in here. */
  readonly seq: number;
  readonly trouble: Trouble | null;
  /** Why the last command was not taken, until the next one. */
  readonly refusal: string | null;
  /** The same at its places in the document. */
  readonly refusedFields: readonly Fault[];
}

export interface DocumentStore {
  readonly state: StoreApi<DocumentState>;
  /** Applies a command here at once and sends it; false, with a refusal in words, where it cannot be. */
  run(command: Command, label: string): boolean;
  undo(): void;
  redo(): void;
  /** Settles what is in the way: send mine on top of theirs, or drop mine. A refused one can only be dropped. */
  settle(choice: "mine" | "theirs"): void;
  /** Takes up what others changed. */
  catchUp(): Promise<void>;
  /** Tries again now what waits. */
  sendNow(): void;
  close(): void;
}

export { browserKeeper, type Keeper } from "./keeper.ts";

export interface TheirChange {
  readonly seq: number;
  readonly commandId: string;
  readonly diff: Diff;
}

/** What an error of the link means: try again later, both values to choose from, already taken, or a refusal in words. */
export type Meaning =
  | { readonly kind: "later"; readonly message?: string }
  | { readonly kind: "conflict"; readonly message: string; readonly theirs: readonly Theirs[] }
  | { readonly kind: "taken" }
  | { readonly kind: "refused"; readonly message: string };

/** How the store reaches the server: plain functions, so that tests give their own. */
export interface Link {
  send(waiting: Waiting, base: number): Promise<{ readonly seq: number; readonly replay: boolean }>;
  /** Every change after a seq, oldest first. */
  changesAfter(seq: number): Promise<readonly TheirChange[]>;
  meaning(error: unknown): Meaning;
}

const nameOf = (item: { readonly list: string; readonly key: string }) => `${item.list}/${item.key}`;
const AWAY = "The server cannot be reached.";
const MOST_STEPS = 500;
const RETRY_MS = [1_000, 2_000, 4_000, 8_000, 15_000];

/**
 * The working document of one layout. Every change goes through `run`: applied here at once, kept in the browser, sent in order, each once. A change of somebody else
 * never overwrites one that waits: where both touched the same item the author chooses between both values.
 */
export function createDocumentStore(start: { readonly document: Layout; readonly seq: number }, link: Link, keeper: Keeper): DocumentStore {
  let confirmed = start.document;
  let closed = false;
  let sending = false;
  let failures = 0;
  let retry: ReturnType<typeof setTimeout> | undefined;
  /** Ids of every command given here: what comes back under them is not somebody else's. */
  const given = new Set<string>();
  /** Keeps and forgets of the browser, one after another. */
  let keeping: Promise<void> = Promise.resolve();

  const scene = buildScene(start.document);
  const state = createStore<DocumentState>(() => ({
    document: start.document, scene, report: scene.report, past: [], future: [], waiting: [], saveState: "saved", kept: true, away: null, savedAt: null, seq: start.seq, trouble: null, refusal: null, refusedFields: [],
  }));
  const now = state.getState;

  const show = (document: Layout, more: Partial<DocumentState> = {}) => {
    if (sameValue(document, now().document)) return state.setState(more);
    const next = { ...now().scene };
    updateScene(next, document);
    state.setState({ document, scene: next, report: next.report, ...more });
  };

  const keep = (work: () => Promise<void>): Promise<void> => {
    keeping = keeping.then(work).then(() => state.setState({ kept: true }), () => state.setState({ kept: false }));
    return keeping;
  };

  /** What the server has with everything that waits on top, as far as it still fits. */
  const onTop = (): Layout => {
    let document = confirmed;
    for (const one of now().waiting) {
      const applied = applyCommand(document, one.command);
      if (applied.ok) document = applied.layout;
    }
    return document;
  };

  const apply = (command: Command, label: string): Step | null => {
    const applied = applyCommand(now().document, command);
    if (!applied.ok) {
      state.setState({ refusal: applied.reason, refusedFields: applied.fields ?? [] });
      return null;
    }
    const step: Step = { commandId: crypto.randomUUID(), label, diff: applied.diff };
    if (applied.diff.length === 0) {
      state.setState({ refusal: null, refusedFields: [] });
      return step;
    }
    const one: Waiting = { ...step, command, base: now().seq };
    given.add(one.commandId);
    show(applied.layout, { waiting: [...now().waiting, one], saveState: now().trouble ? "choice" : "saving", kept: false, refusal: null, refusedFields: [] });
    void keep(() => keeper.keep(one)).then(pump);
    return step;
  };

  const forget = async (gone: readonly Waiting[]): Promise<void> => {
    if (gone.length > 0) await keep(() => keeper.forget(gone.map((one) => one.commandId)));
  };

  /** Sends what waits, in order, one at a time. */
  const pump = async (): Promise<void> => {
    if (sending || closed || now().trouble) return;
    sending = true;
    clearTimeout(retry);
    const any = now().waiting.length > 0;
    try {
      for (let first = now().waiting[0]; first && !closed && !now().trouble; first = now().waiting[0]) {
        state.setState({ saveState: "saving" });
        if (first.base < now().seq) {
          // others changed things since it was given: theirs are looked at first
          await takeUp();
          continue;
        }
        const answer = await link.send(first, first.base);
        accept(first, answer);
        if (now().seq < answer.seq) await takeUp();
      }
      failures = 0;
      if (!now().trouble) state.setState({ saveState: "saved", away: null, ...(any ? { savedAt: new Date() } : {}) });
    } catch (error) {
      await stumble(error);
    } finally {
      sending = false;
    }
  };

  /** The server has a command: it is confirmed here where nothing of others came between. */
  const accept = (one: Waiting, answer: { readonly seq: number; readonly replay: boolean }) => {
    const next = !answer.replay && answer.seq === now().seq + 1;
    if (next) confirmed = applyDiff(confirmed, one.diff);
    const waiting = now().waiting.filter((other) => other.commandId !== one.commandId)
      // what was given on top of this one had seen it
      .map((other) => (next && other.base === now().seq ? { ...other, base: answer.seq } : other));
    state.setState(next ? { waiting, seq: answer.seq } : { waiting });
    void forget([one]);
    if (next) void keep(() => keeper.update(waiting));
  };

  const stumble = async (error: unknown): Promise<void> => {
    const first = now().waiting[0];
    let meaning = link.meaning(error);
    if (meaning.kind === "taken" && first) {
      // an earlier try got through although its answer did not: the history has it
      try {
        await takeUp();
        if (!now().waiting.some((one) => one.commandId === first.commandId)) return again(0);
        meaning = { kind: "refused", message: "The server knows this edit under another content." };
      } catch (other) {
        meaning = link.meaning(other);
      }
    }
    if (meaning.kind === "conflict" || meaning.kind === "refused") {
      if (first) return raise({ kind: meaning.kind, waiting: first, message: meaning.message, theirs: meaning.kind === "conflict" ? meaning.theirs : [] });
    }
    state.setState({ saveState: now().waiting.length > 0 ? "waiting" : "saved", away: (meaning.kind === "later" ? meaning.message : undefined) ?? AWAY });
    again(RETRY_MS[Math.min(failures++, RETRY_MS.length - 1)]!);
  };

  const again = (ms: number) => {
    clearTimeout(retry);
    retry = setTimeout(() => void pump(), ms);
  };

  const raise = (trouble: Trouble) => state.setState({ saveState: "choice", trouble, away: null });

  /**
   * Takes the changes after our seq onto what is confirmed, then what waits on top again. A waiting command whose items nobody else touched since it was given may as well
   * have been given now; the first one that somebody did touch is put to its author.
   * @param decided items that the author has decided about, "list/key"
   */
  const takeUp = async (decided: ReadonlySet<string> = new Set()): Promise<void> => {
    const since = now().seq;
    const changes = await link.changesAfter(Math.min(since, ...now().waiting.map((one) => one.base)));
    const fresh = changes.filter((change) => change.seq > since);
    for (const change of fresh) confirmed = applyDiff(confirmed, change.diff);
    const seq = fresh[fresh.length - 1]?.seq ?? since;
    const { document, waiting: before } = now();
    const taken = new Set(changes.map((change) => change.commandId));
    const waiting: Waiting[] = [];
    let clash: Waiting | undefined;
    for (const one of before) {
      if (taken.has(one.commandId)) continue;
      const touched = new Set(changes.filter((change) => change.seq > one.base && !given.has(change.commandId)).flatMap((change) => change.diff.map(nameOf)));
      const clashes = readsAndWrites(one.command, document).some((item) => touched.has(nameOf(item)) && !decided.has(nameOf(item)));
      if (clashes) clash ??= one;
      waiting.push(clashes || one.base === seq ? one : { ...one, base: seq });
    }
    if (fresh.length === 0 && waiting.every((one, i) => one === before[i]) && waiting.length === before.length && !clash) return;
    state.setState({ waiting, seq });
    show(onTop());
    void forget(before.filter((one) => taken.has(one.commandId)));
    void keep(() => keeper.update(waiting));
    if (clash) raise(conflictOf(clash));
  };

  const conflictOf = (one: Waiting): Trouble => ({
    kind: "conflict", waiting: one, message: "Somebody else changed this in the meantime.",
    theirs: one.diff.map((change) => ({ list: change.list, key: change.key, value: itemOf(confirmed, change.list, change.key) })),
  });

  const step = (from: "past" | "future"): void => {
    const list = now()[from];
    const last = list[list.length - 1];
    if (!last) return;
    const changes = from === "past" ? invertDiff(last.diff) : [...last.diff];
    const made = apply({ kind: "restore", changes }, `${from === "past" ? "Undo" : "Redo"}: ${last.label}`);
    // a step that no longer holds leaves the list: its reason stands in `refusal`
    const rest = list.slice(0, -1);
    if (!made) return state.setState(from === "past" ? { past: rest } : { future: rest });
    const moved: Step = { ...last, commandId: made.commandId };
    state.setState(from === "past" ? { past: rest, future: [...now().future, moved] } : { future: rest, past: [...now().past, moved] });
  };

  const store: DocumentStore = {
    state,
    run(command, label) {
      const made = apply(command, label);
      if (!made) return false;
      if (made.diff.length > 0) state.setState({ past: [...now().past, made].slice(-MOST_STEPS), future: [] });
      return true;
    },
    undo: () => step("past"),
    redo: () => step("future"),
    settle(choice) {
      const { trouble } = now();
      if (!trouble) return;
      const id = trouble.waiting.commandId;
      const mine = choice === "mine" && trouble.kind === "conflict";
      const rest = now().waiting.filter((one) => one.commandId !== id);
      state.setState({ trouble: null, waiting: mine ? now().waiting : rest, saveState: mine || rest.length > 0 ? "saving" : "saved", past: mine ? now().past : now().past.filter((one) => one.commandId !== id) });
      if (!mine) {
        void forget([trouble.waiting]);
        show(onTop());
      }
      sending = true;
      void takeUp(new Set(mine ? readsAndWrites(trouble.waiting.command, now().document).map(nameOf) : []))
        .catch(stumble)
        .finally(() => (sending = false))
        .then(pump);
    },
    async catchUp() {
      if (sending || closed || now().trouble) return;
      sending = true;
      try {
        await takeUp();
        if (now().saveState !== "choice") state.setState({ away: null });
      } catch (error) {
        const meaning = link.meaning(error);
        if (meaning.kind === "later") state.setState({ away: meaning.message ?? AWAY });
      } finally {
        sending = false;
      }
      void pump();
    },
    sendNow() {
      failures = 0;
      void pump();
    },
    close() {
      closed = true;
      clearTimeout(retry);
    },
  };

  // what an earlier page left unsent goes on top of what the server has, then out
  void keeper.load().then((left) => {
    if (left.length === 0 || closed) return;
    for (const one of left) given.add(one.commandId);
    state.setState({ waiting: [...left, ...now().waiting], saveState: "saving" });
    show(onTop());
    // what happened since they were given decides whether they may go out as they are
    void store.catchUp();
  }, () => state.setState({ kept: false }));
  return store;
}
