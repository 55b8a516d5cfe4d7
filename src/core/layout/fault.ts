/** Something wrong with an input, at its place: `parts[3].solids[0].outline[2]`. The empty path is the whole. */
export interface Fault {
  readonly path: string;
  readonly message: string;
}

/** A path of keys and indexes as people read it. */
export function pathText(path: readonly PropertyKey[]): string {
  return path.reduce<string>((text, step) => (typeof step === "number" ? `${text}[${step}]` : text === "" ? String(step) : `${text}.${String(step)}`), "");
}
