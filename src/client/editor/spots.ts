/** Where numbers may stand so that they lie on no line: a coarse map of what is inked, and a search for room. Pure; pixels. */

const CELL = 8;

export interface InkMap {
  readonly columns: number;
  readonly rows: number;
  readonly cells: Uint8Array;
}

export function emptyInk(width: number, height: number): InkMap {
  const columns = Math.max(1, Math.ceil(width / CELL));
  const rows = Math.max(1, Math.ceil(height / CELL));
  return { columns, rows, cells: new Uint8Array(columns * rows) };
}

/** Marks the cells that a line passes. */
export function inkLine(map: InkMap, x0: number, y0: number, x1: number, y1: number): void {
  const right = map.columns * CELL;
  const bottom = map.rows * CELL;
  if (Math.max(x0, x1) < 0 || Math.min(x0, x1) > right || Math.max(y0, y1) < 0 || Math.min(y0, y1) > bottom) return;
  // no line of a drawing needs more samples than the view has cells
  const steps = Math.min(4000, Math.ceil(Math.max(Math.abs(x1 - x0), Math.abs(y1 - y0)) / (CELL / 2)));
  for (let i = 0; i <= steps; i++) {
    const t = steps === 0 ? 0 : i / steps;
    const column = Math.floor((x0 + t * (x1 - x0)) / CELL);
    const row = Math.floor((y0 + t * (y1 - y0)) / CELL);
    if (column >= 0 && row >= 0 && column < map.columns && row < map.rows) map.cells[row * map.columns + column] = 1;
  }
}

/** How much of a box lies on ink: cells touched, as a share of its cells. */
export function inkUnder(map: InkMap, x: number, y: number, halfWidth: number, halfHeight: number): number {
  const c0 = Math.max(0, Math.floor((x - halfWidth) / CELL));
  const c1 = Math.min(map.columns - 1, Math.floor((x + halfWidth) / CELL));
  const r0 = Math.max(0, Math.floor((y - halfHeight) / CELL));
  const r1 = Math.min(map.rows - 1, Math.floor((y + halfHeight) / CELL));
  let inked = 0;
  let all = 0;
  for (let row = r0; row <= r1; row++) {
    for (let column = c0; column <= c1; column++) {
      all++;
      inked += map.cells[row * map.columns + column]!;
    }
  }
  return all === 0 ? 1 : inked / all;
}

export interface Wanting {
  readonly id: string;
  /** What it is about: its leader ends here. */
  readonly x: number;
  readonly y: number;
  readonly halfWidth: number;
  readonly halfHeight: number;
}

export interface Spot {
  readonly x: number;
  readonly y: number;
}

export interface Page {
  readonly width: number;
  readonly height: number;
  /** Kept free at the top, pixels. */
  readonly head: number;
}

interface Placed extends Spot {
  readonly halfWidth: number;
  readonly halfHeight: number;
}

/**
 * A spot for each: no two cover one another where any room is left, off the ink where there is room within reach, near what it is about, and where it was before (as an
 * offset from it) if that is as good. In the order given: earlier ones choose first.
 */
export function chooseSpots(wanting: readonly Wanting[], ink: InkMap, page: Page, before: ReadonlyMap<string, Spot>, taken: readonly Placed[] = []): Map<string, Spot> {
  const placed: Placed[] = [...taken];
  const out = new Map<string, Spot>();
  for (const one of wanting) {
    let best: Spot | null = null;
    let least = Infinity;
    const weigh = (dx: number, dy: number, bonus: number) => {
      const x = one.x + dx;
      const y = one.y + dy;
      if (x < one.halfWidth + 4 || x > page.width - one.halfWidth - 4 || y < page.head + one.halfHeight || y > page.height - one.halfHeight - 4) return;
      let cost = Math.hypot(dx, dy) + 220 * inkUnder(ink, x, y, one.halfWidth, one.halfHeight) - bonus;
      for (const other of placed) {
        if (Math.abs(other.x - x) < other.halfWidth + one.halfWidth + 4 && Math.abs(other.y - y) < other.halfHeight + one.halfHeight + 4) cost += 2000;
        else if (crosses(one.x, one.y, x, y, other)) cost += 90;
      }
      if (cost < least) {
        least = cost;
        best = { x: dx, y: dy };
      }
    };
    const old = before.get(one.id);
    if (old) weigh(old.x, old.y, 40);
    for (const distance of [26, 36, 48, 62, 78, 96, 116, 140, 170]) {
      for (let k = 0; k < 16; k++) weigh(distance * Math.cos((k * Math.PI) / 8), distance * Math.sin((k * Math.PI) / 8), 0);
    }
    const spot: Spot = best ?? { x: 0, y: -26 };
    out.set(one.id, spot);
    placed.push({ x: one.x + spot.x, y: one.y + spot.y, halfWidth: one.halfWidth, halfHeight: one.halfHeight });
  }
  return out;
}

/** Does a leader pass over a placed box? Sampled at eight places. */
function crosses(x0: number, y0: number, x1: number, y1: number, box: Placed): boolean {
  for (let i = 1; i < 8; i++) {
    const x = x0 + ((x1 - x0) * i) / 8;
    const y = y0 + ((y1 - y0) * i) / 8;
    if (Math.abs(box.x - x) < box.halfWidth + 1 && Math.abs(box.y - y) < box.halfHeight + 1) return true;
  }
  return false;
}
