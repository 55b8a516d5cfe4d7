import { hash, verify } from "@node-rs/argon2";

/** argon2id by its number: the package's constant is a compile-time enum. */
const ARGON2ID = 2;
/** OWASP Password Storage Cheat Sheet: argon2id, 19 MiB, 2 passes, 1 lane. */
const OPTIONS = { algorithm: ARGON2ID, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;
/** More than this at once would starve everything else on two cores. */
const AT_ONCE = 2;
const MOST_WAITING = 40;

let running = 0;
const waiting: (() => void)[] = [];

export class TooManyChecks extends Error {}

async function inTurn<T>(work: () => Promise<T>): Promise<T> {
  if (running >= AT_ONCE) {
    if (waiting.length >= MOST_WAITING) throw new TooManyChecks();
    await new Promise<void>((resolve) => waiting.push(resolve));
  }
  running++;
  try {
    return await work();
  } finally {
    running--;
    waiting.shift()?.();
  }
}

export const hashPassword = (password: string): Promise<string> => inTurn(() => hash(password, OPTIONS));

let dummy: Promise<string> | null = null;

/** True for the right password. An unknown address (null) costs the same as a wrong password. */
export async function checkPassword(stored: string | null, password: string): Promise<boolean> {
  dummy ??= hashPassword(crypto.randomUUID());
  const against = stored ?? (await dummy);
  const right = await inTurn(() => verify(against, password));
  return stored !== null && right;
}
