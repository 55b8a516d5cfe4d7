import type { Axis, Vec3 } from "../frames.ts";
import { axisIndex } from "../frames.ts";
import type { Layout } from "../layout/schema.ts";
import { sheetText, textWidth } from "./lettering.ts";

/** A datum as the sheet names it: the axles and zero planes of the chassis, then the document's own. */
export interface SheetDatum {
  readonly key: string;
  /** "D1", "D2" …: what stands where there is no room for the name. */
  readonly code: string;
  readonly name: string;
  readonly axis: Axis;
  readonly at: number;
}

/** Where dimensions start: one place on each axis, mm in the car frame, with its name. */
export interface Zero {
  readonly at: Vec3;
  readonly names: readonly [x: string, y: string, z: string];
}

/** The axles and zero planes, less those that a datum of the document names, then the document's in its order; mm, car frame. */
export function sheetDatums(layout: Layout): SheetDatum[] {
  const own = layout.chassis.datums;
  const standing = [
    { key: "front-axle", name: "Front axle", axis: "x" as const, at: 0 },
    { key: "rear-axle", name: "Rear axle", axis: "x" as const, at: layout.chassis.wheelbase },
    { key: "centre-plane", name: "Centre plane", axis: "y" as const, at: 0 },
    { key: "zero-plane", name: "Zero plane", axis: "z" as const, at: 0 },
  ].filter((datum) => !own.some((other) => other.axis === datum.axis && Math.abs(other.at - datum.at) < 0.01));
  return [...standing, ...own].map((datum, i) => ({ key: datum.key, code: `D${i + 1}`, name: sheetText(datum.name), axis: datum.axis, at: datum.at }));
}

/** The zero of each axis: the chosen datum for its own, the chassis zero for the others. `known` is false for a key that is no datum. */
export function zeroOf(datums: readonly SheetDatum[], key: string | undefined): { zero: Zero; known: boolean } {
  const nameAt = (axis: Axis, fallback: string) => datums.find((datum) => datum.axis === axis && Math.abs(datum.at) < 0.01)?.name ?? fallback;
  const at: [number, number, number] = [0, 0, 0];
  const names: [string, string, string] = [nameAt("x", "Front axle"), nameAt("y", "Centre plane"), nameAt("z", "Zero plane")];
  const chosen = key === undefined ? undefined : datums.find((datum) => datum.key === key);
  if (chosen) {
    at[axisIndex(chosen.axis)] = chosen.at;
    names[axisIndex(chosen.axis)] = chosen.name;
  }
  return { zero: { at, names }, known: key === undefined || chosen !== undefined };
}

export interface DatumLabel {
  readonly datum: SheetDatum;
  /** Place of its line, mm of paper. */
  readonly x: number;
  /** What its line reaches to the left at its top, mm: the arrow of a section. */
  readonly leftward: number;
  readonly text: string;
  /** 0 stands nearest the drawing. */
  readonly row: number;
}

/** Air between a line and the text beside it, mm. */
export const LABEL_AIR = 0.8;

/**
 * Names at the tops of vertical lines, each at the right of its own, in rows such that no line passes a name: right to left, a name stands one
 * row above every line that ends within its width. Names that would need more rows, or reach past `right`, become codes; where even that fails
 * they are left out (null rows are not returned).
 */
export function stackLabels(lines: readonly { readonly datum: SheetDatum; readonly x: number; readonly leftward?: number }[], size: number, right: number, rows: number): { labels: DatumLabel[]; left: SheetDatum[] } {
  const sorted = [...lines].sort((a, b) => a.x - b.x);
  const labels: DatumLabel[] = [];
  const left: SheetDatum[] = [];
  for (let i = sorted.length - 1; i >= 0; i--) {
    const { datum, x, leftward = 0 } = sorted[i]!;
    const place = (text: string): DatumLabel | null => {
      const end = x + LABEL_AIR + textWidth(text, size) + LABEL_AIR;
      if (end > right + LABEL_AIR) return null;
      const under = labels.filter((label) => label.x - label.leftward <= end);
      const row = under.reduce((most, label) => Math.max(most, label.row + 1), 0);
      return row < rows ? { datum, x, leftward, text, row } : null;
    };
    const label = place(datum.name) ?? place(datum.code);
    if (label) labels.push(label);
    else left.push(datum);
  }
  return { labels: labels.reverse(), left };
}
