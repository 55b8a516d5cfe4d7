import { generatedTyres } from "../layout/generated.ts";
import type { Layout, Part } from "../layout/schema.ts";
import { chainOf } from "./movement.ts";
import { ownerOf, partThing, roomThing, runThing, shaftThing, type Thing } from "./things.ts";

/** Everything of a layout that has gaps, in order: parts, generated tyres, runs, shafts, rooms. */
export interface Cast {
  readonly chassis: Layout["chassis"];
  readonly tyres: readonly Part[];
  readonly entries: ReadonlyMap<string, Entry>;
  readonly things: readonly Thing[];
}

interface Entry {
  /** What the thing was made from. Equal inputs, equal thing: the same object again. */
  readonly from: readonly unknown[];
  readonly thing: Thing;
}

/** The things of a layout; those that nothing touched since `before` are the same objects, moved ones share their shapes. */
export function castOf(layout: Layout, before: Cast | null): Cast {
  const { chassis } = layout;
  const listed = new Map<string, Part>();
  for (const part of layout.parts) listed.set(part.key, part);
  const tyres = before !== null && before.chassis === chassis && before.tyres.every((tyre) => !listed.has(tyre.key)) && before.tyres.length + listedTyres(listed) === 4
    ? before.tyres : generatedTyres(layout);
  const parts = listed;
  for (const tyre of tyres) parts.set(tyre.key, tyre);

  const entries = new Map<string, Entry>();
  const things: Thing[] = [];
  const put = (key: string, from: readonly unknown[], make: (old: Entry | undefined) => Thing) => {
    const old = before?.entries.get(key);
    const entry = old !== undefined && alike(old.from, from) ? old : { from, thing: make(old) };
    entries.set(key, entry);
    things.push(entry.thing);
  };
  // Steering is all that a chain takes from the chassis: other edits of it leave things alone.
  const front = chassis.front.steer > 0;
  const rear = chassis.rear.steer > 0;
  /** Appends what a chain is made of. Where carriers are is none of it: an engine may be moved without a look at what it carries. */
  const carriers = (part: Part | undefined, to: unknown[]): unknown[] => {
    for (let at = part, n = 0; at && n < 2000; at = at.carriedBy === null ? undefined : parts.get(at.carriedBy), n++) to.push(at.key, at.movement, at.rock);
    return to;
  };

  for (const part of layout.parts) {
    put(part.key, carriers(part, ["part", front, rear, part]), (old) =>
      partThing(part, chainOf(part, parts, chassis), false, old?.thing.is === "part" && !old.thing.generated ? { part: old.from[3] as Part, thing: old.thing } : undefined));
  }
  for (const tyre of tyres) put(tyre.key, carriers(tyre, ["tyre", front, rear, tyre]), () => partThing(tyre, chainOf(tyre, parts, chassis), true));
  for (const run of layout.runs) {
    const from: unknown[] = ["run", front, rear, run];
    if (run.carriedBy !== null) carriers(parts.get(run.carriedBy), from);
    for (const node of run.nodes) if (node.on !== undefined) carriers(parts.get(ownerOf(node.on)), from);
    put(run.key, from, (old) => runThing(run, parts, chassis, old?.thing));
  }
  for (const shaft of layout.shafts) {
    if (shaft.diameter === undefined) continue;
    const tyre = shaft.wheel === undefined ? undefined : parts.get(`tyre-${shaft.wheel}`);
    put(shaft.key, carriers(tyre, ["shaft", front, rear, shaft]), () => shaftThing(shaft, tyre ? chainOf(tyre, parts, chassis) : null));
  }
  for (const part of layout.parts) {
    for (const room of part.roomFor) {
      put(`${part.key}.${room.key}`, carriers(part, ["room", front, rear, room, part]), (old) =>
        roomThing(part, room, chainOf(part, parts, chassis), old && { room: old.from[3] as Part["roomFor"][number], thing: old.thing }));
    }
  }
  return { chassis, tyres, entries, things };
}

function listedTyres(listed: ReadonlyMap<string, Part>): number {
  let n = 0;
  for (const key of ["tyre-front-left", "tyre-front-right", "tyre-rear-left", "tyre-rear-right"]) if (listed.has(key)) n++;
  return n;
}

function alike(a: readonly unknown[], b: readonly unknown[]): boolean {
  if (a.length !== b.length) return false;
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return false;
  return true;
}
