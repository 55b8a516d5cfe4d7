import type { View } from "#core/frames.ts";
import { formatLength } from "#core/units/format-length.ts";
import { VerdictMark } from "../ui/mark.tsx";
import { useEditor } from "./editor-context.ts";
import { shapesOf } from "./shapes.ts";
import { useViewState } from "./view-state.ts";

/** While something is in the hand: the worst of its gaps, drawn, worst and need, as the ledger will have them. */
export function WorstInHand({ view }: { view: View }) {
  const { useShown, units } = useEditor();
  const selection = useViewState((s) => s.selection);
  const document = useShown((s) => s.document);
  const report = useShown((s) => s.report);
  const refusal = useShown((s) => s.refusal);
  // on the half of the paper that the pointer is not in
  const right = useViewState((s) => s.peek !== null && (s.peek - s.camera.x) * s.camera.scale < 480);
  if (view !== "plan") return null;
  const owner = (name: string) => (name.includes(".") ? name.slice(0, name.indexOf(".")) : name);
  const chosen = new Set(selection);
  const rows = report.gaps.filter((gap) => chosen.has(owner(gap.a)) !== chosen.has(owner(gap.b))).slice(0, 3);
  const all = shapesOf(document, "plan");
  const nameOf = (key: string) => all.find((one) => one.key === owner(key))?.name ?? key;
  return (
    <div className={`pointer-events-none absolute bottom-2 border border-ink bg-lit px-3 py-1.5 text-sm ${right ? "right-3" : "left-3"}`} aria-hidden="true">
      {refusal ? <span className="text-short">{refusal}</span> : rows.length === 0 ? <span className="text-pencil">Nothing near it.</span> : (
        <table className="border-separate border-spacing-x-0">
          <tbody>
            {rows.map((gap) => (
              <tr key={`${gap.a}|${gap.b}`}>
                <td className="pr-2"><VerdictMark verdict={gap.verdict} size={13} /></td>
                <td className="pr-4">{nameOf(chosen.has(owner(gap.a)) ? gap.b : gap.a)}</td>
                <td className="num pr-1 text-right font-semibold">{formatLength(gap.distance, units)}</td><td className="pr-3 text-pencil">drawn</td>
                <td className="num pr-1 text-right font-semibold">{formatLength(gap.worst, units)}</td><td className="pr-3 text-pencil">worst</td>
                <td className="num pr-1 text-right">{formatLength(gap.required, units)}</td><td className="text-pencil">need</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </div>
  );
}
