import type { Movement, Part, Run, Source } from "#core/layout/schema.ts";
import { DIRECTION_WORDS, AXES } from "#core/frames.ts";
import { formatLength } from "#core/units/format-length.ts";
import type { LengthUnit } from "#core/units/parse-length.ts";
import { TicketRow } from "../ticket/ticket-row.tsx";
import { SOURCE_CHOICES, sourceWord } from "../ticket/words.ts";
import { Choice, LengthEntry, MaybeNumberEntry, Tick } from "./entry.tsx";
import type { Form, Path } from "./item-form.ts";

type Owner = Form<Part> | Form<Run>;
const putIn = (form: Owner, path: Path, value: unknown, label: string) => form.put(path, value, `${form.value.name}: ${label}`);

export function sourceText(source: Source, units: LengthUnit): string {
  const { plusMinus } = source;
  if (typeof plusMinus === "number") return plusMinus === 0 ? sourceWord(source.how) : `${sourceWord(source.how)}, ± ${formatLength(plusMinus, units)}`;
  return `${sourceWord(source.how)}, each way by itself`;
}

/** Where its size is from, and how far off it may be: all round, or each way by itself. */
export function SourceForm({ form }: { form: Owner }) {
  const { source } = form.value;
  const disabled = !form.may;
  const each = typeof source.plusMinus !== "number";
  const box = typeof source.plusMinus === "number" ? null : source.plusMinus;
  return (
    <>
      <TicketRow label="size from">
        <Choice label="Size from" value={source.how} options={SOURCE_CHOICES} disabled={disabled} give={(how) => putIn(form, ["source", "how"], how, `size from ${sourceWord(how)}`)} />
        {box === null && <LengthEntry label="May be off by, all round" suffix="± all round" mm={source.plusMinus as number} disabled={disabled} give={(mm) => putIn(form, ["source", "plusMinus"], mm, "plus-minus")} />}
      </TicketRow>
      {box && AXES.map((axis) => (
        <TicketRow key={axis} label={`larger ${DIRECTION_WORDS[axis].join(" / ")}`}>
          <LengthEntry label={`May be larger ${DIRECTION_WORDS[axis][0]}, its own axes`} suffix={DIRECTION_WORDS[axis][0]} mm={-box[axis][0]} disabled={disabled} give={(mm) => putIn(form, ["source", "plusMinus", axis, 0], -mm + 0, "plus-minus")} />
          <LengthEntry label={`May be larger ${DIRECTION_WORDS[axis][1]}, its own axes`} suffix={DIRECTION_WORDS[axis][1]} mm={box[axis][1]} disabled={disabled} give={(mm) => putIn(form, ["source", "plusMinus", axis, 1], mm, "plus-minus")} />
        </TicketRow>
      ))}
      {!disabled && (
        <Tick label="each way by itself, in its own axes" value={each} give={(on) => {
          const most = box ? Math.max(...AXES.flatMap((axis) => [-box[axis][0], box[axis][1]])) : (source.plusMinus as number);
          return putIn(form, ["source", "plusMinus"], on ? { x: [-most + 0, most], y: [-most + 0, most], z: [-most + 0, most] } : most, "plus-minus");
        }} />
      )}
    </>
  );
}

export function movementText(movement: Movement, units: LengthUnit): string {
  const parts = AXES.filter((axis) => movement[axis][0] !== 0 || movement[axis][1] !== 0).map((axis) => {
    const [low, high] = movement[axis];
    const words = DIRECTION_WORDS[axis];
    return -low === high ? `${words.join("/")} ${formatLength(high, units)}` : [low < 0 && `${words[0]} ${formatLength(-low, units)}`, high > 0 && `${words[1]} ${formatLength(high, units)}`].filter(Boolean).join(", ");
  });
  return parts.length > 0 ? parts.join("; ") : "does not move by itself";
}

/** How far it moves against what carries it, each way. */
export function MovementForm({ form }: { form: Owner }) {
  const { movement } = form.value;
  return (
    <>
      {AXES.map((axis) => (
        <TicketRow key={axis} label={`moves ${DIRECTION_WORDS[axis].join(" / ")}`}>
          {([0, 1] as const).map((end) => (
            <LengthEntry key={end} label={`Moves ${DIRECTION_WORDS[axis][end]}`} suffix={DIRECTION_WORDS[axis][end]} mm={end === 0 ? -movement[axis][0] + 0 : movement[axis][1]} disabled={!form.may}
              give={(mm) => (mm < 0 ? "a way to move is not less than nothing" : putIn(form, ["movement", axis, end], end === 0 ? -mm + 0 : mm, `moves ${DIRECTION_WORDS[axis][end]}`))} />
          ))}
        </TicketRow>
      ))}
    </>
  );
}

export function heatText(heat: Part["heat"]): string {
  if (!heat) return "not given";
  return [heat.surface !== undefined && `surface ${heat.surface} °C`, heat.limit !== undefined && `stands ${heat.limit} °C`].filter(Boolean).join(", ");
}

/** Surface temperature and what it stands; neither means nothing is said about heat. */
export function HeatForm({ form }: { form: Owner }) {
  const heat = form.value.heat;
  const put = (key: "surface" | "limit" | "emissivity", value: number | undefined) => {
    const next: Record<string, unknown> = { ...heat, [key]: value };
    for (const name of Object.keys(next)) if (next[name] === undefined) delete next[name];
    const bare = next["surface"] === undefined && next["limit"] === undefined;
    return putIn(form, ["heat"], bare ? undefined : next, key === "surface" ? "surface temperature" : key === "limit" ? "heat limit" : "emissivity");
  };
  return (
    <>
      <TicketRow label="surface"><MaybeNumberEntry label="Surface temperature" unit="°C" value={heat?.surface} none="not hot" disabled={!form.may} give={(value) => put("surface", value)} /></TicketRow>
      <TicketRow label="stands"><MaybeNumberEntry label="Highest temperature it stands" unit="°C" value={heat?.limit} none="no limit given" disabled={!form.may} give={(value) => put("limit", value)} /></TicketRow>
      {heat?.surface !== undefined && <TicketRow label="emissivity"><MaybeNumberEntry label="Emissivity, 0 to 1" unit="" decimals={3} value={heat.emissivity} none="by its kind" disabled={!form.may} give={(value) => put("emissivity", value)} /></TicketRow>}
      <p className="pt-1 text-sm text-pencil">Temperatures here are what you were told or measured. Check them on the running car; follow the part maker.</p>
    </>
  );
}
