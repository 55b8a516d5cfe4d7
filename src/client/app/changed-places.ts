/** One place of a thing where two versions differ. */
export interface ChangedPlace {
  /** As in a layout file: at[0], heat.surface. */
  readonly path: string;
  readonly before: unknown;
  readonly mine: unknown;
  readonly theirs: unknown;
}

const isObject = (value: unknown): value is Record<string, unknown> => typeof value === "object" && value !== null && !Array.isArray(value);

/** Places where mine or theirs differ from each other, deepest first named; long lists of points count as one place. */
export function changedPlaces(before: unknown, mine: unknown, theirs: unknown, path = ""): ChangedPlace[] {
  if (JSON.stringify(mine) === JSON.stringify(theirs)) return [];
  const under = (key: string | number) => (typeof key === "number" ? `${path}[${key}]` : path === "" ? key : `${path}.${key}`);
  if (isObject(mine) && isObject(theirs)) {
    const keys = [...new Set([...Object.keys(mine), ...Object.keys(theirs)])];
    return keys.flatMap((key) => changedPlaces(isObject(before) ? before[key] : undefined, mine[key], theirs[key], under(key)));
  }
  if (Array.isArray(mine) && Array.isArray(theirs) && mine.length === theirs.length && mine.length <= 8) {
    return mine.flatMap((one, i) => changedPlaces(Array.isArray(before) ? before[i] : undefined, one, theirs[i], under(i)));
  }
  return [{ path, before, mine, theirs }];
}
