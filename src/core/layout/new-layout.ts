import { layoutSchema, type Layout, type LayoutInput } from "./schema.ts";

/** The rules a new layout begins with: common clearances of the trade, each with where it is from. All editable; a file's rules are the whole truth. */
export const STARTING_RULES: NonNullable<NonNullable<LayoutInput["rules"]>["pairs"]> = [
  { between: ["kind:engine", "any"], gap: 15, why: "engine on rubber to anything fixed, 15 mm (hobby article, second-hand)" },
  { between: ["kind:transaxle", "any"], gap: 15, why: "gearbox on rubber to anything fixed, 15 mm (hobby article, second-hand)" },
  { between: ["kind:fan", "kind:radiator"], gap: 20, why: "fan to radiator, four-cylinder, 20 mm (hobby article, second-hand)" },
  { between: ["kind:tyre", "any"], gap: 25, why: "tyre to anything, 25 mm (1 in; provincial inspection manual, quoted second-hand)" },
  { between: ["kind:column", "any"], gap: 15, why: "steering shaft through its sweep, 15 mm (common practice, no source)" },
  { between: ["hot", "any"], gap: 25, why: "hot part to metal or a metal panel, 25 mm (common practice, no source)" },
  { between: ["hot", "kind:harness"], gap: 100, why: "exhaust to harness, bare, 100 mm (common practice, no source)" },
  { between: ["hot", "kind:cable"], gap: 100, why: "exhaust to cable, bare, 100 mm (common practice, no source)" },
  { between: ["hot", "kind:fuel"], gap: 100, why: "exhaust to fuel line, 100 mm or a shield (common practice, no source)" },
  { between: ["hot", "kind:tank"], gap: 100, why: "exhaust to tank, 100 mm or a shield (common practice, no source)" },
  { between: ["hot", "kind:brake"], gap: 100, why: "exhaust to brake line or hose, 100 mm or a shield (common practice, no source)" },
  { between: ["hot", "kind:clutch"], gap: 100, why: "exhaust to clutch line, 100 mm or a shield (common practice, no source)" },
  { between: ["hot", "kind:battery"], gap: 100, why: "battery to anything hot, 100 mm (common practice, no source)" },
  { between: ["hot", "kind:ecu"], gap: 100, why: "electronics to anything hot, 100 mm (common practice, no source)" },
  { between: ["hot", "limited"], gap: 75, why: "hot to heat-sensitive, bare, 75 mm (common practice, no source)" },
  { between: ["hot", "hot"], gap: 5, why: "hot to hot, cold they must not rattle (common practice, no source)" },
  { between: ["kind:harness", "kind:fuel"], gap: 51, why: "wire to fuel line, never below 2 in (AC 43.13-1B 11-96)" },
];

/** A layout with a plain chassis and the starting rules, nothing placed yet. */
export function emptyLayout(name: string): Layout {
  const tyre = { diameter: 630, width: 205, loadedRadius: 300 };
  return layoutSchema.parse({
    format: "handbreadth-layout", version: 1, name,
    chassis: {
      wheelbase: 2500,
      front: { track: 1480, rideHeight: 120, bump: 60, droop: 60, steer: 32, tyre },
      rear: { track: 1480, rideHeight: 120, bump: 60, droop: 60, tyre },
      datums: [],
    },
    rules: { near: 150, band: 5, gap: 10, pairs: STARTING_RULES },
  } satisfies LayoutInput);
}
