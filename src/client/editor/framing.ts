import type { Gap } from "#core/gaps/gap.ts";
import type { Layout } from "#core/layout/schema.ts";
import { fit, zoomAt } from "./camera.ts";
import { extentOf } from "./shapes.ts";
import { useViewState, type Camera } from "./view-state.ts";

export interface WorkspaceSizes {
  readonly width: number;
  readonly planHeight: number;
  readonly sideHeight: number;
  readonly sectionWidth: number;
}

let sizes: WorkspaceSizes | null = null;
let flight = 0;

/** The workspace tells how large its views are. */
export function setSizes(next: WorkspaceSizes): void {
  sizes = next;
}

/** Takes the camera somewhere in a fifth of a second, or at once where motion is not wanted. */
function fly(to: Camera): void {
  cancelAnimationFrame(flight);
  const from = useViewState.getState().camera;
  if (matchMedia("(prefers-reduced-motion: reduce)").matches) return useViewState.getState().set({ camera: to });
  const start = performance.now();
  const step = (now: number) => {
    const t = Math.min(1, (now - start) / 200);
    const ease = 1 - (1 - t) ** 3;
    const mix = (a: number, b: number) => a + ease * (b - a);
    // the paper's places move in pixels, so that what is framed does not swing about
    const scale = from.scale * (to.scale / from.scale) ** ease;
    useViewState.getState().set({ camera: t === 1 ? to : { scale, x: mix(from.x, to.x), top: mix(from.top, to.top), high: mix(from.high, to.high), across: mix(from.across, to.across) } });
    if (t < 1) flight = requestAnimationFrame(step);
  };
  flight = requestAnimationFrame(step);
}

/** Shows everything in all views. */
export function frameAll(layout: Layout, atOnce = false): void {
  if (!sizes) return;
  const extent = extentOf(layout);
  if (!Number.isFinite(extent.low[0])) return;
  const camera = fit(extent, sizes);
  if (atOnce) useViewState.getState().set({ camera });
  else fly(camera);
}

/** Brings some things to the middle of all views, with room about them. */
export function frameKeys(layout: Layout, keys: readonly string[]): void {
  const { low, high } = extentOf(layout, new Set(keys));
  if (!sizes || !Number.isFinite(low[0])) return;
  const room = 0.35 * Math.max(...[0, 1, 2].map((k) => high[k]! - low[k]!), 150);
  fly(fit({ low: [low[0] - room, low[1] - room, low[2] - room], high: [high[0] + room, high[1] + room, high[2] + room] }, sizes));
}

/** Brings a pair's closest points to the middle of all views, with room about them, and cuts the section between them. */
export function framePair(gap: Gap): void {
  const middle = gap.pointA.map((value, k) => (value + gap.pointB[k]!) / 2) as unknown as readonly [number, number, number];
  useViewState.getState().set({ pair: `${gap.a}|${gap.b}`, station: Math.round(middle[0]), peek: null });
  if (!sizes) return;
  const reach = Math.max(260, gap.distance * 2.2);
  fly(fit({ low: [middle[0] - reach, middle[1] - reach, middle[2] - reach], high: [middle[0] + reach, middle[1] + reach, middle[2] + reach] }, sizes));
}

/** Zooms about the middle of the plan: the way without a wheel. */
export function zoomBy(factor: number): void {
  if (!sizes) return;
  const { camera } = useViewState.getState();
  fly(zoomAt(camera, "plan", sizes.width / 2, sizes.planHeight / 2, factor, { plan: sizes.planHeight, section: sizes.sectionWidth, side: sizes.sideHeight }));
}
