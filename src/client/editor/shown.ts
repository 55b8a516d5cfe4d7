import { createStore, type StoreApi } from "zustand/vanilla";
import type { GapReport } from "#core/gaps/gap.ts";
import { previewScene } from "#core/gaps/scene.ts";
import { applyCommand } from "#core/layout/apply-command.ts";
import type { Layout } from "#core/layout/schema.ts";
import type { DocumentStore } from "./document-store.ts";
import { useViewState } from "./view-state.ts";

/** What is on screen: the document with the change that is in the hand, and its gaps. */
export interface Shown {
  readonly document: Layout;
  readonly report: GapReport;
  /** Why the change in the hand would be refused. */
  readonly refusal: string | null;
  readonly previewing: boolean;
}

/** Follows the document and the preview, at most once a frame. */
export function followShown(store: DocumentStore): { state: StoreApi<Shown>; stop: () => void } {
  const now = store.state.getState();
  const state = createStore<Shown>(() => ({ document: now.document, report: now.report, refusal: null, previewing: false }));
  let frame = 0;
  const update = () => {
    frame = 0;
    const { document, report, scene } = store.state.getState();
    const { preview } = useViewState.getState();
    if (!preview) {
      state.setState({ document, report, refusal: null, previewing: false });
      return;
    }
    const applied = applyCommand(document, preview);
    if (!applied.ok) state.setState({ document, report, refusal: applied.reason, previewing: true });
    else state.setState({ document: applied.layout, report: previewScene(scene, applied.layout).report, refusal: null, previewing: true });
  };
  const later = () => {
    if (frame === 0) frame = requestAnimationFrame(update);
  };
  const stopDocument = store.state.subscribe((next, before) => {
    if (next.document !== before.document || next.report !== before.report) later();
  });
  const stopPreview = useViewState.subscribe((next, before) => {
    if (next.preview !== before.preview) later();
  });
  return {
    state,
    stop: () => {
      stopDocument();
      stopPreview();
      cancelAnimationFrame(frame);
    },
  };
}
