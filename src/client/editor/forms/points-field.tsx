import { useId, useState } from "react";
import { formatLength } from "#core/units/format-length.ts";
import { parseLength, type LengthUnit } from "#core/units/parse-length.ts";
import { useBench } from "../bench-context.tsx";
import type { Give } from "./entry.tsx";

type Point = readonly number[];

/** Points as lines of text: numbers apart by commas, semicolons or tabs, as a spreadsheet or a person gives them. */
export function pointsText(points: readonly Point[], units: LengthUnit): string {
  return points.map((point) => point.map((value) => formatLength(value, units, units === "mm" ? (Number.isInteger(value) ? 0 : 2) : undefined)).join(", ")).join("\n");
}

/**
 * Reads lines of points. A line may also be numbers apart by spaces where none of them is a fraction with a space. A line that stands as it was written out keeps the exact
 * point behind it: editing one line rounds no other.
 */
export function readPoints(text: string, width: number, units: LengthUnit, before: readonly Point[] = []): { readonly ok: true; readonly points: number[][] } | { readonly ok: false; readonly message: string } {
  const points: number[][] = [];
  const exact = new Map(before.map((point) => [pointsText([point], units), [...point]]));
  const lines = text.split("\n");
  for (const [i, line] of lines.entries()) {
    if (line.trim() === "") continue;
    const known = exact.get(line.trim());
    if (known) {
      points.push(known);
      continue;
    }
    const bare = line.trim().replace(/[,;\t]\s*$/, "");
    const apart = /[;\t]/.test(bare) ? bare.split(/[;\t]/) : bare.includes(", ") || (bare.match(/,/g)?.length ?? 0) === width - 1 ? bare.split(",") : bare.split(/\s+/);
    if (apart.length !== width) return { ok: false, message: `line ${i + 1}: ${width} numbers are needed, such as "${Array.from({ length: width }, (_, k) => (k + 1) * 100).join(", ")}"; found ${apart.length}` };
    const point: number[] = [];
    for (const one of apart) {
      const value = parseLength(one, units);
      if (!value.ok) return { ok: false, message: `line ${i + 1}: ${value.message}` };
      point.push(value.mm);
    }
    points.push(point);
  }
  return { ok: true, points };
}

/** A small drawing of flat points: second number up. */
export function OutlineSketch({ points, closed = true, height = 72 }: { points: readonly Point[]; closed?: boolean; height?: number }) {
  if (points.length < 2) return null;
  const us = points.map((p) => p[0]!);
  const vs = points.map((p) => p[1]!);
  const [left, right, low, high] = [Math.min(...us), Math.max(...us), Math.min(...vs), Math.max(...vs)];
  const across = Math.max(right - left, 1e-6);
  const tall = Math.max(high - low, 1e-6);
  const scale = Math.min((height * 2.4) / across, (height - 8) / tall);
  const d = points.map((p, i) => `${i ? "L" : "M"}${((p[0]! - left) * scale + 4).toFixed(1)} ${((high - p[1]!) * scale + 4).toFixed(1)}`).join("") + (closed ? "Z" : "");
  return (
    <svg width={across * scale + 8} height={tall * scale + 8} aria-hidden="true" className="mt-1 max-w-full">
      <path d={d} fill={closed ? "var(--part)" : "none"} stroke="var(--ink)" strokeWidth="1" />
    </svg>
  );
}

/** Points typed or pasted as lines; taken on leaving. Empty lines do not count; where it may be left out, nothing at all means none. */
export function PointsField({ label, columns, points, give, disabled, optional = false, closed = true, sketch = true }: {
  label: string; columns: readonly string[]; points: readonly Point[] | undefined; give: Give<number[][] | undefined>; disabled?: boolean; optional?: boolean; closed?: boolean; sketch?: boolean;
}) {
  const { units } = useBench();
  const [typed, setTyped] = useState<string | null>(null);
  const [wrong, setWrong] = useState<string | null>(null);
  const id = useId();
  const text = points ? pointsText(points, units) : "";
  const shown = typed ?? text;
  const read = readPoints(shown, columns.length, units, points);
  const take = () => {
    if (typed === null || typed.trim() === text.trim()) {
      setTyped(null);
      setWrong(null);
      return;
    }
    if (!read.ok) return setWrong(read.message);
    const refused = give(read.points.length === 0 && optional ? undefined : read.points) ?? null;
    setWrong(refused);
    if (!refused) setTyped(null);
  };
  return (
    <div>
      <label htmlFor={id} className="flex items-baseline justify-between gap-2 text-sm text-pencil">
        <span>{label}</span>
        <span>one point a line: {columns.join(", ")}</span>
      </label>
      <textarea
        id={id}
        aria-invalid={wrong !== null || undefined}
        aria-describedby={wrong ? `${id}-note` : undefined}
        disabled={disabled}
        spellCheck={false}
        rows={Math.min(9, Math.max(3, shown.split("\n").length + 1))}
        className="num w-full resize-y border border-hair bg-film px-2 py-1 text-sm aria-invalid:border-short"
        value={shown}
        onChange={(event) => {
          setTyped(event.target.value);
          setWrong(null);
        }}
        onBlur={take}
        onKeyDown={(event) => {
          if (event.key === "Escape" && typed !== null) {
            event.stopPropagation();
            setTyped(null);
            setWrong(null);
          } else if (event.key === "Enter" && (event.ctrlKey || event.metaKey)) take();
        }}
      />
      {wrong && <p id={`${id}-note`} role="alert" className="text-sm text-short">{wrong}</p>}
      {sketch && columns.length === 2 && read.ok && <OutlineSketch points={read.points} closed={closed} />}
    </div>
  );
}
