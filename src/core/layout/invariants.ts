import { findOutlineFault, type Outline } from "../geometry/polygons.ts";
import { GeometryError, outlinePolyhedra, solidPieces } from "../geometry/solids.ts";
import type { Fault } from "./fault.ts";
import { GENERATED_KEYS } from "./generated.ts";
import { LISTS, type ListName } from "./commands.ts";
import type { Layout, Part, Run, Solid } from "./schema.ts";

/** As many faults as anybody reads at once. */
export const MOST_FAULTS = 50;

/**
 * What a schema cannot say: keys used once, references that lead somewhere, carriers without cycles, runs that are trees, outlines that are simple,
 * solids that exist. Every fault with its path; at most 50.
 *
 * @param only lists the items to look into closely (their shapes); the keys and references are always checked. Absent: everything.
 */
export function findFaults(layout: Layout, only?: ReadonlySet<string>): Fault[] {
  const faults: Fault[] = [];
  const fault = (path: string, message: string) => {
    if (faults.length < MOST_FAULTS) faults.push({ path, message });
  };
  const index = indexKeys(layout, fault);
  checkReferences(layout, index, fault);
  checkCarriers(layout, fault);
  layout.parts.forEach((part, i) => {
    if (!only || only.has(part.key)) checkPart(part, `parts[${i}]`, fault);
  });
  layout.runs.forEach((run, i) => {
    if (!only || only.has(run.key)) checkRun(run, `runs[${i}]`, fault);
  });
  layout.spaces.forEach((space, i) => {
    if (only && !only.has(space.key)) return;
    if (checkViews(space, `spaces[${i}]`, fault)) return;
    const given = [space.top, space.side, space.rear].filter(Boolean).length;
    if (given < 2) fault(`spaces[${i}]`, `a space needs at least two of top, side and rear, found ${given}`);
  });
  if (!only || only.has("body")) {
    for (const view of ["side", "top", "rear"] as const) checkOutline(layout.body[view], `body.${view}`, fault);
    layout.body.sections.forEach((section, i) => {
      section.line.forEach((p, k) => {
        const q = section.line[k + 1];
        if (q && p[0] === q[0] && p[1] === q[1]) fault(`body.sections[${i}].line[${k + 1}]`, "the same place as the point before");
      });
    });
  }
  return faults;
}

type Report = (path: string, message: string) => void;

/** Every key of the shared namespace and the list it is in. */
function indexKeys(layout: Layout, fault: Report): ReadonlyMap<string, { list: ListName | "datums"; path: string }> {
  const index = new Map<string, { list: ListName | "datums"; path: string }>();
  const add = (key: string, list: ListName | "datums", path: string) => {
    const known = index.get(key);
    if (known) fault(`${path}.key`, `the key "${key}" is already used by ${known.path}: expected a key used once`);
    else index.set(key, { list, path });
  };
  for (const list of LISTS) layout[list].forEach((item, i) => add(item.key, list, `${list}[${i}]`));
  layout.chassis.datums.forEach((datum, i) => add(datum.key, "datums", `chassis.datums[${i}]`));
  return index;
}

function uniqueWithin(items: readonly { readonly key: string }[], path: string, fault: Report): void {
  const seen = new Map<string, number>();
  items.forEach((item, i) => {
    const known = seen.get(item.key);
    if (known !== undefined) fault(`${path}[${i}].key`, `the key "${item.key}" is already used by ${path}[${known}]`);
    else seen.set(item.key, i);
  });
}

function checkReferences(layout: Layout, index: ReadonlyMap<string, { list: string }>, fault: Report): void {
  const isPart = (key: string) => index.get(key)?.list === "parts" || GENERATED_KEYS.has(key);
  const isThing = (key: string) => isPart(key) || index.get(key)?.list === "runs" || index.get(key)?.list === "shafts";
  const parts = new Map(layout.parts.map((part) => [part.key, part]));
  layout.parts.forEach((part, i) => {
    if (part.carriedBy !== null && !isPart(part.carriedBy)) fault(`parts[${i}].carriedBy`, `expected the key of a part, found "${part.carriedBy}"`);
    if (part.mirrorOf !== null && index.get(part.mirrorOf)?.list !== "parts") fault(`parts[${i}].mirrorOf`, `expected the key of a part, found "${part.mirrorOf}"`);
    if (part.mirrorOf === part.key) fault(`parts[${i}].mirrorOf`, "a part cannot mirror itself");
  });
  layout.runs.forEach((run, i) => {
    if (run.carriedBy !== null && !isPart(run.carriedBy)) fault(`runs[${i}].carriedBy`, `expected the key of a part, found "${run.carriedBy}"`);
    if (run.mirrorOf !== null && index.get(run.mirrorOf)?.list !== "runs") fault(`runs[${i}].mirrorOf`, `expected the key of a run, found "${run.mirrorOf}"`);
    run.nodes.forEach((node, k) => {
      if (node.clip !== undefined && !isPart(node.clip)) fault(`runs[${i}].nodes[${k}].clip`, `expected the key of a part, found "${node.clip}"`);
      if (node.on === undefined) return;
      const [owner, port, more] = node.on.split(".");
      if (!owner || more !== undefined || !isPart(owner)) fault(`runs[${i}].nodes[${k}].on`, `expected a part or part.port, found "${node.on}"`);
      else if (port !== undefined && !parts.get(owner)?.ports.some((p) => p.key === port)) fault(`runs[${i}].nodes[${k}].on`, `${owner} has no port "${port}"`);
    });
  });
  layout.glass.forEach((glass, i) => {
    if (glass.part !== undefined && !isPart(glass.part)) fault(`glass[${i}].part`, `expected the key of a part, found "${glass.part}"`);
  });
  layout.contacts.forEach((contact, i) => {
    contact.between.forEach((name, k) => {
      const [owner, room, more] = name.split(".");
      const known = owner !== undefined && isThing(owner) && (room === undefined || (more === undefined && parts.get(owner)?.roomFor.some((r) => r.key === room)));
      if (!known) fault(`contacts[${i}].between[${k}]`, `expected the key of a part, run or shaft, found "${name}"`);
    });
    if (contact.between[0] === contact.between[1]) fault(`contacts[${i}].between`, "a contact is between two different things");
  });
}

function checkCarriers(layout: Layout, fault: Report): void {
  const carrier = new Map(layout.parts.map((part) => [part.key, part.carriedBy]));
  layout.parts.forEach((part, i) => {
    const seen = new Set<string>([part.key]);
    for (let at = part.carriedBy; at !== null && at !== undefined; at = carrier.get(at) ?? null) {
      if (at === part.key) {
        fault(`parts[${i}].carriedBy`, `carried in a circle: ${[...seen, part.key].join(" by ")}`);
        return;
      }
      if (seen.has(at)) return; // a circle elsewhere: named at its own members
      seen.add(at);
    }
  });
}

function checkPart(part: Part, path: string, fault: Report): void {
  uniqueWithin(part.ports, `${path}.ports`, fault);
  uniqueWithin(part.mounts, `${path}.mounts`, fault);
  uniqueWithin(part.roomFor, `${path}.roomFor`, fault);
  part.solids.forEach((solid, i) => checkSolid(solid, `${path}.solids[${i}]`, fault));
  part.roomFor.forEach((room, i) => room.solids.forEach((solid, k) => checkSolid(solid, `${path}.roomFor[${i}].solids[${k}]`, fault)));
}

function checkSolid(solid: Solid, path: string, fault: Report): void {
  try {
    solidPieces(solid);
  } catch (error) {
    if (!(error instanceof GeometryError)) throw error;
    fault(error.path ? `${path}.${error.path}` : path, error.message);
  }
}

function checkOutline(outline: Outline | undefined, path: string, fault: Report): boolean {
  const found = outline && findOutlineFault(outline);
  if (!found) return false;
  fault(found.corners.length > 0 ? `${path}[${found.corners[0]}]` : path, found.message);
  return true;
}

/** True where a fault was found. A space whose outlines have nothing in common is a finding of its report, not a fault. */
function checkViews(space: { readonly top?: Outline | undefined; readonly side?: Outline | undefined; readonly rear?: Outline | undefined }, path: string, fault: Report): boolean {
  return [checkOutline(space.top, `${path}.top`, fault), checkOutline(space.side, `${path}.side`, fault), checkOutline(space.rear, `${path}.rear`, fault)].some(Boolean);
}

function checkRun(run: Run, path: string, fault: Report): void {
  uniqueWithin(run.nodes, `${path}.nodes`, fault);
  uniqueWithin(run.wires, `${path}.wires`, fault);
  const place = new Map(run.nodes.map((node, i) => [node.key, i]));
  const known = (key: string, at: string) => {
    if (place.has(key)) return true;
    fault(at, `expected the key of a node of this run, found "${key}"`);
    return false;
  };
  if (run.anchor !== undefined) known(run.anchor, `${path}.anchor`);
  run.wires.forEach((wire, i) => {
    known(wire.from, `${path}.wires[${i}].from`);
    known(wire.to, `${path}.wires[${i}].to`);
  });
  // legs form a tree: joining two nodes that are already joined closes a loop
  const root = run.nodes.map((_, i) => i);
  const find = (i: number): number => (root[i] === i ? i : (root[i] = find(root[i]!)));
  let joined = 1;
  let whole = true;
  run.legs.forEach((leg, i) => {
    const from = known(leg.from, `${path}.legs[${i}].from`);
    const to = known(leg.to, `${path}.legs[${i}].to`);
    if (!from || !to) {
      whole = false;
      return;
    }
    const a = find(place.get(leg.from)!);
    const b = find(place.get(leg.to)!);
    if (a === b) {
      fault(`${path}.legs[${i}]`, leg.from === leg.to ? `a leg from ${leg.from} to itself` : `the leg from ${leg.from} to ${leg.to} closes a loop: legs form a tree`);
      whole = false;
    } else {
      root[a] = b;
      joined++;
    }
  });
  if (run.legs.length > 0 && whole && joined < place.size) fault(`${path}.legs`, `the legs leave ${place.size - joined} of the nodes unconnected: legs form one tree`);
  const ends = run.legs.length > 0 ? run.legs : run.nodes.slice(1).map((node, i) => ({ from: run.nodes[i]!.key, to: node.key }));
  for (const leg of ends) {
    const a = run.nodes[place.get(leg.from) ?? -1]?.at;
    const b = run.nodes[place.get(leg.to) ?? -1]?.at;
    if (a && b && a !== b && Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]) < 1e-6) fault(`${path}.nodes[${place.get(leg.to)}].at`, `the same place as node ${leg.from}: a leg needs a length`);
  }
}

/** True where a space's outlines have a volume in common. */
export function hasCommonVolume(space: { readonly top?: Outline | undefined; readonly side?: Outline | undefined; readonly rear?: Outline | undefined }): boolean {
  try {
    return outlinePolyhedra(space).length > 0;
  } catch (error) {
    if (error instanceof GeometryError) return false;
    throw error;
  }
}
