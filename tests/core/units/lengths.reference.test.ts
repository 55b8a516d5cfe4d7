import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { formatLength } from "../../../src/core/units/format-length.ts";
import { parseLength, type LengthUnit } from "../../../src/core/units/parse-length.ts";

const SEED = 20261201;
const mm = (text: string, unit: LengthUnit = "mm") => {
  const read = parseLength(text, unit);
  return read.ok ? read.mm : read.message;
};

describe("parseLength", () => {
  // 1 in = 25.4 mm exactly (international yard and pound agreement, 1959)
  it.each([
    ["310", 310], ["310mm", 310], ["31 cm", 310], ["0.31 m", 310], ['12 3/8"', 314.325], ["12.375 in", 314.325], [`1' 2"`, 355.6], [`1' 2 3/8"`, 365.125],
    ["1'2", 355.6], ["1 ft", 304.8], ["3/8 in", 9.525], ["412 + 6", 418], ["412-6.5", 405.5], ["-12", -12], ["1 in + 2 mm", 27.4], ["-1' 2\"", -355.6], ["12,5", 12.5],
    ["12⅜″", 314.325], ["½ in", 12.7], ["  7  ", 7], ["−4", -4], [".5 in", 12.7], ["19 5/8 in", 498.475],
  ])("reads %s", (text, expected) => expect(mm(text)).toBeCloseTo(expected, 9));

  it("takes a bare number in the person's unit", () => {
    expect(mm("12 3/8", "in-fraction")).toBeCloseTo(314.325, 9);
    expect(mm("2", "in")).toBeCloseTo(50.8, 9);
  });

  it.each(["", "abc", "12 mm 5", "19.5/8", "19.5 1/8", "1/0", "+", "5 -", "12 3 4", "1e5", "NaN", "12 furlongs", "--5", "9".repeat(400)])("refuses %j with a sentence", (text) => {
    const read = parseLength(text, "mm");
    expect(read.ok).toBe(false);
    expect(read.ok ? "" : read.message.length).toBeGreaterThan(10);
  });
});

describe("formatLength", () => {
  it.each([
    [310, "mm", "310.0"], [-0.04, "mm", "0.0"], [314.325, "in", "12.375"], [314.325, "in-fraction", "12 3/8"], [498.5, "in-fraction", "19 5/8"], [25.4 - 0.1, "in-fraction", "1"],
    [-1.5875, "in-fraction", "-1/16"], [0.2, "in-fraction", "0"], [12.7, "in-fraction", "1/2"], [Infinity, "mm", "–"],
  ] as const)("shows %d mm in %s as %s", (value, unit, text) => expect(formatLength(value, unit)).toBe(text));

  it(`is read back within half a step (seed ${SEED})`, () => {
    const half = { mm: 0.05, in: 0.0127, "in-fraction": 25.4 / 32 } as const;
    fc.assert(fc.property(fc.double({ min: -20000, max: 20000, noNaN: true }), fc.constantFrom<LengthUnit>("mm", "in", "in-fraction"), (value, unit) => {
      const read = parseLength(formatLength(value, unit), unit);
      expect(read.ok && Math.abs(read.mm - value)).toBeLessThanOrEqual(half[unit] + 1e-9);
    }), { seed: SEED, numRuns: 2000 });
  });
});
