import { useId } from "react";
import { classes } from "./classes.ts";

/** A choice of a few words side by side: one radio group. */
export function Segmented<T extends string>({ label, value, options, onChange, disabled = false, small = false }: {
  label: string; value: T; options: readonly { readonly value: T; readonly label: string; readonly title?: string }[]; onChange: (value: T) => void; disabled?: boolean; small?: boolean;
}) {
  const name = useId();
  return (
    <fieldset disabled={disabled} className="inline-flex border border-ink disabled:opacity-60">
      <legend className="sr-only">{label}</legend>
      {options.map((option, i) => (
        <label key={option.value} title={option.title} className={classes("relative flex cursor-pointer items-center px-2.5 pointer-coarse:min-h-11", small ? "min-h-7 text-sm" : "min-h-9", i > 0 && "border-l border-ink", option.value === value ? "bg-ink text-film" : "hover:bg-part", "has-focus-visible:outline-2 has-focus-visible:outline-offset-2 has-focus-visible:outline-ink")}>
          <input type="radio" name={name} value={option.value} checked={option.value === value} onChange={() => onChange(option.value)} className="absolute inset-0 cursor-pointer opacity-0" />
          {option.label}
        </label>
      ))}
    </fieldset>
  );
}
