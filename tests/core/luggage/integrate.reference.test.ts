import { describe, expect, it } from "vitest";
import { gaussLegendre, integrate } from "../../../src/core/luggage/integrate.ts";

describe("gaussLegendre", () => {
  it("has the tabled nodes and weights for three and six points (Abramowitz and Stegun, table 25.4, from memory)", () => {
    const three = gaussLegendre(3);
    expect(three.at[0]! * 2 - 1).toBeCloseTo(-0.7745966692414834, 14);
    expect(three.weight[1]! * 2).toBeCloseTo(0.8888888888888889, 14);
    const six = gaussLegendre(6);
    expect(six.at[5]! * 2 - 1).toBeCloseTo(0.932469514203152, 13);
    expect(six.weight[2]! * 2).toBeCloseTo(0.467913934572691, 13);
  });
});

describe("integrate", () => {
  it("takes square-root ends and steps at breaks: a ball's sections and a box's", () => {
    const r = 70;
    const sections = (x: number) => (Math.abs(x) < r ? Math.PI * (r * r - x * x) : 0) + (x > 100 && x < 150 ? 500 : 0);
    const expected = (4 / 3) * Math.PI * r ** 3 + 500 * 50; // Archimedes
    expect(Math.abs(integrate(sections, -200, 300, [-r, r, 100, 150]) / expected - 1)).toBeLessThan(1e-6);
    // half-axes across: area of a lying cylinder's section is 2 L sqrt(r^2 - x^2)
    const lying = (x: number) => (Math.abs(x) < r ? 2 * 300 * Math.sqrt(r * r - x * x) : 0);
    expect(Math.abs(integrate(lying, -200, 300, [-r, r]) / (Math.PI * r * r * 300) - 1)).toBeLessThan(1e-6);
  });

  it("is nothing over an empty range", () => {
    expect(integrate(() => 1, 5, 5, [])).toBe(0);
    expect(integrate(() => 1, 5, 4, [])).toBe(0);
  });
});
