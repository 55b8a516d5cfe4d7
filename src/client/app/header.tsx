import type { ReactNode } from "react";
import { Link, NavLink } from "react-router-dom";
import type { Role } from "#core/layout/commands.ts";
import type { LengthUnit } from "#core/units/parse-length.ts";
import { Button } from "../ui/button.tsx";
import { classes } from "../ui/classes.ts";
import { HandbreadthMark } from "../ui/mark.tsx";
import { Popover } from "../ui/popover.tsx";
import { Segmented } from "../ui/segmented.tsx";
import { paths } from "./paths.ts";
import { useMe, usePreferences, useSignOut, type Theme } from "./session.queries.ts";

export interface Crumb {
  readonly to: string;
  readonly text: string;
}

const UNIT_WORDS: Record<LengthUnit, string> = { mm: "mm", in: "inch", "in-fraction": "inch 1/16" };

/** The top of every page: where one is at the left, the page's own things in the middle, the person's at the right. */
export function Header({ crumbs = [], tabs = [], role, unsent = 0, children }: { crumbs?: readonly Crumb[]; tabs?: readonly Crumb[]; role?: Role; unsent?: number; children?: ReactNode }) {
  return (
    <header className="no-print relative z-20 flex min-h-[47px] shrink-0 items-center gap-x-5 border-b border-ink px-4 max-md:flex-wrap">
      <a href="#main" className="absolute left-2 top-1 z-40 -translate-y-16 border border-ink bg-lit px-3 py-1.5 focus:translate-y-0">Skip to the page</a>
      <Link to={paths.builds} aria-label="Handbreadth: your builds" className="flex min-h-11 items-center gap-2.5 text-lg font-semibold"><HandbreadthMark size={25} /><span className="max-xl:hidden">Handbreadth</span></Link>
      <nav aria-label="Where you are" className="flex min-w-0 items-center gap-4">
        {crumbs.map((crumb, i) => (
          <Link key={crumb.to} to={crumb.to} aria-current={i === crumbs.length - 1 ? "location" : undefined} className={classes("truncate", i === crumbs.length - 1 ? "max-w-[34ch] font-semibold" : "max-w-[20ch] shrink-0 text-pencil hover:text-ink")} title={crumb.text}>{crumb.text}</Link>
        ))}
      </nav>
      {tabs.length > 0 && (
        <nav aria-label="Pages of this layout" className="flex gap-5 self-stretch max-md:order-last max-md:w-full md:pl-3">
          {tabs.map((tab) => (
            <NavLink key={tab.to} to={tab.to} end className={({ isActive }) => classes("flex items-center border-b-2 pt-0.5 max-md:min-h-10", isActive ? "border-ink font-semibold" : "border-transparent text-pencil hover:text-ink")}>{tab.text}</NavLink>
          ))}
        </nav>
      )}
      <div className="ml-auto flex shrink-0 items-center gap-x-4">
        {children}
        <UnitsSwitch />
        <Account role={role} unsent={unsent} />
      </div>
    </header>
  );
}

function UnitsSwitch() {
  const { units, change } = usePreferences();
  return (
    <label className="relative flex items-center" title="Units that lengths are shown in">
      <span className="sr-only">Units</span>
      <select className="min-h-8 cursor-pointer appearance-none border-b border-dotted border-pencil bg-transparent text-pencil hover:text-ink" value={units} onChange={(event) => change({ units: event.target.value as LengthUnit })}>
        {(Object.keys(UNIT_WORDS) as LengthUnit[]).map((unit) => <option key={unit} value={unit} className="bg-lit">{UNIT_WORDS[unit]}</option>)}
      </select>
    </label>
  );
}

export const initialsOf = (name: string): string => name.split(/\s+/).map((word) => word[0] ?? "").join("").slice(0, 2).toUpperCase();

function Account({ role, unsent }: { role?: Role | undefined; unsent: number }) {
  const me = useMe();
  const { theme, change } = usePreferences();
  const signOut = useSignOut();
  const person = me.data?.person;
  if (!person) return null;
  return (
    <Popover label={`You: ${person.name}`} face={initialsOf(person.name)} className="num grid size-8 place-items-center border border-ink bg-ink text-sm font-semibold text-film pointer-coarse:size-11">
      {() => (
        <div className="w-64">
          <p className="text-lg font-semibold leading-tight">{person.name}</p>
          <p className="break-all text-sm text-pencil">{person.email}{role && <>, {role} here</>}</p>
          <p className="mb-1 mt-4 text-sm text-pencil">Light</p>
          <Segmented<Theme> small label="Light" value={theme} onChange={(next) => change({ theme: next })} options={[{ value: "light", label: "day" }, { value: "night", label: "night" }, { value: "system", label: "as the system" }]} />
          <p className="mt-4"><Link to={paths.method} className="border-b border-hair hover:border-ink">How a gap is found, and its limits</Link></p>
          {unsent > 0 && <p className="mt-4 text-sm text-tight">{unsent} {unsent === 1 ? "edit waits" : "edits wait"} in this browser. They stay here for you and are sent when you sign in again.</p>}
          <Button className="mt-4 w-full" disabled={signOut.isPending} onClick={() => signOut.mutate()}>Sign out</Button>
        </div>
      )}
    </Popover>
  );
}
