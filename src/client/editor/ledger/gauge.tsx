import type { Gap } from "#core/gaps/gap.ts";

/** Millimetres a pixel stands for: the same in every row, so that rows can be compared by eye. */
const MM_PER_PX = 1;
const WALL = 18;
const LONGEST = 128;
export const GAUGE_WIDTH = WALL + LONGEST + 14;

/** Where a length ends on the gauge; what is longer is cut with a break. */
export function gaugeEnd(mm: number): { readonly x: number; readonly cut: boolean } {
  const px = mm / MM_PER_PX;
  return { x: WALL + Math.max(-WALL + 3, Math.min(LONGEST, px)), cut: px > LONGEST };
}

/**
 * The gap as a gauge: from the wall a bar as long as what is left at worst, beyond it in pale what travel, plus-minus and growth take off, and the need as a calliper
 * standing on it. A bar that ends behind the wall is an overlap.
 */
export function Gauge({ gap }: { gap: Gap }) {
  const worst = gaugeEnd(gap.worst);
  const drawn = gaugeEnd(gap.distance);
  const need = gaugeEnd(gap.required);
  const ink = `var(--${gap.verdict})`;
  return (
    <svg width={GAUGE_WIDTH} height={22} aria-hidden="true" className="block">
      {drawn.x > worst.x && <rect x={Math.max(worst.x, 2)} y={9} width={drawn.x - Math.max(worst.x, 2)} height={5} fill="var(--hair)" />}
      {gap.worst >= 0 ? <rect x={WALL + 1} y={7} width={Math.max(0, worst.x - WALL - 1)} height={9} fill={ink} /> : <rect x={worst.x} y={7} width={WALL - worst.x} height={9} fill="none" stroke={ink} strokeWidth={1.5} />}
      {gap.worst < 0 && <path d={hatch(worst.x, WALL)} stroke={ink} strokeWidth={1} />}
      <path d={`M${WALL} 2v18`} stroke="var(--ink)" strokeWidth={2} />
      {drawn.cut && <path d={`M${WALL + LONGEST - 6} 6l-4 11M${WALL + LONGEST - 1} 6l-4 11`} stroke="var(--film)" strokeWidth={2} />}
      {gap.required > 0 && <path d={`M${need.x - 4} 3h8M${need.x} 3v16M${need.x - 4} 19h8`} stroke="var(--ink)" strokeWidth={1.2} fill="none" />}
      {need.cut && <path d={`M${need.x + 6} 8l4 3-4 3`} stroke="var(--ink)" fill="none" />}
    </svg>
  );
}

/** Hatching of an overlap, behind the wall. */
function hatch(from: number, to: number): string {
  let d = "";
  for (let x = from + 2; x < to; x += 4) d += `M${x} 16l3-9`;
  return d;
}
