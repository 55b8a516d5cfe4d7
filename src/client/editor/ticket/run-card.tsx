import { useMemo } from "react";
import type { Layout, Run } from "#core/layout/schema.ts";
import { RUN_MATERIALS } from "#core/layout/schema.ts";
import { tubePath } from "#core/geometry/tubes.ts";
import { formatLength } from "#core/units/format-length.ts";
import { Button } from "../../ui/button.tsx";
import { classes } from "../../ui/classes.ts";
import { useBench, useDocument, useShown } from "../bench-context.tsx";
import { Choice, LengthEntry, MaybeLengthEntry, MaybeNumberEntry, TextEntry, Tick } from "../forms/entry.tsx";
import { useItemForm, type Form } from "../forms/item-form.ts";
import { heatText, HeatForm, movementText, MovementForm, SourceForm, sourceText } from "../forms/shared-forms.tsx";
import { useViewState } from "../view-state.ts";
import { CardHead } from "./card-head.tsx";
import { complain, KeyRow } from "./part-card.tsx";
import { TicketFold, TicketRow, TicketSays } from "./ticket-row.tsx";
import { RUN_KIND_CHOICES } from "./words.ts";
import { WorstOf } from "./worst-of.tsx";

const MATERIALS = [["", "not given"], ...RUN_MATERIALS.map((material) => [material, material] as const)] as const;

/** A pipe, hose, line or loom: its section, then its nodes one by one. */
export function RunCard({ runKey }: { runKey: string }) {
  const form = useItemForm("runs", runKey);
  return form && <Card form={form} />;
}

function Card({ form }: { form: Form<Run> }) {
  const { units } = useBench();
  const run = form.value;
  const document = useDocument((state) => state.document);
  const put = (path: readonly (string | number)[], value: unknown, what: string) => form.put(path, value, `${run.name}: ${what}`);
  const length = (mm: number) => formatLength(mm, units);
  return (
    <>
      <CardHead form={form} list="runs" kind={run.kind} kinds={RUN_KIND_CHOICES} mirrorOf={run.mirrorOf} />
      <TicketRow label="section">
        <LengthEntry label="Outer diameter" suffix="dia." mm={run.diameter} disabled={!form.may} give={(mm) => put(["diameter"], mm, `diameter ${length(mm)}`)} />
        <LengthEntry label="Bend radius, to the centre line" suffix="bend" mm={run.bendRadius} disabled={!form.may} give={(mm) => put(["bendRadius"], mm, `bend radius ${length(mm)}`)} />
      </TicketRow>
      <PathLength run={run} />
      <NodeRows form={form} />
      <WorstOf itemKey={run.key} />
      <TicketFold title="Size and source" note={sourceText(run.source, units)}><SourceForm form={form} /></TicketFold>
      <TicketFold title="Material and heat" note={[run.material, heatText(run.heat)].filter(Boolean).join(", ")}>
        <TicketRow label="material"><Choice label="Material" value={run.material ?? ""} options={MATERIALS} disabled={!form.may} give={(material) => put(["material"], material || undefined, "material")} /></TicketRow>
        <TicketRow label="held fast at"><Choice label="Held fast at node" value={run.anchor ?? ""} options={[["", "not given"], ...run.nodes.map((node) => [node.key, node.key] as const)]} disabled={!form.may} give={(anchor) => put(["anchor"], anchor || undefined, "held fast at")} /></TicketRow>
        <HeatForm form={form} />
      </TicketFold>
      <TicketFold title="Cover" note={run.cover ? `${length(run.cover.thickness)} thick` : "bare"}><Cover form={form} /></TicketFold>
      <TicketFold title="Movement" note={movementText(run.movement, units)}>
        <TicketRow label="carried by"><Choice label="Carried by" value={run.carriedBy ?? ""} options={[["", "the chassis"], ...document.parts.map((part) => [part.key, part.name] as const)]} disabled={!form.may} give={(key) => put(["carriedBy"], key || null, "carried by")} /></TicketRow>
        <MovementForm form={form} />
      </TicketFold>
      <TicketFold title="Legs" note={run.legs.length === 0 ? "one chain" : `${run.legs.length} legs`}><Legs form={form} /></TicketFold>
      <TicketFold title="Wires" note={run.wires.length === 0 ? "none" : `${run.wires.length}`}><Wires form={form} /></TicketFold>
      <TicketFold title="Group, key, lock" note={[run.group, run.key, run.locked && "locked"].filter(Boolean).join(" · ")}>
        <TicketRow label="group"><TextEntry label="Group" value={run.group} disabled={!form.may} give={(group) => put(["group"], group, "group")} /></TicketRow>
        <KeyRow list="runs" itemKey={run.key} may={form.may} />
        <Tick label="locked: nothing moves it" value={run.locked} disabled={!form.may} give={(locked) => put(["locked"], locked, locked ? "locked" : "unlocked")} />
      </TicketFold>
    </>
  );
}

/** Length along the path through the bends, and what the path says about itself. */
function PathLength({ run }: { run: Run }) {
  const { units } = useBench();
  const shown = useShown((state) => state.document.runs.find((one) => one.key === run.key)) ?? run;
  const path = useMemo(() => {
    try {
      return tubePath(shown);
    } catch {
      return null;
    }
  }, [shown]);
  if (!path) return null;
  const total = path.legs.reduce((sum, leg) => sum + leg.length, 0);
  return (
    <>
      <TicketSays label="length"><span className="num font-semibold">{formatLength(total, units)}</span> <span className="text-sm text-pencil">along its middle, through the bends</span></TicketSays>
      {path.findings.length > 0 && <ul className="border-b border-hair py-1 text-sm text-tight">{path.findings.map((finding, i) => <li key={i}>{typeof finding === "string" ? finding : finding.message}</li>)}</ul>}
    </>
  );
}

const bindings = (document: Layout): (readonly [string, string])[] => [["", "free"], ...document.parts.flatMap((part) => [[part.key, part.name] as const, ...part.ports.map((port) => [`${part.key}.${port.key}`, `${part.name}, ${port.key}`] as const)])];

/** Nodes: where each is, in car coordinates; what it is bound or clipped to opens beneath the one that is chosen. */
function NodeRows({ form }: { form: Form<Run> }) {
  const run = form.value;
  const shown = useShown((state) => state.document.runs.find((one) => one.key === run.key)) ?? run;
  const document = useDocument((state) => state.document);
  const { store, units } = useBench();
  const node = useViewState((state) => state.node);
  const set = useViewState((state) => state.set);
  const disabled = !form.may || run.locked;
  const put = (path: readonly (string | number)[], value: unknown, what: string) => form.put(path, value, `${run.name}: ${what}`);
  const move = (key: string, at: readonly number[]) => (store.run({ kind: "move-node", run: run.key, node: key, at: at as [number, number, number] }, `${run.name}: node ${key}`) ? null : store.state.getState().refusal);
  const insert = (after: number) => {
    const a = run.nodes[after]!;
    const b = run.nodes[after + 1];
    const at = b ? a.at.map((value, k) => (value + b.at[k]!) / 2) : a.at.map((value, k) => value + (k === 0 ? 100 : 0));
    const key = freeNode(run);
    const nodes = [...run.nodes.slice(0, after + 1), { key, at: at as [number, number, number] }, ...run.nodes.slice(after + 1)];
    if (complain(put(["nodes"], nodes, `node ${key} more`))) set({ node: key });
  };
  return (
    <div className="border-b border-hair py-2">
      <div className="grid grid-cols-[44px_1fr_1fr_1fr] gap-x-2 text-sm text-pencil"><span>node</span><span>rear</span><span>right</span><span>up</span></div>
      <ol>
        {shown.nodes.map((one, i) => {
          const chosen = node === one.key;
          return (
            <li key={one.key} className={classes(chosen && "-mx-2 bg-film px-2 pb-2")}>
              <div className="grid grid-cols-[44px_1fr_1fr_1fr] items-start gap-x-2">
                <button type="button" aria-expanded={chosen} title={one.on ? `bound to ${one.on}` : one.clip ? `clipped to ${one.clip}` : "free"} className={classes("num min-h-[30px] truncate text-left text-sm hover:underline", chosen && "font-semibold")} onClick={() => set({ node: chosen ? null : one.key })}>
                  {one.key}{one.on ? " *" : ""}
                </button>
                {(["rear", "right", "up"] as const).map((word, k) => (
                  <LengthEntry key={word} label={`Node ${one.key}, ${word}`} mm={one.at[k]!} disabled={disabled} give={(mm) => move(one.key, one.at.map((value, at) => (at === k ? mm : value)))} />
                ))}
              </div>
              {chosen && (
                <div className="mt-1 pl-[44px]">
                  <TicketRow label="bound to"><Choice label={`Node ${one.key} bound to`} value={one.on ?? ""} options={bindings(document)} disabled={disabled} give={(on) => put(["nodes", i, "on"], on || undefined, `node ${one.key} bound`)} /></TicketRow>
                  <TicketRow label="clipped to"><Choice label={`Node ${one.key} clipped to`} value={one.clip ?? ""} options={[["", "nothing"], ...document.parts.map((part) => [part.key, part.name] as const)]} disabled={disabled} give={(clip) => put(["nodes", i, "clip"], clip || undefined, `node ${one.key} clipped`)} /></TicketRow>
                  <TicketRow label="bend here"><MaybeLengthEntry label={`Node ${one.key}, bend radius`} none={`as the run, ${formatLength(run.bendRadius, units)}`} mm={one.bend} disabled={disabled} give={(mm) => put(["nodes", i, "bend"], mm, `bend at ${one.key}`)} /></TicketRow>
                  <TicketRow label="surface"><MaybeNumberEntry label={`Node ${one.key}, surface temperature`} unit="°C" none="as the run" value={one.surface} disabled={disabled} give={(value) => put(["nodes", i, "surface"], value, `surface at ${one.key}`)} /></TicketRow>
                  <TicketRow label="name"><TextEntry label={`Node ${one.key}, its key`} value={one.key} disabled={disabled} give={(key) => renameNode(form, one.key, key)} /></TicketRow>
                  {!disabled && (
                    <div className="mt-2 flex gap-4 text-sm">
                      <button type="button" className="border-b border-hair hover:border-ink" onClick={() => insert(i)}>a node after it</button>
                      {run.nodes.length > 2 && run.legs.length === 0 && <button type="button" className="text-pencil hover:text-short" onClick={() => complain(put(["nodes", i], undefined, `node ${one.key} less`))}>take it out</button>}
                    </div>
                  )}
                </div>
              )}
            </li>
          );
        })}
      </ol>
      {run.nodes.some((one) => one.on) && <p className="mt-1 text-sm text-pencil">* bound: it follows the part it is on.</p>}
      {!disabled && node === null && <p className="mt-1 text-sm text-pencil">Choose a node to bind, bend or add one after it.</p>}
    </div>
  );
}

const freeNode = (run: Run): string => {
  for (let n = run.nodes.length + 1; ; n++) if (!run.nodes.some((node) => node.key === `n${n}`)) return `n${n}`;
};

/** A node's new key, followed in legs, wires and the anchor. */
function renameNode(form: Form<Run>, from: string, to: string): string | null {
  const run = form.value;
  const swap = (key: string) => (key === from ? to : key);
  return form.give({
    ...run, nodes: run.nodes.map((node) => (node.key === from ? { ...node, key: to } : node)), ...(run.anchor === from ? { anchor: to } : {}),
    legs: run.legs.map((leg) => ({ ...leg, from: swap(leg.from), to: swap(leg.to) })), wires: run.wires.map((wire) => ({ ...wire, from: swap(wire.from), to: swap(wire.to) })),
  }, `${run.name}: node ${from} becomes ${to}`);
}

function Cover({ form }: { form: Form<Run> }) {
  const { cover } = form.value;
  const put = (path: readonly (string | number)[], value: unknown) => form.put(["cover", ...path], value, `${form.value.name}: cover`);
  if (!cover) return form.may ? <Button onClick={() => complain(form.put(["cover"], { thickness: 3 }, `${form.value.name}: covered`))}>Put a sleeve or wrap on it</Button> : <p className="text-sm text-pencil">It is bare.</p>;
  return (
    <>
      <TicketRow label="thickness"><LengthEntry label="Cover thickness" mm={cover.thickness} disabled={!form.may} give={(mm) => put(["thickness"], mm)} /></TicketRow>
      <TicketRow label="stands"><MaybeNumberEntry label="Highest temperature the cover stands" unit="°C" value={cover.limit} disabled={!form.may} give={(value) => put(["limit"], value)} /></TicketRow>
      <TicketRow label="emissivity"><MaybeNumberEntry label="Cover emissivity" unit="" decimals={3} value={cover.emissivity} disabled={!form.may} give={(value) => put(["emissivity"], value)} /></TicketRow>
      <TicketRow label="conducts"><MaybeNumberEntry label="Cover conductivity" unit="W/mK" decimals={4} value={cover.conductivity} disabled={!form.may} give={(value) => put(["conductivity"], value)} /></TicketRow>
      {form.may && <button type="button" className="text-sm text-pencil hover:text-short" onClick={() => complain(form.put(["cover"], undefined, `${form.value.name}: bare again`))}>take the cover off</button>}
    </>
  );
}

function Legs({ form }: { form: Form<Run> }) {
  const run = form.value;
  const nodes = run.nodes.map((node) => [node.key, node.key] as const);
  const put = (path: readonly (string | number)[], value: unknown) => form.put(["legs", ...path], value, `${run.name}: legs`);
  const chain = () => run.nodes.slice(1).map((node, i) => ({ from: run.nodes[i]!.key, to: node.key, flex: false }));
  if (run.legs.length === 0) {
    return (
      <div className="space-y-2">
        <p className="text-sm text-pencil">The nodes are one chain in their order. Legs let a loom branch, and a leg have its own diameter.</p>
        {form.may && <Button onClick={() => complain(form.put(["legs"], chain(), `${run.name}: legs of its own`))}>Give it legs</Button>}
      </div>
    );
  }
  return (
    <div className="space-y-1">
      {run.legs.map((leg, i) => (
        <div key={i} className="grid grid-cols-[1fr_1fr_1fr_auto] items-start gap-2 border-b border-hair py-1">
          <Choice label={`Leg ${i + 1} from`} value={leg.from} options={nodes} disabled={!form.may} give={(key) => put([i, "from"], key)} />
          <Choice label={`Leg ${i + 1} to`} value={leg.to} options={nodes} disabled={!form.may} give={(key) => put([i, "to"], key)} />
          <MaybeLengthEntry label={`Leg ${i + 1} diameter`} none="as the run" mm={leg.diameter} disabled={!form.may} give={(mm) => put([i, "diameter"], mm)} />
          <span className="flex items-center gap-2"><Tick label="flex" value={leg.flex} disabled={!form.may} give={(flex) => put([i, "flex"], flex)} />{form.may && <button type="button" aria-label={`Take out leg ${i + 1}`} className="px-1 text-pencil hover:text-short" onClick={() => complain(put([i], undefined))}>out</button>}</span>
        </div>
      ))}
      {form.may && <Button onClick={() => {
        const key = freeNode(run);
        const last = run.nodes[run.nodes.length - 1]!;
        complain(form.give({ ...run, nodes: [...run.nodes, { key, at: [last.at[0] + 100, last.at[1], last.at[2]] }], legs: [...run.legs, { from: last.key, to: key, flex: false }] }, `${run.name}: a branch more`));
      }}>Add a branch</Button>}
    </div>
  );
}

function Wires({ form }: { form: Form<Run> }) {
  const run = form.value;
  const nodes = run.nodes.map((node) => [node.key, node.key] as const);
  const put = (path: readonly (string | number)[], value: unknown) => form.put(["wires", ...path], value, `${run.name}: wires`);
  return (
    <div className="space-y-1">
      {run.wires.map((wire, i) => (
        <div key={wire.key} className="grid grid-cols-[1fr_1fr_1fr_1.2fr_1fr_auto] items-start gap-2 border-b border-hair py-1">
          <TextEntry label={`Wire ${i + 1} key`} value={wire.key} disabled={!form.may} give={(key) => put([i, "key"], key)} />
          <Choice label={`Wire ${wire.key} from`} value={wire.from} options={nodes} disabled={!form.may} give={(key) => put([i, "from"], key)} />
          <Choice label={`Wire ${wire.key} to`} value={wire.to} options={nodes} disabled={!form.may} give={(key) => put([i, "to"], key)} />
          <TextEntry label={`Wire ${wire.key} gauge`} value={wire.gauge} disabled={!form.may} give={(gauge) => put([i, "gauge"], gauge)} />
          <MaybeNumberEntry label={`Wire ${wire.key} current`} unit="A" value={wire.amps} disabled={!form.may} give={(amps) => put([i, "amps"], amps)} />
          {form.may && <button type="button" aria-label={`Take out wire ${wire.key}`} className="px-1 text-pencil hover:text-short" onClick={() => complain(put([i], undefined))}>out</button>}
        </div>
      ))}
      {form.may && <Button onClick={() => complain(form.put(["wires"], [...run.wires, { key: `w${run.wires.length + 1}`, from: run.nodes[0]!.key, to: run.nodes[run.nodes.length - 1]!.key, gauge: "20 AWG" }], `${run.name}: a wire more`))}>Add a wire</Button>}
    </div>
  );
}
