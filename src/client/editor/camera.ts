import { PROJECTION, type Vec2, type View } from "#core/frames.ts";
import type { Camera } from "./view-state.ts";

/** mm at the left and top edge of a view. */
export function originOf(camera: Camera, view: View): Vec2 {
  return view === "plan" ? [camera.x, camera.top] : view === "side" ? [camera.x, camera.high] : [camera.across, camera.high];
}

export function toScreen(camera: Camera, view: View, u: number, v: number): [number, number] {
  const [left, top] = originOf(camera, view);
  return [(u - left) * camera.scale, (top - v) * camera.scale];
}

export function toView(camera: Camera, view: View, px: number, py: number): [number, number] {
  const [left, top] = originOf(camera, view);
  return [left + px / camera.scale, top - py / camera.scale];
}

/** Zoom by a factor that keeps the place under the pointer; views that share an axis follow. */
export function zoomAt(camera: Camera, view: View, px: number, py: number, factor: number, sizes: { readonly plan: number; readonly section: number; readonly side?: number }): Camera {
  const scale = Math.min(8, Math.max(0.03, camera.scale * factor));
  const [u, v] = toView(camera, view, px, py);
  const at = (value: number, pixels: number, sign: 1 | -1) => value - (sign * pixels) / scale;
  const middle = (edge: number, pixels: number, sign: 1 | -1) => edge + (sign * pixels) / 2 / camera.scale - (sign * pixels) / 2 / scale;
  return {
    scale,
    x: view === "rear" ? camera.x : at(u, px, 1),
    top: view === "plan" ? at(v, py, -1) : middle(camera.top, sizes.plan, -1),
    high: view === "plan" ? (sizes.side === undefined ? camera.high : middle(camera.high, sizes.side, -1)) : at(v, py, -1),
    across: view === "rear" ? at(u, px, 1) : middle(camera.across, sizes.section, 1),
  };
}

/** Moves the paper under a view by pixels; shared axes follow. */
export function pan(camera: Camera, view: View, dx: number, dy: number): Camera {
  const du = dx / camera.scale;
  const dv = dy / camera.scale;
  if (view === "plan") return { ...camera, x: camera.x - du, top: camera.top + dv };
  if (view === "side") return { ...camera, x: camera.x - du, high: camera.high + dv };
  return { ...camera, across: camera.across - du, high: camera.high + dv };
}

/** Height of the strip at the top of the plan that carries the names of datums, pixels. */
export const DATUM_STRIP = 58;
/** Air about what is framed, pixels. */
const AIR = 8;

export interface Extent {
  readonly low: readonly [number, number, number];
  readonly high: readonly [number, number, number];
}

/** A camera that shows an extent in all three views with a margin. Sizes in pixels. */
export function fit(extent: Extent, sizes: { readonly width: number; readonly planHeight: number; readonly sideHeight: number; readonly sectionWidth: number }): Camera {
  const size = [0, 1, 2].map((k) => Math.max(50, extent.high[k]! - extent.low[k]!));
  const middle = [0, 1, 2].map((k) => (extent.high[k]! + extent.low[k]!) / 2);
  const scale = Math.min(4, Math.min((sizes.width - 40) / size[0]!, (sizes.planHeight - DATUM_STRIP - 2 * AIR) / size[1]!, (sizes.sideHeight - 46) / size[2]!, (sizes.sectionWidth - 30) / size[1]!));
  return {
    scale,
    x: middle[0]! - sizes.width / 2 / scale,
    top: middle[1]! + (sizes.planHeight + DATUM_STRIP) / 2 / scale,
    high: middle[2]! + (sizes.sideHeight / 2 + 14) / scale,
    across: middle[1]! - sizes.sectionWidth / 2 / scale,
  };
}

/** The car axis across and up the paper, and the unseen one. */
export const axesOf = (view: View) => PROJECTION[view];
