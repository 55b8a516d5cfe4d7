/** Class names that hold, in one string. */
export const classes = (...names: readonly (string | false | null | undefined)[]): string => names.filter(Boolean).join(" ");
