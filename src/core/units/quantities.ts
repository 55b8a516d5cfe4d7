import { z } from "zod";

/**
 * The unit vocabulary of the document: every numeric field of a schema is made by one of these helpers, which carry unit,
 * range and description into the JSON Schema. A test fails on a bare `z.number()`.
 * Base units: millimetre, kilogram, degree Celsius, degree of angle, second, ampere.
 */
interface Range {
  /** least allowed value */
  min?: number;
  /** greatest allowed value */
  max?: number;
  /** value must be greater than this */
  over?: number;
}

function quantity(unit: string, defaults: Range) {
  return (description: string, range: Range = {}) => {
    const { min, max, over } = { ...defaults, ...range };
    let schema = z.number();
    if (over !== undefined) schema = schema.gt(over);
    else if (min !== undefined) schema = schema.min(min);
    if (max !== undefined) schema = schema.max(max);
    return schema.meta({ description, unit });
  };
}

/** Farthest a coordinate may lie from the origin, mm: 100 m, far beyond any car, near enough to keep doubles exact to 1e-11. */
export const FARTHEST = 100_000;

/** A coordinate or signed length, mm. */
export const mm = quantity("mm", { min: -FARTHEST, max: FARTHEST });
/** A size: more than nothing, mm. */
export const size = quantity("mm", { over: 0, max: FARTHEST });
/** A length that may be nothing but never negative, mm. */
export const length = quantity("mm", { min: 0, max: FARTHEST });
/** Mass, kg. */
export const kg = quantity("kg", { min: 0, max: 100_000 });
/** Temperature, degrees Celsius; absolute zero and up. */
export const degC = quantity("degC", { min: -273.15, max: 3000 });
/** Angle, degrees. */
export const deg = quantity("deg", { min: -360, max: 360 });
/** A share between nothing and all. */
export const share = quantity("1", { min: 0, max: 1 });
/** A pure number along a direction. */
export const component = quantity("1", { min: -1e6, max: 1e6 });
/** Air speed, metres a second. */
export const metresPerSecond = quantity("m/s", { min: 0, max: 150 });
/** Electric current, amperes. */
export const ampere = quantity("A", { min: 0, max: 5000 });
/** Thermal conductivity, W/mK. */
export const wattPerMetreKelvin = quantity("W/mK", { over: 0, max: 500 });
/** How many of something. */
export const count = (description: string, range: Range = {}) =>
  z
    .int()
    .min(range.min ?? 0)
    .max(range.max ?? 10_000)
    .meta({ description, unit: "count" });
