import { formatLength } from "../units/format-length.ts";

export type SheetUnits = "mm" | "in" | "in-fraction";

/** Places: to what a tape tells, 1 mm, 0.01 in or 1/16 in. */
export function placeText(mm: number, units: SheetUnits): string {
  if (units === "mm") return formatLength(mm, "mm", 0);
  if (units === "in") return formatLength(mm, "in", 2);
  return formatLength(mm, "in-fraction");
}

/** Gaps: 0.1 mm or 0.001 in; a sixteenth would hide what the verdict turns on, so fractions become decimals. */
export const gapText = (mm: number, units: SheetUnits): string => (units === "mm" ? formatLength(mm, "mm", 1) : formatLength(mm, "in", 3));

/** How places are rounded, in words. */
export const placeNote = (units: SheetUnits): string => (units === "mm" ? "mm, to the nearest 1 mm" : units === "in" ? "inches, to the nearest 0.01" : "inches, to the nearest 1/16");
/** The unit of gaps, in words. */
export const gapNote = (units: SheetUnits): string => (units === "mm" ? "mm" : "inches");
/** The sheet's unit, in words. */
export const unitName = (units: SheetUnits): string => (units === "mm" ? "mm" : "inches");
