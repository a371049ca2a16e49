import { describe, expect, it } from "vitest";
import { integral } from "../../src/stats/quadrature.ts";
import { root } from "../../src/stats/root.ts";
import { expectWithin } from "./expect.ts";

describe("the integral", () => {
  // Kronrod's 15 points are exact up to degree 22, Gauss's 7 up to 13: that holds each digit of points and weights.
  it("of a polynomial needs one panel and no more", () => {
    for (let degree = 0; degree <= 22; degree += 2) {
      let calls = 0;
      const power = (x: number) => {
        calls++;
        return x ** degree;
      };
      expectWithin(integral(power, [-1, 1], degree <= 13 ? 1e-14 : 1), 2 / (degree + 1), 3e-15);
      expect(calls).toBe(15);
    }
  });

  it("of known functions has more digits than asked for", () => {
    expectWithin(integral(Math.exp, [0, 1], 1e-10), Math.E - 1, 1e-14);
    expectWithin(
      integral((x) => Math.exp((-x * x) / 2), [-40, 0, 40], 1e-10),
      Math.sqrt(2 * Math.PI),
      1e-14,
    );
    expectWithin(
      integral((x) => 1 / (1 + (1000 * x) ** 2), [-1, 0, 1], 1e-10),
      Math.atan(1000) / 500,
      1e-12,
    );
    expect(integral(Math.sin, [-1, 1], 1)).toBe(0);
  });

  it("takes a step at the end of a panel, and a root without slope", () => {
    expectWithin(
      integral((x) => (x < 0.3 ? 0 : 1), [0, 0.3, 1], 1e-10),
      0.7,
      1e-15,
    );
    expectWithin(integral(Math.sqrt, [0, 1], 1e-10), 2 / 3, 1e-10);
  });

  it("says so when a function cannot be integrated", () => {
    expect(() => integral(() => Number.NaN, [0, 1], 1e-10)).toThrow("panels");
  });
});

describe("the root", () => {
  it("is found to the last digits, from either side", () => {
    for (const f of [
      (x: number) => x * x - 2,
      (x: number) => 2 - x * x,
      (x: number) => Math.log(x * x) - Math.log(2),
    ]) {
      expectWithin(root(f, 0.001, 1e6), Math.SQRT2, 4 * Number.EPSILON);
    }
    expectWithin(
      root((x) => Math.atan(x - 1e-9), -1e9, 1e9),
      1e-9,
      1e-14,
    );
    expectWithin(
      root((x) => (x - 0.1) ** 9, -3, 4),
      0.1,
      1e-10,
    );
  });

  it("may be an end", () => {
    expect(root((x) => x, 0, 1)).toBe(0);
    expect(root((x) => x - 1, 0, 1)).toBe(1);
  });

  it("is not looked for where nothing crosses", () => {
    expect(() => root((x) => x * x + 1, -1, 1)).toThrow("no crossing between -1 (2) and 1 (2)");
  });
});
