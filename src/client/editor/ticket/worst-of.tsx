import { useMemo } from "react";
import type { Gap } from "#core/gaps/gap.ts";
import { formatLength } from "#core/units/format-length.ts";
import { VERDICT_INK, VerdictMark } from "../../ui/mark.tsx";
import { useBench, useShown } from "../bench-context.tsx";
import { namesOf } from "../ledger/names.ts";
import { framePair } from "../workspace.tsx";

const MOST = 3;

/** The worst gaps of one thing, on its card; a click frames the pair. Live while it is dragged. */
export function WorstOf({ itemKey }: { itemKey: string }) {
  const { units } = useBench();
  const report = useShown((shown) => shown.report);
  const document = useShown((shown) => shown.document);
  const name = useMemo(() => namesOf(document), [document]);
  const rows = report.gaps.map((gap, i) => ({ gap, number: i + 1 })).filter(({ gap }) => ownerOf(gap.a) === itemKey || ownerOf(gap.b) === itemKey);
  if (rows.length === 0) return <p className="border-b border-hair py-2 text-sm text-pencil">Nothing is near it.</p>;
  const bad = rows.filter(({ gap }) => gap.verdict !== "clear" && gap.verdict !== "tight").length;
  const ink = bad > 0 ? rows[0]!.gap.verdict : null;
  return (
    <div className="my-2 border px-3 py-2" style={{ borderColor: ink ? `var(--${ink})` : "var(--hair)" }}>
      <p className={`font-semibold ${ink ? VERDICT_INK[ink] : ""}`}>{bad > 0 ? `${bad} of its ${rows.length} gaps ${bad === 1 ? "breaks" : "break"} a rule.` : `${rows.length} ${rows.length === 1 ? "gap" : "gaps"}, none breaks a rule.`}</p>
      <ul>
        {rows.slice(0, MOST).map(({ gap, number }) => (
          <li key={number}>
            <button type="button" className="grid w-full grid-cols-[24px_16px_minmax(0,1fr)_auto] items-baseline gap-1.5 py-0.5 text-left hover:underline" title={says(gap, name(gap.a), name(gap.b), (mm) => formatLength(mm, units))} onClick={() => framePair(gap)}>
              <span className="num text-sm">{number}</span>
              <VerdictMark verdict={gap.verdict} size={13} />
              <span className="truncate"><span className="sr-only">{gap.verdict}, to </span>{name(ownerOf(gap.a) === itemKey ? gap.b : gap.a)}</span>
              <span className={`num text-sm font-semibold ${VERDICT_INK[gap.verdict]}`}>{formatLength(gap.margin, units)}</span>
            </button>
          </li>
        ))}
      </ul>
    </div>
  );
}

const ownerOf = (key: string) => key.split(".")[0]!;

function says(gap: Gap, a: string, b: string, length: (mm: number) => string): string {
  return `${a} to ${b}: ${gap.verdict}, drawn ${length(gap.distance)}, worst ${length(gap.worst)}, need ${length(gap.required)}, margin ${length(gap.margin)}: ${gap.why}`;
}
