import { useSyncExternalStore } from "react";

const query = "(max-width: 899px)";

/** Too narrow for the drawing and its ticket side by side: tablets upright, telephones. */
export function useNarrow(): boolean {
  return useSyncExternalStore((notify) => {
    const media = matchMedia(query);
    media.addEventListener("change", notify);
    return () => media.removeEventListener("change", notify);
  }, () => matchMedia(query).matches);
}
