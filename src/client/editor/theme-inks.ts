import type { Verdict } from "#core/gaps/gap.ts";

/** The inks of the drawing, read from the page's theme. */
export interface Inks {
  readonly film: string; readonly lit: string; readonly part: string; readonly ink: string; readonly pencil: string; readonly hair: string; readonly heat: string; readonly datum: string;
  readonly hotFill: string; readonly loom: string; readonly clear: string; readonly tight: string;
  readonly verdict: Readonly<Record<Verdict, string>>;
}

export function readInks(): Inks {
  const style = getComputedStyle(document.documentElement);
  const ink = (name: string) => style.getPropertyValue(`--${name}`).trim();
  const [touch, rub, short, tight, clear] = ["touch", "rub", "short", "tight", "clear"].map(ink) as [string, string, string, string, string];
  return {
    film: ink("film"), lit: ink("lit"), part: ink("part"), ink: ink("ink"), pencil: ink("pencil"), hair: ink("hair"), heat: ink("heat"), datum: ink("datum"), hotFill: ink("hot-fill"), loom: ink("loom"),
    clear, tight, verdict: { touch, rub, short, tight, clear },
  };
}
