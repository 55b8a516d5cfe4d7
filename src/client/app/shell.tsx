import { useEffect, useSyncExternalStore, type ReactNode } from "react";
import { Link, Navigate, NavLink, Outlet, useLocation } from "react-router-dom";
import type { LengthUnit } from "#core/units/parse-length.ts";
import { Trouble, Waiting } from "../ui/controls.tsx";
import { HandbreadthMark } from "../ui/mark.tsx";
import { paths } from "./paths.ts";
import { useMe, usePreferences, useSignOut, type Theme } from "./session.queries.ts";

const dark = typeof matchMedia === "function" ? matchMedia("(prefers-color-scheme: dark)") : null;

/** The theme in force; sets it on the page. */
export function useTheme(): "light" | "night" {
  const { theme } = usePreferences();
  const systemDark = useSyncExternalStore((notify) => {
    dark?.addEventListener("change", notify);
    return () => dark?.removeEventListener("change", notify);
  }, () => dark?.matches ?? false);
  const inForce = theme === "system" ? (systemDark ? "night" : "light") : theme;
  useEffect(() => {
    document.documentElement.dataset["theme"] = inForce;
  }, [inForce]);
  return inForce;
}

/** Pages for people who are signed in: others are sent to the sign-in and come back. */
export function SignedIn() {
  const me = useMe();
  const location = useLocation();
  useTheme();
  if (me.isPending) return <Waiting what="your desk" />;
  if (me.isError) return <Trouble error={me.error} retry={() => void me.refetch()} />;
  if (!me.data.person) return <Navigate to={paths.signIn} replace state={{ from: location.pathname }} />;
  return <Outlet />;
}

export interface Crumb {
  readonly to: string;
  readonly text: string;
}

export function Header({ crumbs = [], tabs = [], children }: { crumbs?: readonly Crumb[]; tabs?: readonly Crumb[]; children?: ReactNode }) {
  const { units, theme, change } = usePreferences();
  const me = useMe();
  const signOut = useSignOut();
  const initials = (me.data?.person?.name ?? "").split(" ").map((word) => word[0]).join("").slice(0, 2);
  return (
    <header className="no-print flex min-h-[46px] flex-wrap items-center gap-x-6 gap-y-1 border-b border-ink px-4">
      <Link to={paths.builds} className="flex items-center gap-3 py-2 text-lg font-semibold"><HandbreadthMark /> <span className="max-sm:hidden">Handbreadth</span></Link>
      <nav aria-label="Where you are" className="flex min-w-0 gap-5 truncate">
        {crumbs.map((crumb, i) => <Link key={crumb.to} to={crumb.to} className={i === crumbs.length - 1 ? "truncate font-semibold" : "truncate text-pencil hover:text-ink"}>{crumb.text}</Link>)}
      </nav>
      {tabs.length > 0 && (
        <nav aria-label="Desk" className="flex gap-5 self-stretch pl-4">
          {tabs.map((tab) => <NavLink key={tab.to} to={tab.to} end className={({ isActive }) => `flex items-center border-b-2 pt-0.5 ${isActive ? "border-ink font-semibold" : "border-transparent text-pencil hover:text-ink"}`}>{tab.text}</NavLink>)}
        </nav>
      )}
      <div className="ml-auto flex items-center gap-4">
        {children}
        <select aria-label="Units" className="border-0 bg-transparent text-pencil" value={units} onChange={(event) => change({ units: event.target.value as LengthUnit })}>
          <option value="mm">mm</option><option value="in">inch, decimal</option><option value="in-fraction">inch, 1/16</option>
        </select>
        <select aria-label="Light" className="border-0 bg-transparent text-pencil" value={theme} onChange={(event) => change({ theme: event.target.value as Theme })}>
          <option value="light">day</option><option value="night">night</option><option value="system">as the system</option>
        </select>
        <details className="relative">
          <summary className="num flex h-8 w-9 cursor-pointer list-none items-center justify-center border border-ink text-sm" aria-label={`Account of ${me.data?.person?.name ?? ""}`}>{initials}</summary>
          <div className="absolute right-0 z-20 mt-1 w-56 border border-ink bg-lit p-4">
            <p className="font-semibold">{me.data?.person?.name}</p>
            <p className="mb-3 break-all text-sm text-pencil">{me.data?.person?.email}</p>
            <Link to={paths.method} className="block py-1 hover:underline">How it measures</Link>
            <button type="button" className="block w-full py-1 text-left hover:underline" onClick={() => signOut.mutate()}>Sign out</button>
          </div>
        </details>
      </div>
    </header>
  );
}
