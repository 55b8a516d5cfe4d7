import { useState, type FormEvent } from "react";
import { Navigate, useLocation } from "react-router-dom";
import { useMe, useSignIn } from "../../app/session.queries.ts";
import { paths } from "../../app/paths.ts";
import { useTheme } from "../../app/shell.tsx";
import { Button, Field, FIELD, Trouble, Waiting } from "../../ui/controls.tsx";
import { HandbreadthMark } from "../../ui/mark.tsx";

export default function SignInPage() {
  const me = useMe();
  const signIn = useSignIn();
  const from = (useLocation().state as { from?: string } | null)?.from ?? paths.builds;
  const [email, setEmail] = useState("");
  const [password, setPassword] = useState("");
  useTheme();
  if (me.isPending) return <Waiting what="the sign-in" />;
  if (me.isError) return <Trouble error={me.error} retry={() => void me.refetch()} />;
  if (me.data.person) return <Navigate to={from} replace />;
  const submit = (event: FormEvent) => {
    event.preventDefault();
    signIn.mutate({ email, password });
  };
  return (
    <main className="mx-auto grid min-h-full max-w-5xl content-center gap-x-16 gap-y-10 px-6 py-12 md:grid-cols-[1fr_340px]">
      <div>
        <h1 className="mb-3 flex items-center gap-4 text-4xl font-semibold"><HandbreadthMark size={44} /> Handbreadth</h1>
        <p className="mb-8 max-w-lg text-lg text-pencil">Packaging and clearance checks for one-off cars. Flat drawings in; true 3D gaps, overhangs, litres and dimensioned sheets out.</p>
        {me.data.demo.length > 0 && (
          <section aria-labelledby="demo">
            <h2 id="demo" className="caption mb-3">Look round the demo build as</h2>
            <ul className="grid gap-3 sm:grid-cols-2">
              {me.data.demo.map((one) => (
                <li key={one.email}>
                  <button type="button" disabled={signIn.isPending} onClick={() => signIn.mutate({ email: one.email })} className="h-full w-full border border-ink bg-lit p-4 text-left hover:bg-ink hover:text-film">
                    <span className="block text-lg font-semibold capitalize">{one.role}</span>
                    <span className="block text-sm">{one.name}</span>
                    <span className="mt-2 block text-sm opacity-80">{one.says}</span>
                  </button>
                </li>
              ))}
            </ul>
            <p className="mt-3 text-sm text-pencil">Everything in it is invented.</p>
          </section>
        )}
      </div>
      <form onSubmit={submit} className="self-center border border-ink bg-lit p-6" aria-label="Sign in">
        <h2 className="caption mb-5">Sign in</h2>
        <div className="space-y-4">
          <Field label="Mail address">{(id) => <input id={id} className={FIELD} type="email" required autoComplete="username" value={email} onChange={(event) => setEmail(event.target.value)} />}</Field>
          <Field label="Password" error={signIn.isError ? signIn.error.message : undefined}>{(id) => <input id={id} className={FIELD} type="password" required autoComplete="current-password" value={password} onChange={(event) => setPassword(event.target.value)} />}</Field>
          <Button type="submit" tone="strong" className="w-full" disabled={signIn.isPending}>{signIn.isPending ? "Signing in …" : "Sign in"}</Button>
        </div>
      </form>
    </main>
  );
}
