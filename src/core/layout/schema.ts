import { z } from "zod";
import {
  ampere, component, count, deg, degC, kg, length, metresPerSecond, mm, share, size, wattPerMetreKelvin,
} from "../units/quantities.ts";

/**
 * The layout file, version 1: the one truth about the document. Types are inferred from here, the JSON Schema is made from
 * here. What a schema cannot say (unique keys, carriers without cycles, outlines that do not cross) is in invariants.ts.
 */

export const LIMITS = { parts: 2000, runs: 500, outlinePoints: 2000, bytes: 20 * 1024 * 1024, convexPieces: 200, sheetPieces: 2000 } as const;

const KEY_PATTERN = /^[a-z0-9][a-z0-9-]*$/;
export const key = z
  .string()
  .max(60)
  .regex(KEY_PATTERN, "a key is small letters, digits and hyphens, starting with a letter or digit")
  .meta({ description: "Key: names this thing in files and rules" });
const text = (description: string, max = 2000) => z.string().max(max).meta({ description });
const extra = z.record(z.string(), z.unknown()).optional().meta({ description: "Anything; kept, never read" });

/** An object that refuses unknown keys, but carries `extra`. */
const thing = <T extends z.core.$ZodLooseShape>(shape: T) => z.strictObject({ ...shape, extra });

const point3 = (description: string) => z.tuple([mm("x"), mm("y"), mm("z")]).meta({ description });
const direction3 = (description: string) =>
  z
    .tuple([component("along x"), component("along y"), component("along z")])
    .refine((d) => Math.hypot(d[0], d[1], d[2]) > 1e-9, "a direction needs a length")
    .meta({ description });
const outline = (description: string, least = 3) =>
  z.array(z.tuple([mm("first"), mm("second")])).min(least).max(LIMITS.outlinePoints).meta({ description });
const loop3 = (description: string) => z.array(point3("corner")).min(3).max(LIMITS.outlinePoints).meta({ description });
const reach = (description: string) =>
  z
    .tuple([mm("low", { max: 0 }), mm("high", { min: 0 })])
    .meta({ description });

export const placement = {
  at: point3("Where the local origin lies").default([0, 0, 0]),
  turn: z.tuple([deg("roll about x"), deg("pitch about y"), deg("yaw about z")]).default([0, 0, 0])
    .meta({ description: "Right-hand turns about x, then y, then z" }),
};
const axis = z.enum(["x", "y", "z"]);

export const solidSchema = z.discriminatedUnion("type", [
  thing({ type: z.literal("box"), size: z.tuple([size("along x"), size("along y"), size("along z")]), ...placement }),
  thing({ type: z.literal("round"), diameter: size("Diameter"), length: size("Length"), axis, ...placement }),
  thing({
    type: z.literal("cone"),
    diameters: z.tuple([length("Diameter at the low end"), length("Diameter at the high end")])
      .refine((d) => d[0] > 0 || d[1] > 0, "one of the two diameters must be more than 0"),
    length: size("Length"), axis, ...placement,
  }),
  thing({ type: z.literal("oval"), width: size("Along the first of the other two axes"), height: size("Along the second"), length: size("Length"), axis, ...placement }),
  thing({ type: z.literal("ball"), diameter: size("Diameter"), ...placement }),
  thing({
    type: z.literal("prism"), plane: z.enum(["xy", "xz", "yz"]), outline: outline("Simple polygon in that plane"),
    from: mm("Start along the third axis"), to: mm("End along the third axis"), ...placement,
  }),
  thing({
    type: z.literal("outlines"), top: outline("Seen from above, x and y").optional(), side: outline("Seen from the side, x and z").optional(),
    rear: outline("Seen from behind, y and z").optional(), ...placement,
  }),
  thing({
    type: z.literal("bar"), from: point3("One end of the centre line"), to: point3("Other end"), diameter: size("Round: diameter").optional(),
    size: z.tuple([size("width"), size("height")]).optional().meta({ description: "Rectangular: width and height" }),
    roll: deg("Turn about its own length").default(0), ...placement,
  }),
  thing({
    type: z.literal("sheet"), rows: z.array(z.array(point3("grid point")).min(2).max(200)).min(2).max(200),
    thickness: size("Thickness"), ...placement,
  }),
]);

export const PART_KINDS = [
  "engine", "transaxle", "turbo", "manifold", "wastegate", "muffler", "catalyst", "radiator", "fan", "intercooler", "battery", "ecu",
  "fusebox", "tank", "pump", "reservoir", "sensor", "valve", "cylinder", "booster", "seat", "pedals", "column", "rack", "frame", "tyre",
  "wheel", "brake", "suspension", "spring", "shroud", "shield", "glass", "lid", "panel", "lamp", "plate", "other",
] as const;
export const RUN_KINDS = ["exhaust", "intake", "coolant", "oil", "fuel", "brake", "clutch", "vacuum", "harness", "cable"] as const;
export const PART_STATUSES = ["needed", "ordered", "on hand", "fitted"] as const;
export const SOURCE_KINDS = ["measured", "drawing", "estimate", "reserved"] as const;
export const WHEEL_NAMES = ["front-left", "front-right", "rear-left", "rear-right"] as const;
export const RUN_MATERIALS = ["steel", "304", "321", "409", "titanium"] as const;

const plusMinus = z.union([
  length("Larger by up to this, all round"),
  thing({ x: reach("along local x").default([0, 0]), y: reach("along local y").default([0, 0]), z: reach("along local z").default([0, 0]) }),
]).meta({ description: "How much larger it may turn out" });

export const sourceSchema = thing({ how: z.enum(SOURCE_KINDS).default("measured"), plusMinus: plusMinus.default(0) });
export const movementSchema = thing({ x: reach("along x").default([0, 0]), y: reach("along y").default([0, 0]), z: reach("along z").default([0, 0]) });
const still = () => ({ x: [0, 0] as [number, number], y: [0, 0] as [number, number], z: [0, 0] as [number, number] });

export const heatSchema = thing({
  surface: degC("Surface temperature").optional(),
  limit: degC("Highest temperature it stands").optional(),
  emissivity: share("Emissivity", { over: 0 }).optional(),
}).refine((h) => h.surface !== undefined || h.limit !== undefined, "at least one of surface and limit is needed");

const portSchema = thing({
  key, at: point3("Place, local"), axis: direction3("Outward direction, local").default([1, 0, 0]),
  kind: z.enum(["thread", "tube", "hose", "flange", "plug", "outlet"]),
  spec: z.record(z.string(), z.union([text("value"), z.number().meta({ unit: "as named" }), z.boolean()])).default({}),
});
const mountSchema = thing({ key, at: point3("Hole centre, local"), axis: direction3("Hole axis").default([0, 0, 1]), diameter: size("Hole diameter") });
const roomForSchema = thing({ key, name: text("Name", 120), solids: z.array(solidSchema).min(1).max(50) });

export const partSchema = thing({
  key, name: text("Name", 120).min(1), kind: z.enum(PART_KINDS), group: text("Group", 60).default(""), locked: z.boolean().default(false),
  mirrorOf: key.nullable().default(null),
  solids: z.array(solidSchema).min(1).max(200),
  at: point3("Where the local origin lies"), turn: placement.turn,
  source: sourceSchema.default({ how: "measured", plusMinus: 0 }),
  carriedBy: key.nullable().default(null),
  movement: movementSchema.default(still),
  rock: z.array(thing({ about: point3("A point on the axis"), axis: direction3("Axis"), angle: z.tuple([deg("low", { max: 0 }), deg("high", { min: 0 })]) })).max(8).default([]),
  mass: kg("Mass").optional(), massAt: point3("Centre of mass, local").default([0, 0, 0]),
  heat: heatSchema.optional(),
  liftOut: z.array(thing({ direction: direction3("Direction"), distance: size("How far") })).max(20).default([]),
  roomFor: z.array(roomForSchema).max(50).default([]),
  ports: z.array(portSchema).max(200).default([]),
  mounts: z.array(mountSchema).max(200).default([]),
  status: z.enum(PART_STATUSES).default("needed"),
});

const nodeSchema = thing({
  key, at: point3("Place"), on: text("Part, or part.port", 121).optional(), clip: key.optional(),
  bend: length("Bend radius here, to the centre line").optional(), surface: degC("Surface temperature here").optional(),
});
const legSchema = thing({ from: key, to: key, diameter: size("Outer diameter of this leg").optional(), flex: z.boolean().default(false) });
const wireSchema = thing({ key, from: key, to: key, gauge: text("'20 AWG' or '0.5 mm2'", 20), amps: ampere("Current").optional() });

export const runSchema = thing({
  key, name: text("Name", 120).min(1), kind: z.enum(RUN_KINDS), diameter: size("Outer diameter"),
  bendRadius: length("Bend radius to the centre line").default(0),
  material: z.enum(RUN_MATERIALS).optional(), anchor: key.optional(),
  carriedBy: key.nullable().default(null), movement: movementSchema.default(still),
  source: sourceSchema.default({ how: "measured", plusMinus: 0 }), heat: heatSchema.optional(),
  group: text("Group", 60).default(""), mirrorOf: key.nullable().default(null), locked: z.boolean().default(false),
  cover: thing({
    thickness: size("Thickness"), emissivity: share("Emissivity", { over: 0 }).optional(),
    conductivity: wattPerMetreKelvin("Conductivity").optional(), limit: degC("Highest temperature it stands").optional(),
  }).optional(),
  nodes: z.array(nodeSchema).min(2).max(1000),
  legs: z.array(legSchema).max(1000).default([]),
  wires: z.array(wireSchema).max(2000).default([]),
});

export const spaceSchema = thing({
  key, name: text("Name", 120).min(1), top: outline("Seen from above").optional(), side: outline("Seen from the side").optional(),
  rear: outline("Seen from behind").optional(), opening: loop3("Loop that things go in through").optional(),
  wallGap: length("Kept from its own walls").default(0), partGap: length("Kept from parts").default(10),
});
export const luggageSchema = thing({
  key, name: text("Name", 120).min(1), size: z.tuple([size("one side"), size("another"), size("third")]),
  count: count("How many").default(1), upright: z.boolean().default(false),
});
export const glassSchema = thing({ key, name: text("Name", 120).min(1), opening: loop3("Edge of the opening"), part: key.optional(), frit: length("Width of the black edge").default(0) });
export const eyeSchema = thing({ key, name: text("Name", 120).min(1), at: point3("Where the eye is") });
export const shaftSchema = thing({
  key, name: text("Name", 120).min(1), inboard: point3("Inboard joint centre"), outboard: point3("Outboard joint centre"),
  diameter: size("Diameter").optional(), wheel: z.enum(WHEEL_NAMES).optional(), arm: size("Radius the outboard joint swings on").optional(),
  maxAngle: deg("Largest joint angle", { min: 0, max: 90 }).optional(), plunge: length("Plunge available").optional(),
});

const tyreSchema = thing({ diameter: size("Free diameter"), width: size("Width"), loadedRadius: size("Wheel centre to ground, loaded") });
const axleSchema = thing({
  track: size("Track"), rideHeight: mm("Chassis zero plane above ground"), bump: length("Travel up").default(0), droop: length("Travel down").default(0),
  steer: deg("Steering angle each way", { min: 0, max: 90 }).default(0), tyre: tyreSchema,
  rim: thing({ diameter: size("Diameter"), width: size("Width"), offset: mm("Offset") }).optional(),
});
export const datumSchema = thing({ key, name: text("Name", 120).min(1), axis, at: mm("Where it lies along its axis") });
export const chassisSchema = thing({ wheelbase: size("Wheelbase"), front: axleSchema, rear: axleSchema, datums: z.array(datumSchema).max(200).default([]) });

export const bodySchema = thing({
  side: outline("Seen from the side").optional(), top: outline("Seen from above").optional(), rear: outline("Seen from behind").optional(),
  sections: z.array(thing({ x: mm("Station"), line: outline("Open line, y and z", 2) })).max(200).default([]),
  skin: length("Skin thickness").default(0), skinGap: length("Kept between skin and parts").default(0),
  overhangLimit: thing({ share: share("Rear overhang as a share of the wheelbase", { over: 0, max: 2 }), why: text("Why").default("") }).optional(),
});
export const airSchema = thing({ temperature: degC("Bay air").default(60), speed: metresPerSecond("Air speed").default(0), surroundings: degC("Surroundings").default(60) });

const SELECTOR = /^(key:[a-z0-9][a-z0-9-]*|kind:[a-z]+|group:.{1,60}|hot|limited|moving|any)$/;
const selector = z.string().max(70).regex(SELECTOR, "key:…, kind:…, group:…, hot, limited, moving or any");
export const pairRuleSchema = thing({ between: z.tuple([selector, selector]), gap: length("Required gap"), why: text("Why").default("") });
export const rulesSchema = thing({
  near: length("Pairs closer than this are listed").default(150), band: length("Tight below this margin").default(5),
  gap: length("Required gap where no rule says otherwise").default(10), pairs: z.array(pairRuleSchema).max(500).default([]),
});
export const contactSchema = thing({ between: z.tuple([text("key", 121), text("key", 121)]), why: text("Why").default("") });

export const layoutSchema = z.strictObject({
  format: z.literal("handbreadth-layout"), version: z.literal(1), name: text("Name", 200).min(1), notes: text("Notes", 20_000).default(""),
  chassis: chassisSchema,
  parts: z.array(partSchema).max(LIMITS.parts).default([]),
  runs: z.array(runSchema).max(LIMITS.runs).default([]),
  spaces: z.array(spaceSchema).max(200).default([]),
  luggage: z.array(luggageSchema).max(200).default([]),
  glass: z.array(glassSchema).max(100).default([]),
  eyes: z.array(eyeSchema).max(100).default([]),
  shafts: z.array(shaftSchema).max(100).default([]),
  body: bodySchema.default(() => bodySchema.parse({})),
  air: airSchema.default(() => airSchema.parse({})),
  rules: rulesSchema.default(() => rulesSchema.parse({})),
  contacts: z.array(contactSchema).max(2000).default([]),
  extra,
});

/** A whole layout with every default filled in. */
export type Layout = z.output<typeof layoutSchema>;
/** A layout as a file may give it: defaults left out. */
export type LayoutInput = z.input<typeof layoutSchema>;
export type Solid = z.output<typeof solidSchema>;
export type Part = z.output<typeof partSchema>;
export type PartKind = (typeof PART_KINDS)[number];
export type Run = z.output<typeof runSchema>;
export type RunKind = (typeof RUN_KINDS)[number];
export type RunNode = Run["nodes"][number];
export type Space = z.output<typeof spaceSchema>;
export type Luggage = z.output<typeof luggageSchema>;
export type Glass = z.output<typeof glassSchema>;
export type Eye = z.output<typeof eyeSchema>;
export type Shaft = z.output<typeof shaftSchema>;
export type Chassis = z.output<typeof chassisSchema>;
export type Body = z.output<typeof bodySchema>;
export type Rules = z.output<typeof rulesSchema>;
export type PairRule = z.output<typeof pairRuleSchema>;
export type Contact = z.output<typeof contactSchema>;
export type Movement = z.output<typeof movementSchema>;
export type Source = z.output<typeof sourceSchema>;
