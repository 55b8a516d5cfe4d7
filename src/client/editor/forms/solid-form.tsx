import type { ReactNode } from "react";
import { solidSchema, type Solid } from "#core/layout/schema.ts";
import { faultsOf } from "#core/layout/parse-layout.ts";
import { Choice, LengthEntry, NumberEntry, type Give } from "./entry.tsx";
import { withAt, type Path } from "./item-form.ts";
import { PointsField } from "./points-field.tsx";
import { newSolid, SOLID_TYPES, SOLID_WORDS, type SolidType } from "./solid-words.ts";
import { TicketRow } from "../ticket/ticket-row.tsx";

const ALONG = [["x", "front to rear"], ["y", "side to side"], ["z", "up and down"]] as const;
const PLANES = [["xy", "from above (x, y), pushed up"], ["xz", "from the side (x, z), pushed across"], ["yz", "from behind (y, z), pushed rearward"]] as const;

/** The sizes of one solid and how it lies in its part. `give` takes the whole changed solid. */
export function SolidForm({ solid, give: giveSolid, disabled, placed = true }: { solid: Solid; give: Give<Solid>; disabled?: boolean; placed?: boolean }) {
  const give = (next: unknown): string | null => {
    const parsed = solidSchema.safeParse(next);
    if (!parsed.success) return faultsOf(parsed.error, next).map((fault) => fault.message)[0] ?? "cannot be taken";
    return giveSolid(parsed.data) ?? null;
  };
  const put = (path: Path, value: unknown) => give(withAt(solid, path, value));
  const length = (label: string, path: Path, mm: number, suffix?: string) => <LengthEntry label={label} suffix={suffix} mm={mm} disabled={disabled} give={(value) => put(path, value)} />;
  const axis = (value: "x" | "y" | "z") => <TicketRow label="lies"><Choice label="Lies" value={value} options={ALONG} disabled={disabled} give={(next) => put(["axis"], next)} /></TicketRow>;
  const three = (label: string, path: Path, at: readonly number[], words: readonly [string, string, string] = ["rear", "right", "up"]) => (
    <TicketRow label={label}>{words.map((word, k) => <LengthEntry key={word} below label={`${label}, ${word}`} suffix={word} mm={at[k]!} disabled={disabled} give={(value) => put([...path, k], value)} />)}</TicketRow>
  );
  const own: Record<SolidType, () => ReactNode> = {
    box: () => solid.type === "box" && three("size", ["size"], solid.size, ["long", "wide", "high"]),
    round: () => solid.type === "round" && <><TicketRow label="size">{length("Diameter", ["diameter"], solid.diameter, "diameter")}{length("Length", ["length"], solid.length, "long")}</TicketRow>{axis(solid.axis)}</>,
    cone: () => solid.type === "cone" && (
      <>
        <TicketRow label="diameters">{length("Diameter at the low end", ["diameters", 0], solid.diameters[0], "low end")}{length("Diameter at the high end", ["diameters", 1], solid.diameters[1], "high end")}</TicketRow>
        <TicketRow label="length">{length("Length", ["length"], solid.length)}</TicketRow>
        {axis(solid.axis)}
      </>
    ),
    oval: () => {
      if (solid.type !== "oval") return null;
      const [first, second] = solid.axis === "x" ? ["across", "high"] : solid.axis === "y" ? ["front to rear", "high"] : ["front to rear", "across"];
      return <><TicketRow label="size">{length("Width", ["width"], solid.width, first)}{length("Height", ["height"], solid.height, second)}</TicketRow><TicketRow label="length">{length("Length", ["length"], solid.length)}</TicketRow>{axis(solid.axis)}</>;
    },
    ball: () => solid.type === "ball" && <TicketRow label="size">{length("Diameter", ["diameter"], solid.diameter, "diameter")}</TicketRow>,
    prism: () => solid.type === "prism" && (
      <>
        <TicketRow label="drawn"><Choice label="Drawn" value={solid.plane} options={PLANES} disabled={disabled} give={(next) => put(["plane"], next)} /></TicketRow>
        <PointsField label="outline" columns={[...solid.plane]} points={solid.outline} disabled={disabled} give={(points) => put(["outline"], points)} />
        <TicketRow label="pushed">{length("Pushed from", ["from"], solid.from, "from")}{length("Pushed to", ["to"], solid.to, "to")}</TicketRow>
      </>
    ),
    outlines: () => solid.type === "outlines" && (
      <>
        <PointsField optional label="from above" columns={["x", "y"]} points={solid.top} disabled={disabled} give={(points) => put(["top"], points)} />
        <PointsField optional label="from the side" columns={["x", "z"]} points={solid.side} disabled={disabled} give={(points) => put(["side"], points)} />
        <PointsField optional label="from behind" columns={["y", "z"]} points={solid.rear} disabled={disabled} give={(points) => put(["rear"], points)} />
        <p className="text-sm text-pencil">Two or three, around one common origin. What lies inside all of them is the part.</p>
      </>
    ),
    bar: () => {
      if (solid.type !== "bar") return null;
      const round = solid.diameter !== undefined;
      return (
        <>
          {three("from", ["from"], solid.from)}
          {three("to", ["to"], solid.to)}
          <TicketRow label="section"><Choice label="Section" value={round ? "round" : "square"} options={[["round", "round tube"], ["square", "rectangular bar"]]} disabled={disabled} give={(next) => {
            const { diameter: _diameter, size: _size, ...rest } = solid;
            return give(next === "round" ? { ...rest, diameter: solid.size?.[0] ?? 40 } : { ...rest, size: [solid.diameter ?? 40, solid.diameter ?? 40] });
          }} /></TicketRow>
          {round ? <TicketRow label="size">{length("Diameter", ["diameter"], solid.diameter!, "diameter")}</TicketRow> : (
            <><TicketRow label="size">{length("Width", ["size", 0], solid.size?.[0] ?? 0, "wide")}{length("Height", ["size", 1], solid.size?.[1] ?? 0, "high")}</TicketRow>
              <TicketRow label="turned"><NumberEntry label="Turned about its own length" value={solid.roll} unit="°" disabled={disabled} give={(value) => put(["roll"], value)} /></TicketRow></>
          )}
        </>
      );
    },
    sheet: () => solid.type === "sheet" && (
      <>
        <SheetRows rows={solid.rows} disabled={disabled} give={(rows) => put(["rows"], rows)} />
        <TicketRow label="thickness">{length("Thickness", ["thickness"], solid.thickness)}</TicketRow>
      </>
    ),
  };
  return (
    <div className="space-y-1">
      <TicketRow label="shape">
        <Choice label="Shape" value={solid.type} options={SOLID_TYPES.map((type) => [type, SOLID_WORDS[type].word] as const)} disabled={disabled} give={(type) => give({ ...newSolid(type), at: solid.at, turn: solid.turn })} />
      </TicketRow>
      {own[solid.type]()}
      {placed && (
        <>
          {three("lies at", ["at"], solid.at)}
          <TicketRow label="turned">{["roll", "pitch", "yaw"].map((word, k) => <NumberEntry key={word} below label={`Turned, ${word}`} suffix={`° ${word}`} unit="°" value={solid.turn[k]!} disabled={disabled} give={(value) => put(["turn", k], value)} />)}</TicketRow>
        </>
      )}
    </div>
  );
}

/** A sheet's grid: rows apart by an empty line would be fragile, so each row is a field of its own. */
function SheetRows({ rows, give, disabled }: { rows: readonly (readonly (readonly number[])[])[]; give: Give<unknown>; disabled?: boolean | undefined }) {
  return (
    <div className="space-y-2">
      {rows.map((row, i) => (
        <PointsField key={i} label={`row ${i + 1} of ${rows.length}`} columns={["x", "y", "z"]} points={row} disabled={disabled} sketch={false} optional give={(points) => give(points === undefined ? rows.filter((_, k) => k !== i) : rows.map((old, k) => (k === i ? points : old)))} />
      ))}
      {!disabled && <button type="button" className="border-b border-hair hover:border-ink" onClick={() => give([...rows, rows[rows.length - 1]!.map((p) => [p[0]! + 100, p[1]!, p[2]!])])}>One more row</button>}
      <p className="text-sm text-pencil">Every row needs the same number of points. An emptied row is taken out.</p>
    </div>
  );
}
