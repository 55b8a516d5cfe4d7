// What set-up says goes to stderr, so that a command's own output stays clean.
export const say = (/** @type {string} */ line) => process.stderr.write(`${line}\n`);
