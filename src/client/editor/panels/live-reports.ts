import { createStore, type StoreApi } from "zustand/vanilla";
import type { BodyReport } from "#core/body/stance.ts";
import type { MassReport } from "#core/body/mass.ts";
import type { Layout } from "#core/layout/schema.ts";
import type { SpaceReport } from "#core/luggage/spaces-report.ts";
import type { Shown } from "../shown.ts";
import type { ReportAnswer, ReportQuestion } from "./reports-worker.ts";

/** Stance, mass and litres of what is on screen, as last computed; null until the first answer. */
export interface LiveReports {
  readonly body: BodyReport | null;
  readonly mass: MassReport | null;
  readonly spaces: readonly SpaceReport[] | null;
  /** The document has moved on since. */
  readonly stanceBehind: boolean;
  readonly spacesBehind: boolean;
  readonly failed: string | null;
}

/**
 * Follows what is on screen and has it computed beside the page's own thread: stance and mass as fast as answers come, even while something is dragged; litres, which take
 * longer, only for what has been let go.
 */
export function followReports(shown: StoreApi<Shown>): { state: StoreApi<LiveReports>; stop: () => void } {
  const state = createStore<LiveReports>(() => ({ body: null, mass: null, spaces: null, stanceBehind: true, spacesBehind: true, failed: null }));
  const lanes = { stance: lane("stance"), spaces: lane("spaces") };

  function lane(section: "stance" | "spaces") {
    let worker: Worker | null = null;
    let busy = false;
    let turn = 0;
    let asked: Layout | null = null;
    const ask = () => {
      const { document, previewing } = shown.getState();
      if (busy || asked === document || (section === "spaces" && previewing)) return;
      busy = true;
      asked = document;
      worker ??= start();
      worker.postMessage({ turn: ++turn, section, layout: document } satisfies ReportQuestion);
    };
    const start = () => {
      const made = new Worker(new URL("./reports-worker.ts", import.meta.url), { type: "module" });
      made.onmessage = (event: MessageEvent<ReportAnswer>) => {
        busy = false;
        const behind = asked !== shown.getState().document;
        const answer = event.data;
        if ("failed" in answer) state.setState({ failed: answer.failed });
        else if (answer.section === "stance") state.setState({ body: answer.body, mass: answer.mass, stanceBehind: behind, failed: null });
        else state.setState({ spaces: answer.spaces, spacesBehind: behind, failed: null });
        ask();
      };
      made.onerror = () => {
        busy = false;
        state.setState({ failed: "The reports could not be computed in this browser." });
      };
      return made;
    };
    return { ask, stop: () => worker?.terminate() };
  }

  let later: ReturnType<typeof setTimeout> | undefined;
  const follow = () => {
    if (!state.getState().stanceBehind || !state.getState().spacesBehind) state.setState({ stanceBehind: true, spacesBehind: true });
    lanes.stance.ask();
    clearTimeout(later);
    later = setTimeout(lanes.spaces.ask, 250);
  };
  const stop = shown.subscribe((next, before) => {
    if (next.document !== before.document || next.previewing !== before.previewing) follow();
  });
  follow();
  return {
    state,
    stop: () => {
      stop();
      clearTimeout(later);
      lanes.stance.stop();
      lanes.spaces.stop();
    },
  };
}
