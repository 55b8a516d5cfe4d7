import type { PartKind, RunKind } from "#core/layout/schema.ts";
import { PART_KINDS, PART_STATUSES, RUN_KINDS, SOURCE_KINDS, WHEEL_NAMES } from "#core/layout/schema.ts";

/** Kinds whose key is not yet the word a person would use. */
const OTHER_WORDS: Partial<Record<PartKind | RunKind, string>> = { ecu: "engine computer", fusebox: "fuse box", column: "steering shaft", rack: "steering rack", harness: "loom", fan: "fan", exhaust: "exhaust pipe", coolant: "coolant hose", intake: "intake hose", oil: "oil line", fuel: "fuel line", brake: "brake", clutch: "clutch line", vacuum: "vacuum line", pedals: "pedal box" };
export const kindWord = (kind: string): string => OTHER_WORDS[kind as PartKind] ?? kind;
const words = <T extends PartKind | RunKind>(kinds: readonly T[]) => kinds.map((kind) => [kind, kindWord(kind)] as const);
export const PART_KIND_CHOICES = [...words(PART_KINDS)].sort((a, b) => (a[0] === "other" ? 1 : b[0] === "other" ? -1 : a[1] < b[1] ? -1 : 1));
export const RUN_KIND_CHOICES = words(RUN_KINDS);
export const SOURCE_CHOICES = [["measured", "tape, on the part"], ["drawing", "a drawing"], ["estimate", "an estimate"], ["reserved", "room kept for it"]] as const satisfies readonly (readonly [(typeof SOURCE_KINDS)[number], string])[];
export const sourceWord = (how: string): string => SOURCE_CHOICES.find(([key]) => key === how)?.[1] ?? how;
export const STATUS_CHOICES = PART_STATUSES.map((status) => [status, status] as const);
export const WHEEL_CHOICES = WHEEL_NAMES.map((wheel) => [wheel, wheel.replace("-", ", ")] as const);
