import type { BodyReport } from "../body/stance.ts";
import type { MassReport } from "../body/mass.ts";
import type { Gap } from "../gaps/gap.ts";
import type { Layout, Source } from "../layout/schema.ts";
import type { SpaceReport } from "../luggage/spaces-report.ts";
import { tubePath } from "../geometry/tubes.ts";
import type { DrawnItem } from "./drawn-items.ts";
import type { SheetDatum, Zero } from "./sheet-datums.ts";
import { gapNote, gapText, placeNote, placeText, type SheetUnits } from "./sheet-lengths.ts";
import type { Row, Table } from "./table.ts";
import { VERDICT_INK } from "./paper.ts";

/** What a sheet reads of the report (its shape is that of `fullReport`). */
export interface SheetReport {
  readonly gaps: readonly Gap[];
  readonly body?: BodyReport;
  readonly mass?: MassReport;
  readonly spaces?: readonly SpaceReport[];
}

const longest = (rows: readonly Row[], column: number, head: string, most: number) => {
  const texts = rows.map((row) => { const cell = row.cells[column]!; return typeof cell === "string" ? cell : cell.text; });
  return Math.min(most, Math.max([...head].length, ...texts.map((t) => [...t].length)));
};

/** Where every part lies: its faces as drawn, from the chosen zero. Numbers are those of the parts list: the document's order. */
export function placesTable(layout: Layout, items: readonly DrawnItem[], zero: Zero, units: SheetUnits): Table {
  const sources = new Map(layout.parts.map((part) => [part.key, part.source]));
  const rows = items.filter((item) => item.is === "part").map((item): Row => {
    const range = (c: 0 | 1 | 2) => [placeText(item.extent.low[c] - zero.at[c], units), placeText(item.extent.high[c] - zero.at[c], units)];
    return { of: item.key, cells: [{ text: item.label, bold: true }, item.name, ...range(0), ...range(1), ...range(2), sourceText(sources.get(item.key)!, units)] };
  });
  const number = (head: string, column: number) => ({ head, least: longest(rows, column, head, 12), wanted: 0, align: "right" as const });
  return {
    title: "Places", note: `from ${zero.names.join(", ")}; ${placeNote(units)}`, rows,
    columns: [
      { head: "no", least: Math.max(2, longest(rows, 0, "no", 4)), wanted: 0, align: "right" }, { head: "part", least: 12, wanted: longest(rows, 1, "part", 36) },
      number("x from", 2), number("to", 3), number("y from", 4), number("to", 5), number("z from", 6), number("to", 7),
      { head: "size from", least: 10, wanted: longest(rows, 8, "size from", 28) },
    ],
  };
}

/** Where a size is from and how much larger it may turn out, in the sheet's unit. */
export function sourceText(source: Source, units: SheetUnits): string {
  const { how, plusMinus } = source;
  const amount = (mm: number) => (units === "mm" ? String(Math.round(mm * 10) / 10) : gapText(mm, "in"));
  if (typeof plusMinus === "number") return plusMinus === 0 ? how : `${how} ±${amount(plusMinus)}`;
  const axes = (["x", "y", "z"] as const).filter((axis) => plusMinus[axis].some((v) => v !== 0));
  return axes.length === 0 ? how : `${how} ${axes.map((axis) => `${axis} ${amount(plusMinus[axis][0])}/+${amount(plusMinus[axis][1])}`).join(" ")}`;
}

/** The gap ledger down to what is tight, worst first; numbers are the ledger's. */
export function gapsTable(layout: Layout, report: SheetReport, units: SheetUnits): Table {
  const names = namesOf(layout);
  const all = report.gaps.map((gap, index) => ({ gap, index })).filter(({ gap }) => gap.verdict !== "clear");
  const rows = all.map(({ gap, index }): Row => ({
    of: `${gap.a}|${gap.b}`,
    cells: [
      { text: String(index + 1), bold: true }, { text: gap.verdict, ink: VERDICT_INK[gap.verdict], bold: gap.verdict !== "clear" && gap.verdict !== "tight" },
      names.get(gap.a) ?? gap.a, names.get(gap.b) ?? gap.b, gapText(gap.distance, units), gapText(gap.worst, units), gapText(gap.required, units), gapText(gap.margin, units), becauseText(gap, units),
    ],
  }));
  const number = (head: string, column: number) => ({ head, least: longest(rows, column, head, 12), wanted: 0, align: "right" as const });
  return {
    title: "Gaps, worst first", note: `${gapNote(units)}; drawn - movement, ± and growth = worst; worst - need = margin`, rows,
    columns: [
      { head: "no", least: longest(rows, 0, "no", 5), wanted: 0, align: "right" }, { head: "verdict", least: 7, wanted: 0 },
      { head: "between", least: 12, wanted: longest(rows, 2, "between", 30) }, { head: "and", least: 12, wanted: longest(rows, 3, "and", 30) },
      number("drawn", 4), number("worst", 5), number("need", 6), number("margin", 7),
      { head: "because", least: 16, wanted: longest(rows, 8, "because", 110) },
    ],
  };
}

/** What is clear, shorter: numbers go on from the table above. */
export function clearGapsTable(layout: Layout, report: SheetReport, units: SheetUnits): Table {
  const names = namesOf(layout);
  const rows = report.gaps.map((gap, index) => ({ gap, index })).filter(({ gap }) => gap.verdict === "clear").map(({ gap, index }): Row => ({
    of: `${gap.a}|${gap.b}`,
    cells: [
      { text: String(index + 1), bold: true }, names.get(gap.a) ?? gap.a, names.get(gap.b) ?? gap.b, gapText(gap.distance, units), gapText(gap.worst, units), gapText(gap.required, units), gapText(gap.margin, units),
      gap.provisional ? "estimated" : "",
    ],
  }));
  const number = (head: string, column: number) => ({ head, least: longest(rows, column, head, 12), wanted: 0, align: "right" as const });
  return {
    title: "Gaps, clear", note: gapNote(units), rows,
    columns: [
      { head: "no", least: longest(rows, 0, "no", 5), wanted: 0, align: "right" }, { head: "between", least: 12, wanted: longest(rows, 1, "between", 30) }, { head: "and", least: 12, wanted: longest(rows, 2, "and", 30) },
      number("drawn", 3), number("worst", 4), number("need", 5), number("margin", 6), { head: "size", least: 9, wanted: 0 },
    ],
  };
}

/** The shares behind a margin and the rule's reason, in the ledger's words. */
function becauseText(gap: Gap, units: SheetUnits): string {
  const shares = ([["movement", gap.shares.movement], ["±", gap.shares.plusMinus], ["growth", gap.shares.growth]] as const).filter(([, mm]) => Math.abs(mm) > 0.05).map(([name, mm]) => `${name} ${gapText(mm, units)}`);
  const open = (gap.notCovered ?? []).map((what) => `${what} not covered`);
  return [gap.why || "default gap", ...shares, ...(gap.provisional ? ["estimated size"] : []), ...open].join(", ");
}

/** Names of parts, tyres, runs, shafts and rooms by the keys that gaps use. */
export function namesOf(layout: Layout): Map<string, string> {
  const names = new Map<string, string>();
  for (const wheel of ["front-left", "front-right", "rear-left", "rear-right"]) names.set(`tyre-${wheel}`, `${wheel[0]!.toUpperCase()}${wheel.slice(1).replace("-", " ")} tyre`);
  for (const list of [layout.parts, layout.runs, layout.shafts]) for (const one of list) names.set(one.key, one.name);
  for (const part of layout.parts) for (const room of part.roomFor) names.set(`${part.key}.${room.key}`, room.name);
  return names;
}

/** Runs and shafts with diameter and developed length, mm or inches; null where there are none. */
export function runsTable(layout: Layout, units: SheetUnits): Table | null {
  if (layout.runs.length + layout.shafts.length === 0) return null;
  const rows = layout.runs.map((run, index): Row => {
    const path = tubePath(run);
    return { of: run.key, cells: [{ text: `R${index + 1}`, bold: true }, run.name, run.kind, placeText(run.diameter, units === "mm" ? "mm" : "in"), path.bends.length === 0 ? "" : String(path.bends.length), placeText(path.length, units)] };
  });
  layout.shafts.forEach((shaft, index) => {
    const length = Math.hypot(...shaft.inboard.map((v, i) => v - shaft.outboard[i]!));
    rows.push({ of: shaft.key, cells: [{ text: `S${index + 1}`, bold: true }, shaft.name, "shaft", shaft.diameter === undefined ? "" : placeText(shaft.diameter, units === "mm" ? "mm" : "in"), "", placeText(length, units)] });
  });
  return {
    title: "Runs and shafts", note: `lengths along the centre line as drawn; ${placeNote(units)}`, rows,
    columns: [
      { head: "no", least: longest(rows, 0, "no", 5), wanted: 0 }, { head: "run", least: 12, wanted: longest(rows, 1, "run", 36) }, { head: "kind", least: 8, wanted: 0 },
      { head: "Ø", least: longest(rows, 3, "Ø", 8), wanted: 0, align: "right" }, { head: "bends", least: 5, wanted: 0, align: "right" }, { head: "length", least: longest(rows, 5, "length", 10), wanted: 0, align: "right" },
    ],
  };
}

/** Stance, mass and free litres, each with what governs it. */
export function figuresTable(layout: Layout, report: SheetReport, zero: Zero, units: SheetUnits): Table | null {
  const rows: Row[] = [];
  const names = namesOf(layout);
  const governs = (key: string | undefined) => (key === undefined ? [] : [key === "body" ? "body" : (names.get(key) ?? key)]);
  const add = (what: string, value: string, by: readonly string[] = []) => rows.push({ cells: [[what, ...by].join(", "), value] });
  const { body, mass, spaces } = report;
  if (body) {
    const length = (mm: number | null) => (mm === null ? "not known" : placeText(mm, units));
    const angle = (deg: number | null) => (deg === null ? "not known" : `${deg.toFixed(1)}°`);
    add("wheelbase", length(body.wheelbase));
    add("length over all", length(body.length));
    add("front overhang", length(body.frontOverhang), governs(body.governs.frontOverhang));
    const limit = layout.body.overhangLimit;
    const share = body.rearOverhangShare === null ? [] : [`${(100 * body.rearOverhangShare).toFixed(1)} % of wheelbase`];
    add("rear overhang", length(body.rearOverhang), [...governs(body.governs.rearOverhang), ...share]);
    if (limit) {
      const over = body.rearOverhang === null ? null : body.rearOverhang - limit.share * body.wheelbase;
      add(`its limit, ${Number((100 * limit.share).toFixed(1))} %`, length(limit.share * body.wheelbase), over === null ? [] : [over > 1e-9 ? `over by ${gapText(over, units)}` : `${gapText(-over, units)} left`]);
    }
    add("approach angle", angle(body.approachAngle), governs(body.governs.approachAngle));
    add("departure angle", angle(body.departureAngle), governs(body.governs.departureAngle));
    add("breakover angle", angle(body.breakoverAngle), governs(body.governs.breakoverAngle));
    add("ground clearance", length(body.groundClearance), governs(body.governs.groundClearance));
  }
  if (mass) {
    add("mass, kg", mass.total.toFixed(1), mass.missing.length === 0 ? [] : [`${mass.missing.length} ${mass.missing.length === 1 ? "part" : "parts"} without one`]);
    if (mass.centre) {
      add("on the front axle, kg", mass.frontAxle.toFixed(1));
      add("on the rear axle, kg", mass.rearAxle.toFixed(1));
      mass.centre.forEach((at, i) => add(`centre of mass ${"xyz"[i]!}`, placeText(at - zero.at[i]!, units)));
    }
  }
  const spaceNames = new Map(layout.spaces.map((space) => [space.key, space.name]));
  for (const space of spaces ?? []) add(`${spaceNames.get(space.key) ?? space.key}, free litres of ${space.grossLitres.toFixed(1)}`, space.freeLitres.toFixed(1));
  if (rows.length === 0) return null;
  return {
    title: "Figures", note: `as drawn, at ride height; ${units === "mm" ? "mm" : "inches"}`, rows,
    columns: [{ head: "what, governed by", least: 22, wanted: longest(rows, 0, "what, governed by", 60) }, { head: "value", least: longest(rows, 1, "value", 14), wanted: 0, align: "right" }],
  };
}

/** Datums with their places from the chosen zero. */
export function datumsTable(datums: readonly SheetDatum[], zero: Zero, units: SheetUnits): Table {
  const index = { x: 0, y: 1, z: 2 } as const;
  const rows = datums.map((datum): Row => ({ of: datum.key, cells: [{ text: datum.code, bold: true }, datum.name, datum.axis, placeText(datum.at - zero.at[index[datum.axis]], units)] }));
  return {
    title: "Datums", note: placeNote(units), rows,
    columns: [{ head: "no", least: longest(rows, 0, "no", 5), wanted: 0 }, { head: "datum", least: 12, wanted: longest(rows, 1, "datum", 40) }, { head: "along", least: 5, wanted: 0 }, { head: "at", least: longest(rows, 3, "at", 12), wanted: 0, align: "right" }],
  };
}
