import type { Request, Response } from "express";
import { Passport } from "passport";
import { Strategy } from "passport-local";
import type { RateLimiterAbstract } from "rate-limiter-flexible";
import { getMe, setPreferences, signIn, signInDemo, signOut, type Person } from "#contracts/sign-in.contract.ts";
import type { Db } from "../../database/connection.ts";
import { HttpFault, notFound } from "../../http/fault.ts";
import { mount, type Mounted } from "../../http/mount.ts";
import { checkPassword, TooManyChecks } from "./passwords.ts";
import { endSignIn, findCredentials, findDemoPerson, findPerson, insertSignIn, listDemoPeople, updatePreferences } from "./people.repository.ts";

const DEMO_SAYS: Readonly<Record<string, string>> = {
  owner: "The builder: everything, from the first bracket to the last sheet",
  designer: "The body designer: body lines, glass, luggage spaces; reads all",
  fabricator: "The welder and wiring person: what to make next, part status",
  viewer: "The inspector: reads and prints, nothing else",
};

export interface SignInOptions {
  readonly production: boolean;
  /** The session cookie as it is set, so that signing out can take it away. */
  readonly cookie: { readonly name: string; readonly httpOnly: true; readonly sameSite: "lax"; readonly secure: boolean; readonly path: "/" };
  /** Tries by address and by where they come from, counted in PostgreSQL for all app processes. */
  readonly limits: { readonly byAddress: RateLimiterAbstract; readonly byOrigin: RateLimiterAbstract };
}

export function mountSignIn(mounted: Mounted, db: Db, { production, cookie, limits }: SignInOptions): void {
  const strategy = new Strategy({ usernameField: "email", passwordField: "password" }, (email, password, done) => {
    void (async () => {
      const person = await findCredentials(db, email, !production);
      const right = await checkPassword(person?.password_hash ?? null, password);
      return right && person ? person : false;
    })().then((found) => done(null, found), done);
  });
  const passport = new Passport();
  passport.use(strategy);

  mount(mounted, getMe, async ({ personId }) => {
    const demo = production ? [] : await listDemoPeople(db);
    return {
      person: personId ? ((await findPerson(db, personId)) ?? null) : null, production,
      demo: demo.map((d) => ({ name: d.name, email: d.email, role: d.demo_role ?? "", says: DEMO_SAYS[d.demo_role ?? ""] ?? "" })),
    };
  });

  mount(mounted, signIn, async ({ body, request, response }) => {
    await spend(limits.byOrigin, request.ip ?? "");
    await spend(limits.byAddress, body.email.toLowerCase());
    const person = await authenticate(passport, request, response);
    await limits.byAddress.delete(body.email.toLowerCase());
    await begin(request, db, person.id);
    return { person };
  });

  mount(mounted, signInDemo, async ({ body, request }) => {
    const person = production ? undefined : await findDemoPerson(db, body.email);
    if (!person) throw notFound("demo member");
    await begin(request, db, person.id);
    return { person };
  });

  mount(mounted, signOut, async ({ request, response }) => {
    await endSignIn(db, request.asker!.signInId);
    request.log.info({ event: "signed-out", personId: request.asker!.personId });
    await new Promise<void>((resolve) => request.session.destroy(() => resolve()));
    const { name, ...options } = cookie;
    response.clearCookie(name, options);
    return { signedOut: true as const };
  });

  mount(mounted, setPreferences, ({ personId, body }) => updatePreferences(db, personId, body));
}

async function spend(limit: RateLimiterAbstract, key: string): Promise<void> {
  try {
    await limit.consume(key);
  } catch (refused) {
    if (refused instanceof Error) throw refused;
    const seconds = Math.ceil((refused as { msBeforeNext: number }).msBeforeNext / 1000);
    throw new HttpFault("too-many", `Too many tries. Wait ${seconds > 90 ? `${Math.ceil(seconds / 60)} minutes` : `${seconds} seconds`} and try again.`, { retryAfter: seconds });
  }
}

function authenticate(passport: InstanceType<typeof Passport>, request: Request, response: Response): Promise<Person> {
  return new Promise((resolve, reject) => {
    const done = (error: unknown, found: (Person & { password_hash?: string }) | false) => {
      if (error instanceof TooManyChecks) return reject(new HttpFault("busy", "Many people are signing in. Try again in a moment.", { retryAfter: 2 }));
      if (error) return reject(error instanceof Error ? error : new Error(String(error)));
      if (!found) return reject(new HttpFault("wrong-sign-in", "The address and the password do not go together."));
      const { id, name, email, units, theme } = found;
      resolve({ id, name, email, units, theme });
    };
    (passport.authenticate("local", { session: false }, done) as (request: Request, response: Response, next: (error?: unknown) => void) => void)(request, response, (error) => reject(error instanceof Error ? error : new Error("sign-in fell through")));
  });
}

/** A new session id and a sign-in row of its own. */
async function begin(request: Request, db: Db, personId: string): Promise<void> {
  const signInId = await insertSignIn(db, personId);
  await new Promise<void>((resolve, reject) => request.session.regenerate((error: unknown) => (error ? reject(error instanceof Error ? error : new Error(String(error))) : resolve())));
  request.session.signInId = signInId;
  request.log.info({ event: "signed-in", personId });
  await new Promise<void>((resolve, reject) => request.session.save((error: unknown) => (error ? reject(error instanceof Error ? error : new Error(String(error))) : resolve())));
}
