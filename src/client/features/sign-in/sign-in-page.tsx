import { useState, type FormEvent } from "react";
import { Navigate, useLocation } from "react-router-dom";
import { CallError } from "../../api/call-error.ts";
import { paths } from "../../app/paths.ts";
import { useMe, useSignIn } from "../../app/session.queries.ts";
import { PageLoading } from "../../app/signed-in.tsx";
import { useTheme, useTitle } from "../../app/theme.ts";
import { Button } from "../../ui/button.tsx";
import { TextField } from "../../ui/field.tsx";
import { HandbreadthMark } from "../../ui/mark.tsx";
import { TroubleNote } from "../../ui/states.tsx";
import { HandbreadthDrawing } from "./handbreadth-drawing.tsx";

export default function SignInPage() {
  const me = useMe();
  const signIn = useSignIn();
  const from = (useLocation().state as { from?: string } | null)?.from ?? paths.builds;
  useTheme();
  useTitle("Sign in");
  if (me.isPending) return <PageLoading />;
  if (me.data?.person) return <Navigate to={from} replace />;
  const demo = me.data?.demo ?? [];
  return (
    <main id="main" className="grid min-h-full lg:grid-cols-[minmax(0,5fr)_minmax(0,6fr)]">
      <div className="flex flex-col justify-between gap-10 border-hair px-6 py-10 sm:px-12 lg:border-r lg:px-[clamp(48px,5vw,96px)] lg:py-16">
        <div className="flex items-center gap-3 text-xl font-semibold"><HandbreadthMark size={30} /> Handbreadth</div>
        <HandbreadthDrawing />
        <div className="max-w-[46ch]">
          <h1 className="mb-3 text-3xl font-semibold leading-tight sm:text-4xl">Does it fit, and what is the smallest gap?</h1>
          <p className="text-lg text-pencil">For cars that are built once. Draw parts flat, from above and from the side, with a tape measure; every gap between them is checked in true 3D, as drawn, when things move, and when the tape was off.</p>
        </div>
      </div>
      <div className="flex flex-col justify-center gap-12 px-6 py-10 sm:px-12 lg:px-[clamp(48px,5vw,96px)] lg:py-16">
        {me.isError && <TroubleNote error={me.error} again={() => void me.refetch()} title="The server does not answer" />}
        {demo.length > 0 && (
          <section aria-labelledby="demo" className="max-w-[720px]">
            <h2 id="demo" className="caption">Look round the demo build as</h2>
            <p className="mb-5 text-pencil">A two-seat shooting brake with honest problems in it. Everything in it is invented; poke at anything.</p>
            <ul className="grid gap-5 sm:grid-cols-2">
              {demo.map((one) => (
                <li key={one.email}>
                  <button type="button" disabled={signIn.isPending} onClick={() => signIn.mutate({ email: one.email })} className="torn group h-full w-full px-4 pb-3 pt-4 text-left hover:shadow-[inset_0_0_0_1px_var(--ink)] disabled:opacity-60">
                    <span className="flex items-baseline justify-between gap-3"><span className="text-xl font-semibold capitalize">{one.role}</span><span className="text-sm text-pencil">{one.name}</span></span>
                    <span className="mt-1 block border-t border-hair pt-1.5 leading-snug text-pencil">{one.says}</span>
                  </button>
                </li>
              ))}
            </ul>
            {signIn.isError && signIn.variables.password === undefined && <p role="alert" className="mt-3 text-short">{signIn.error.message}</p>}
          </section>
        )}
        {!me.isError && <SignInForm signIn={signIn} heading={demo.length > 0 ? "Or sign in with your own address" : "Sign in"} />}
      </div>
    </main>
  );
}

function SignInForm({ signIn, heading }: { signIn: ReturnType<typeof useSignIn>; heading: string }) {
  const [email, setEmail] = useState("");
  const [password, setPassword] = useState("");
  const [missing, setMissing] = useState<{ email?: string; password?: string }>({});
  const error = signIn.isError && signIn.variables.password !== undefined ? signIn.error : null;
  const at = (path: string) => (error instanceof CallError ? error.at(path) : undefined);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const next = { ...(/.+@.+/.test(email.trim()) ? {} : { email: "a mail address is needed, such as you@example.test" }), ...(password === "" ? { password: "the password is needed" } : {}) };
    setMissing(next);
    if (Object.keys(next).length === 0) signIn.mutate({ email: email.trim(), password });
  };
  const whole = error && !at("email") && !at("password") ? error.message : undefined;
  return (
    <form onSubmit={submit} noValidate aria-label="Sign in" className="w-full max-w-[720px]">
      <h2 className="caption mb-4">{heading}</h2>
      <div className="grid items-start gap-x-6 gap-y-4 sm:grid-cols-[1fr_1fr_auto]">
        <TextField label="Mail address" type="email" autoComplete="username" value={email} onChange={setEmail} error={missing.email ?? at("email")} />
        <TextField label="Password" type="password" autoComplete="current-password" value={password} onChange={setPassword} error={missing.password ?? at("password") ?? whole} />
        <Button type="submit" look="main" className="sm:mt-4" disabled={signIn.isPending}>{signIn.isPending ? "Signing in …" : "Sign in"}</Button>
      </div>
    </form>
  );
}
