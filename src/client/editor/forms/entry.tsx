import { useId, useRef, useState, type KeyboardEvent } from "react";
import { formatLength, tapeStep } from "#core/units/format-length.ts";
import { parseLength } from "#core/units/parse-length.ts";
import { useBench } from "../bench-context.tsx";

/** A typed text as a value, or what is wrong with it. */
export type Read<T> = (typed: string) => { readonly ok: true; readonly value: T } | { readonly ok: false; readonly message: string };
/** Takes a value; a sentence where it cannot be taken. */
export type Give<T> = (value: T) => string | null | void;

interface EntryProps<T> {
  /** The suffix stands under the line instead: where three share a row. */
  readonly below?: boolean | undefined;
  /** Whole name, for a screen reader: "rear of Rear axle, front face". */
  readonly label: string;
  /** In the line behind what is written: a face, a unit. */
  readonly suffix?: string | undefined;
  readonly text: string;
  readonly read: Read<T>;
  readonly give: Give<T>;
  readonly disabled?: boolean | undefined;
  /** Arrow up and down in the field change it by this. */
  readonly step?: { readonly value: number; readonly by: number; readonly of: (value: number) => T } | undefined;
  readonly words?: boolean;
  readonly placeholder?: string | undefined;
  /** Id of a list of what may be typed. */
  readonly options?: string | undefined;
  /** What the text stands for, shown while nobody types. */
  readonly says?: string | undefined;
}

/**
 * Something to write on, as on a job card: taken with Enter or on leaving, put back with Escape. What cannot be taken stays as typed, with the reason beneath.
 */
export function Entry<T>({ label, suffix, below = false, text, read, give, disabled, step, words = false, placeholder, options, says }: EntryProps<T>) {
  const [typed, setTyped] = useState<string | null>(null);
  const [wrong, setWrong] = useState<string | null>(null);
  const id = useId();
  const escaped = useRef(false);
  const [held, setHeld] = useState(false);
  const take = () => {
    if (typed === null || typed.trim() === text.trim()) {
      setTyped(null);
      setWrong(null);
      return;
    }
    const value = read(typed);
    const refused = value.ok ? give(value.value) : value.message;
    setWrong(refused ?? null);
    if (!refused) setTyped(null);
  };
  const key = (event: KeyboardEvent<HTMLInputElement>) => {
    if (event.key === "Enter") {
      // what is typed is taken first; a form is sent by an Enter of its own
      if (typed !== null) event.preventDefault();
      take();
    } else if (event.key === "Escape" && typed !== null) {
      event.stopPropagation();
      escaped.current = true;
      setTyped(null);
      setWrong(null);
    } else if (step && typed === null && (event.key === "ArrowUp" || event.key === "ArrowDown")) {
      event.preventDefault();
      setWrong(give(step.of(step.value + (event.key === "ArrowUp" ? step.by : -step.by))) ?? null);
    }
  };
  return (
    <div className="min-w-0">
      <div className="relative">
        <input
          aria-label={label}
          aria-invalid={wrong !== null || undefined}
          aria-describedby={wrong ? id : undefined}
          title={suffix ? label : undefined}
          disabled={disabled}
          placeholder={placeholder}
          list={options}
          autoComplete="off"
          spellCheck={false}
          className={`written ${words ? "" : "num font-semibold"}`}
          style={suffix && !below ? { paddingRight: `${suffix.length * 0.42 + 0.6}em` } : undefined}
          value={typed ?? (held ? text : (says ?? text))}
          onChange={(event) => {
            setTyped(event.target.value);
            setWrong(null);
          }}
          onFocus={(event) => {
            setHeld(true);
            if (says === undefined) event.target.select();
          }}
          onBlur={() => {
            if (!escaped.current) take();
            escaped.current = false;
            setHeld(false);
          }}
          onKeyDown={key}
        />
        {suffix && <span aria-hidden="true" className={below ? "block text-sm leading-tight text-pencil" : "pointer-events-none absolute bottom-1 right-0 text-sm text-pencil"}>{suffix}</span>}
      </div>
      {wrong && <p id={id} role="alert" className="mt-0.5 text-sm text-short">{wrong}</p>}
    </div>
  );
}

interface Plain<T> {
  readonly label: string;
  readonly suffix?: string | undefined;
  readonly below?: boolean | undefined;
  readonly give: Give<T>;
  readonly disabled?: boolean | undefined;
}

/** A length in any of the ways people write one; shown in the person's unit. */
export function LengthEntry({ mm, ...rest }: Plain<number> & { readonly mm: number }) {
  const { units } = useBench();
  const read: Read<number> = (typed) => {
    const length = parseLength(typed, units);
    return length.ok ? { ok: true, value: length.mm } : length;
  };
  return <Entry {...rest} text={formatLength(mm, units)} read={read} step={{ value: mm, by: tapeStep(units), of: (value) => value }} />;
}

/** A length that may be left out: an empty field is none. */
export function MaybeLengthEntry({ mm, none = "none", ...rest }: Plain<number | undefined> & { readonly mm: number | undefined; readonly none?: string }) {
  const { units } = useBench();
  const read: Read<number | undefined> = (typed) => {
    if (typed.trim() === "") return { ok: true, value: undefined };
    const length = parseLength(typed, units);
    return length.ok ? { ok: true, value: length.mm } : length;
  };
  return <Entry {...rest} text={mm === undefined ? "" : formatLength(mm, units)} placeholder={none} read={read} />;
}

const numberText = (value: number, decimals: number) => String(Number(value.toFixed(decimals)));

function readNumber(typed: string, units: readonly string[]): number | null {
  let plain = typed.trim().replace(",", ".").replace("\u2212", "-");
  for (const unit of units) if (plain.toLowerCase().endsWith(unit.toLowerCase())) plain = plain.slice(0, -unit.length).trim();
  const value = Number(plain);
  return plain !== "" && Number.isFinite(value) ? value : null;
}

/** A number with a fixed unit: degrees, kilograms, litres. */
export function NumberEntry({ value, unit, decimals = 1, step = 1, ...rest }: Plain<number> & { readonly value: number; readonly unit: string; readonly decimals?: number; readonly step?: number }) {
  const read: Read<number> = (typed) => {
    const number = readNumber(typed, [unit, unit.replace("°", "deg")]);
    return number === null ? { ok: false, message: `a number is needed${unit ? `, in ${unit}` : ""}` } : { ok: true, value: number };
  };
  return <Entry {...rest} suffix={rest.suffix ?? (unit || undefined)} text={numberText(value, decimals)} read={read} step={{ value, by: step, of: (next) => Number(next.toFixed(6)) }} />;
}

/** A number that may be left out. */
export function MaybeNumberEntry({ value, unit, decimals = 1, none = "not known", ...rest }: Plain<number | undefined> & { readonly value: number | undefined; readonly unit: string; readonly decimals?: number; readonly none?: string }) {
  const read: Read<number | undefined> = (typed) => {
    if (typed.trim() === "") return { ok: true, value: undefined };
    const number = readNumber(typed, [unit]);
    return number === null ? { ok: false, message: `a number is needed${unit ? `, in ${unit}` : ""}, or nothing` } : { ok: true, value: number };
  };
  return <Entry {...rest} suffix={rest.suffix ?? unit} text={value === undefined ? "" : numberText(value, decimals)} placeholder={none} read={read} />;
}

/** Words. */
export function TextEntry({ value, ...rest }: Plain<string> & { readonly value: string; readonly placeholder?: string }) {
  return <Entry {...rest} words text={value} read={(typed) => ({ ok: true, value: typed.trim() })} />;
}

/** One of some words. */
export function Choice<T extends string>({ label, value, options, give, disabled }: { readonly label: string; readonly value: T; readonly options: readonly (readonly [value: T, word: string])[]; readonly give: Give<T>; readonly disabled?: boolean | undefined }) {
  const [wrong, setWrong] = useState<string | null>(null);
  return (
    <div className="min-w-0">
      <select aria-label={label} disabled={disabled} className="written" value={value} onChange={(event) => setWrong(give(event.target.value as T) ?? null)}>
        {options.map(([key, word]) => <option key={key} value={key}>{word}</option>)}
      </select>
      {wrong && <p role="alert" className="mt-0.5 text-sm text-short">{wrong}</p>}
    </div>
  );
}

/** Yes or no. */
export function Tick({ label, value, give, disabled }: { readonly label: string; readonly value: boolean; readonly give: Give<boolean>; readonly disabled?: boolean | undefined }) {
  return (
    <label className="inline-flex min-h-[30px] items-center gap-2">
      <input type="checkbox" className="size-4 accent-[var(--ink)]" checked={value} disabled={disabled} onChange={(event) => void give(event.target.checked)} />
      {label}
    </label>
  );
}
