import type { ReactNode } from "react";
import { Header } from "../../app/header.tsx";
import { useTitle } from "../../app/theme.ts";
import { VERDICT_SAYS, VerdictWord } from "../../ui/mark.tsx";

const VERDICTS = ["touch", "rub", "short", "tight", "clear"] as const;

/** How a number comes about and what it does not know: the same words as the core's own notes, for the people who act on them. */
export default function MethodPage() {
  useTitle("How a gap is found");
  return (
    <>
      <Header />
      <main id="main" className="mx-auto max-w-3xl px-6 py-10 text-lg">
        <h1 className="mb-2 text-3xl font-semibold">How it measures</h1>
        <p className="mb-10 text-pencil">What stands behind every number, and where it ends.</p>
        <Chapter title="From flat drawings to solids">
          <p>A part is a union of convex pieces in space: boxes, cylinders, cones, ovals, balls, pushed outlines, or the common volume of a top, a side and perhaps a rear outline. Round things stay round: nothing is faceted for a gap. A pipe is the tube of its outer diameter around its path, with its bends; a bend is followed within <N>0.02 mm</N>.</p>
          <Picture />
        </Chapter>
        <Chapter title="A gap">
          <p><b>Drawn</b> is the least distance between the two surfaces in true 3D. <b>Worst</b> is the same distance after everything that may take from it: the movement of one against the other (things on one engine do not move against each other), how much larger each may turn out, and how far a hot pipe grows from its anchor. <b>Need</b> comes from the strongest rule that matches the pair. <b>Margin</b> is worst less need.</p>
          <p>For flat faces, balls and capsules the distance is right to <N>0.000 001 mm</N> of what was drawn, where round edges meet to <N>0.001 mm</N>. Your tape is the weakest link, not this sum.</p>
          <dl className="my-4 border-t border-ink">
            {VERDICTS.map((verdict) => <div key={verdict} className="grid grid-cols-[110px_1fr] border-b border-hair py-1.5"><dt><VerdictWord verdict={verdict} /></dt><dd>{VERDICT_SAYS[verdict]}</dd></div>)}
          </dl>
        </Chapter>
        <Chapter title="Overlaps">
          <p>Where two things overlap, the number is minus the depth: the least move that parts the two pieces that are deepest in one another. For single convex solids that is exact; for others its sign is exact and its size a lower estimate, and the row says so.</p>
        </Chapter>
        <Chapter title="Stance and mass">
          <p>The ground is the plane through the two ride heights. Approach and departure are tangents to the circle of the tyre's loaded radius; breakover is the least sum of both tangents at any point between the axles. Tyres and brakes are left out of angles and clearance. Masses are yours: a part without one is named, never guessed.</p>
        </Chapter>
        <Chapter title="Litres">
          <p>Free litres are integrated from true sections of the space, less every part grown by the space's part gap. Nothing is sampled. They are not cases: what fits as cases and one-litre blocks is less.</p>
        </Chapter>
        <Chapter title="What it does not know">
          <p>Turning movement (an engine rolling about its crank, steered wheels) is not in the worst case yet: such a pair says so and is never better than tight. Flexing of the frame, heat, sagging hoses and fasteners that are not drawn are not there at all. A size marked as an estimate makes every gap with it a guess.</p>
        </Chapter>
        <aside className="mt-10 border-2 border-short p-6">
          <p className="mb-2 font-semibold text-short">Before anybody relies on it</p>
          <p>These are estimates from what was drawn, not a certificate. Where a result can hurt somebody (heat, fuel, brakes, steering, battery, lifting, glass, roadworthiness): measure on the car, follow the part maker and the local rules, and have a licensed person check.</p>
        </aside>
      </main>
    </>
  );
}

function N({ children }: { children: ReactNode }) {
  return <span className="num text-base">{children}</span>;
}

function Chapter({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="mb-9 space-y-3">
      <h2 className="text-xl font-semibold">{title}</h2>
      {children}
    </section>
  );
}

/** A gap as the ledger shows it: drawn, what comes off, what is needed. */
function Picture() {
  return (
    <figure className="my-5">
      <svg viewBox="0 0 600 130" className="w-full max-w-xl" role="img" aria-label="A bar from a wall: the drawn gap, the worst gap that is left of it, and the need as a calliper">
        <path d="M30 10v100" stroke="currentColor" strokeWidth="3" />
        <rect x="32" y="42" width="420" height="22" fill="var(--hair)" />
        <rect x="32" y="36" width="300" height="34" fill="var(--short)" />
        <path d="M380 20h40M400 20v66M380 86h40" stroke="currentColor" strokeWidth="2.5" fill="none" />
        <g fontSize="17" fill="currentColor" fontFamily="var(--font-sans)">
          <text x="120" y="105">worst: what is left</text>
          <text x="340" y="32" textAnchor="end">drawn</text>
          <text x="426" y="100">need</text>
        </g>
        <path d="M344 28h104v12" stroke="var(--pencil)" fill="none" />
      </svg>
      <figcaption className="text-base text-pencil">Pale: the gap as drawn. Full: the worst case. The calliper: what the rule asks for; here it is short.</figcaption>
    </figure>
  );
}
