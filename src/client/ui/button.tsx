import type { ButtonHTMLAttributes } from "react";
import { Link, type LinkProps } from "react-router-dom";
import { classes } from "./classes.ts";

/** main: what one came for; plain: the others; quiet: a word in a line; danger: what cannot be taken back. */
export type ButtonKind = "main" | "plain" | "quiet" | "danger";

const LOOKS: Record<ButtonKind, string> = {
  main: "border border-ink bg-ink text-film hover:bg-film hover:text-ink px-4 min-h-9 font-semibold",
  plain: "border border-ink bg-transparent hover:bg-ink hover:text-film px-4 min-h-9 font-semibold",
  quiet: "border-b border-hair hover:border-ink px-0.5 min-h-6",
  danger: "border border-short text-short hover:bg-short hover:text-film px-4 min-h-9 font-semibold",
};
const BASE = "inline-flex items-center justify-center gap-2 whitespace-nowrap disabled:opacity-45 disabled:pointer-events-none pointer-coarse:min-h-11";

export function Button({ look = "plain", className, type = "button", ...rest }: ButtonHTMLAttributes<HTMLButtonElement> & { look?: ButtonKind }) {
  return <button type={type} className={classes(BASE, LOOKS[look], className)} {...rest} />;
}

export function ButtonLink({ look = "plain", className, ...rest }: LinkProps & { look?: ButtonKind }) {
  return <Link className={classes(BASE, LOOKS[look], className)} {...rest} />;
}
