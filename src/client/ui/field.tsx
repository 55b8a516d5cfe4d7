import { useId, type InputHTMLAttributes, type ReactNode } from "react";
import { classes } from "./classes.ts";

/** A label above something to write on, with what is wrong said beneath it. */
export function Field({ label, hint, error, children }: { label: string; hint?: string | undefined; error?: string | undefined; children: (ids: { id: string; describedBy: string | undefined; invalid: boolean }) => ReactNode }) {
  const id = useId();
  const note = error ?? hint;
  return (
    <div>
      <label htmlFor={id} className="block text-sm text-pencil">{label}</label>
      {children({ id, describedBy: note ? `${id}-note` : undefined, invalid: error !== undefined })}
      {note && <p id={`${id}-note`} className={classes("mt-1 text-sm", error ? "text-short" : "text-pencil")} role={error ? "alert" : undefined}>{note}</p>}
    </div>
  );
}

type TextProps = Omit<InputHTMLAttributes<HTMLInputElement>, "onChange" | "value"> & { label: string; hint?: string; error?: string | undefined; value: string; onChange: (value: string) => void };

export function TextField({ label, hint, error, value, onChange, className, ...rest }: TextProps) {
  return (
    <Field label={label} hint={hint} error={error}>
      {({ id, describedBy, invalid }) => (
        <input id={id} aria-describedby={describedBy} aria-invalid={invalid || undefined} className={classes("written text-lg", className)} value={value} onChange={(event) => onChange(event.target.value)} {...rest} />
      )}
    </Field>
  );
}

export function SelectField<T extends string>({ label, value, options, onChange, hint, disabled }: {
  label: string; value: T; options: readonly { readonly value: T; readonly label: string }[]; onChange: (value: T) => void; hint?: string; disabled?: boolean;
}) {
  return (
    <Field label={label} hint={hint}>
      {({ id, describedBy }) => (
        <select id={id} aria-describedby={describedBy} disabled={disabled} className="written text-lg" value={value} onChange={(event) => onChange(event.target.value as T)}>
          {options.map((option) => <option key={option.value} value={option.value}>{option.label}</option>)}
        </select>
      )}
    </Field>
  );
}
