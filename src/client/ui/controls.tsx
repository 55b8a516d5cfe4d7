import { useEffect, useId, useRef, useState, type ButtonHTMLAttributes, type ReactNode } from "react";
import { formatLength } from "#core/units/format-length.ts";
import { parseLength, type LengthUnit } from "#core/units/parse-length.ts";

type Tone = "plain" | "strong" | "quiet" | "danger";
const TONES: Readonly<Record<Tone, string>> = {
  plain: "border border-ink bg-transparent hover:bg-ink hover:text-film",
  strong: "border border-ink bg-ink text-film hover:bg-pencil",
  quiet: "border border-transparent text-pencil hover:text-ink hover:border-hair",
  danger: "border border-short text-short hover:bg-short hover:text-film",
};

export function Button({ tone = "plain", small, className = "", ...rest }: { tone?: Tone; small?: boolean } & ButtonHTMLAttributes<HTMLButtonElement>) {
  return <button type="button" {...rest} className={`${small ? "min-h-7 px-2 text-sm" : "min-h-9 px-4"} font-semibold transition-colors disabled:pointer-events-none ${TONES[tone]} ${className}`} />;
}

export const FIELD = "min-h-8 w-full border-0 border-b border-ink bg-transparent px-1 outline-none focus-visible:bg-lit disabled:border-hair disabled:text-pencil";

export function Field({ label, hint, error, children }: { label: ReactNode; hint?: ReactNode; error?: string | undefined; children: (id: string) => ReactNode }) {
  const id = useId();
  return (
    <div className="min-w-0">
      <label htmlFor={id} className="flex items-baseline justify-between gap-2 text-sm text-pencil"><span>{label}</span>{hint && <span className="text-xs">{hint}</span>}</label>
      {children(id)}
      {error && <p role="alert" className="mt-0.5 text-sm text-short">{error}</p>}
    </div>
  );
}

/**
 * A number typed as people write it and given when it is finished (Enter or leaving the field); Escape puts it back. `read` turns text into a value or a sentence.
 */
export function EntryField({ id, text, read, onGive, disabled, label, className = "" }: {
  id?: string; text: string; read: (typed: string) => { ok: true; value: number } | { ok: false; message: string }; onGive: (value: number) => void; disabled?: boolean; label?: string; className?: string;
}) {
  const [typed, setTyped] = useState<string | null>(null);
  const [error, setError] = useState<string | null>(null);
  const give = () => {
    if (typed === null || typed === text) return setTyped(null);
    const value = read(typed);
    if (!value.ok) return setError(value.message);
    setTyped(null);
    setError(null);
    onGive(value.value);
  };
  return (
    <span className="block">
      <input
        id={id}
        aria-label={label}
        aria-invalid={error !== null}
        title={error ?? undefined}
        disabled={disabled}
        inputMode="text"
        autoComplete="off"
        className={`num ${FIELD} ${error ? "border-short" : ""} ${className}`}
        value={typed ?? text}
        onFocus={(event) => event.target.select()}
        onChange={(event) => {
          setTyped(event.target.value);
          setError(null);
        }}
        onBlur={give}
        onKeyDown={(event) => {
          event.stopPropagation();
          if (event.key === "Enter") give();
          if (event.key === "Escape") {
            setTyped(null);
            setError(null);
          }
        }}
      />
      {error && <span role="alert" className="block text-xs text-short">{error}</span>}
    </span>
  );
}

export function LengthField({ mm, units, onGive, ...rest }: { id?: string; mm: number; units: LengthUnit; onGive: (mm: number) => void; disabled?: boolean; label?: string; className?: string }) {
  return (
    <EntryField {...rest} text={formatLength(mm, units)} onGive={onGive} read={(typed) => {
      const read = parseLength(typed, units);
      return read.ok ? { ok: true, value: read.mm } : read;
    }} />
  );
}

export function NumberField({ value, decimals = 1, unit = "", onGive, ...rest }: { id?: string; value: number; decimals?: number; unit?: string; onGive: (value: number) => void; disabled?: boolean; label?: string; className?: string }) {
  return (
    <EntryField {...rest} text={`${Number(value.toFixed(decimals))}${unit}`} onGive={onGive} read={(typed) => {
      const number = Number(typed.replace(/[^\d.eE+-]/g, ""));
      return typed.trim() !== "" && Number.isFinite(number) ? { ok: true, value: number } : { ok: false, message: "a number is needed" };
    }} />
  );
}

/** A dialog over the page: native, so that focus stays inside and Escape closes it. */
export function Dialog({ title, onClose, children, wide }: { title: string; onClose: () => void; children: ReactNode; wide?: boolean }) {
  const ref = useRef<HTMLDialogElement>(null);
  useEffect(() => {
    ref.current?.showModal();
  }, []);
  return (
    <dialog ref={ref} aria-label={title} onClose={onClose} onCancel={onClose} onKeyDown={(event) => event.stopPropagation()}
      className={`m-auto max-h-[88vh] ${wide ? "w-[min(860px,94vw)]" : "w-[min(480px,94vw)]"} border-2 border-ink bg-film p-0 text-ink backdrop:bg-ink/30`}>
      <div className="flex items-baseline justify-between border-b border-hair px-6 py-4">
        <h2 className="text-xl font-semibold">{title}</h2>
        <Button tone="quiet" small onClick={() => ref.current?.close()}>Close</Button>
      </div>
      <div className="px-6 py-5">{children}</div>
    </dialog>
  );
}

/** Asks before something that cannot be taken back; with `word`, the word must be typed. */
export function Confirm({ title, says, action, word, onConfirm, onClose }: { title: string; says: ReactNode; action: string; word?: string; onConfirm: () => void; onClose: () => void }) {
  const [typed, setTyped] = useState("");
  return (
    <Dialog title={title} onClose={onClose}>
      <div className="space-y-4">
        <p>{says}</p>
        {word && <Field label={<>Type <b className="text-ink">{word}</b> to confirm</>}>{(id) => <input id={id} className={FIELD} value={typed} onChange={(event) => setTyped(event.target.value)} autoComplete="off" />}</Field>}
        <div className="flex justify-end gap-3"><Button tone="quiet" onClick={onClose}>Keep it</Button><Button tone="danger" disabled={word !== undefined && typed !== word} onClick={() => { onConfirm(); onClose(); }}>{action}</Button></div>
      </div>
    </Dialog>
  );
}

export function Waiting({ what }: { what: string }) {
  return <p role="status" className="p-8 text-pencil">Fetching {what} …</p>;
}

export function Trouble({ error, retry }: { error: unknown; retry?: () => void }) {
  return (
    <div role="alert" className="m-8 max-w-xl border border-short p-5">
      <p className="font-semibold text-short">{error instanceof Error ? error.message : "Something went wrong."}</p>
      {error instanceof Error && "requestId" in error && typeof error.requestId === "string" && <p className="num mt-1 text-sm text-pencil">request {error.requestId}</p>}
      {retry && <Button className="mt-4" onClick={retry}>Try again</Button>}
    </div>
  );
}
