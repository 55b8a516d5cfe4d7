import { useLayoutEffect, useSyncExternalStore } from "react";
import { usePreferences } from "./session.queries.ts";

const dark = typeof matchMedia === "function" ? matchMedia("(prefers-color-scheme: dark)") : null;

/** The theme in force, by the person's choice or the system's; sets it on the page before it is painted. */
export function useTheme(): "light" | "night" {
  const { theme } = usePreferences();
  const systemDark = useSyncExternalStore((notify) => {
    dark?.addEventListener("change", notify);
    return () => dark?.removeEventListener("change", notify);
  }, () => dark?.matches ?? false);
  const inForce = theme === "system" ? (systemDark ? "night" : "light") : theme;
  useLayoutEffect(() => {
    document.documentElement.dataset["theme"] = inForce;
  }, [inForce]);
  return inForce;
}

/** The page's name in the browser's tab. */
export function useTitle(...words: readonly (string | undefined)[]): void {
  const title = [...words.filter(Boolean), "Handbreadth"].join(" · ");
  useLayoutEffect(() => {
    document.title = title;
  }, [title]);
}
