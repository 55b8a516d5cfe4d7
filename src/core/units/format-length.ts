import type { LengthUnit } from "./parse-length.ts";

const MM_PER_INCH = 25.4;

/**
 * A length as the person reads it, without the unit's name: mm to 0.1 (`310.0`), decimal inches to 0.001 (`12.205`), fractional inches to the nearest
 * 1/16, reduced and carried (`12 3/8`, `-0 1/16` is `-1/16`). Rounding half away from nothing. Not finite: a dash.
 */
export function formatLength(mm: number, unit: LengthUnit, decimals?: number): string {
  if (!Number.isFinite(mm)) return "–";
  if (unit === "mm") return fixed(mm, decimals ?? 1);
  if (unit === "in") return fixed(mm / MM_PER_INCH, decimals ?? 3);
  const sixteenths = Math.round((Math.abs(mm) / MM_PER_INCH) * 16);
  const sign = mm < 0 && sixteenths > 0 ? "-" : "";
  const whole = Math.floor(sixteenths / 16);
  let over = sixteenths % 16;
  let under = 16;
  while (over > 0 && over % 2 === 0) {
    over /= 2;
    under /= 2;
  }
  if (over === 0) return `${sign}${whole}`;
  return whole === 0 ? `${sign}${over}/${under}` : `${sign}${whole} ${over}/${under}`;
}

/** As `formatLength`, with the unit's sign: `310.0 mm`, `12.205 in`, `12 3/8"`. */
export function formatLengthWithUnit(mm: number, unit: LengthUnit): string {
  const text = formatLength(mm, unit);
  return unit === "mm" ? `${text} mm` : unit === "in" ? `${text} in` : `${text}"`;
}

/** One step of the tape a person works with, mm: 1 mm or 1/16 inch. */
export const tapeStep = (unit: LengthUnit): number => (unit === "mm" ? 1 : MM_PER_INCH / 16);

function fixed(value: number, decimals: number): string {
  const text = value.toFixed(decimals);
  return Number(text) === 0 ? text.replace("-", "") : text;
}
