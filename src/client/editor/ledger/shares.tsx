import type { Gap } from "#core/gaps/gap.ts";
import { formatLength } from "#core/units/format-length.ts";
import { useBench } from "../bench-context.tsx";

/** What stands behind a margin: an addition, line by line, and which rule asks. */
export function Shares({ gap }: { gap: Gap }) {
  const { units } = useBench();
  const length = (mm: number) => formatLength(mm, units);
  const lines: [string, number][] = [["movement", gap.shares.movement], ["plus-minus", gap.shares.plusMinus], ["growth, hot", gap.shares.growth]];
  return (
    <div className="grid gap-x-10 gap-y-1 py-2 pl-[42px] pr-4 text-sm md:grid-cols-[auto_minmax(0,1fr)]">
      <p className="num whitespace-nowrap">
        <b className="font-semibold">{length(gap.distance)}</b> <Word>drawn</Word>
        {lines.map(([word, mm]) => <span key={word}> - {length(mm)} <Word>{word}</Word></span>)}
        {" "}= <b className="font-semibold">{length(gap.worst)}</b> <Word>worst</Word> - {length(gap.required)} <Word>need</Word> = <b className="font-semibold">{length(gap.margin)}</b> <Word>margin</Word>
      </p>
      <div className="space-y-0.5 text-pencil">
        <p>Needs <span className="num">{length(gap.required)}</span>: {gap.why}.</p>
        {gap.overruled?.map((rule) => <p key={rule.why + rule.gap}>Overruled, though it asks for more: <span className="num">{length(rule.gap)}</span>, {rule.why}.</p>)}
        {gap.notCovered && <p className="text-tight">Not covered yet: {gap.notCovered.join(", ")}. Such a gap is never called better than tight.</p>}
        {gap.depthIsEstimate && <p>How deep they overlap is a lower estimate; that they overlap is certain.</p>}
        {gap.provisional && <p>A size here is an estimate: measure the part when it comes.</p>}
      </div>
    </div>
  );
}

function Word({ children }: { children: string }) {
  return <span className="font-sans text-pencil">{children}</span>;
}
