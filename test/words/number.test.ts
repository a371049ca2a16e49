import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  alike,
  chanceText,
  count,
  number,
  percent,
  plain,
  planPercent,
  pText,
  signed,
  signedPercent,
} from "../../src/words/index.ts";

// All expected texts here are written by hand from the rule in the docstring.
describe("numbers", () => {
  it.each([
    [0, "0"],
    [8, "8"],
    [1204, "1,204"],
    [1048213, "1,048,213"],
    [-1234567, "−1,234,567"],
    [96.4, "96.40"],
    [103.9, "103.9"],
    [1234.56, "1,235"],
    [0.0809, "0.08090"],
    [-0.5, "−0.5000"],
    [1.5e-9, "1.500 × 10^−9"],
    [2e18, "2.000 × 10^18"],
  ])("writes %s as %s", (value, text) => expect(number(value)).toBe(text));

  it("gives figures side by side the same places", () => {
    expect(alike([96.4, 103.9])).toEqual(["96.40", "103.90"]);
    expect(alike([3, 4])).toEqual(["3", "4"]);
    expect(alike([0, 0.5])).toEqual(["0.0000", "0.5000"]);
    expect(alike([1234.5, 0.0000123])).toEqual(["1,234.500", "0.000"]);
    expect(alike([1234.52, 1234.91])).toEqual(["1,234.5", "1,234.9"]);
  });

  it("has no minus before what rounds to zero, and no plus either", () => {
    expect(signed(-0.001, 1)).toBe("0.0");
    expect(signed(0.001, 1)).toBe("0.0");
    expect(signed(0)).toBe("0");
    expect(signed(7.5)).toBe("+7.500");
    expect(signed(-1.2, 1)).toBe("−1.2");
  });

  it("refuses NaN and infinity: they never reach a reader", () => {
    for (const value of [Number.NaN, Number.POSITIVE_INFINITY])
      expect(() => number(value)).toThrow("reached the reader");
  });

  it.each([
    [0.05, "0.05"],
    [5, "5"],
    [0.002, "0.002"],
    [1.5e-7, "0.00000015"],
    [0.1 + 0.2, "0.3"],
    [12000, "12,000"],
  ])("writes the plan's %s with the plan's digits", (value, text) => expect(plain(value)).toBe(text));

  it("reads back as the number it shows, to half a unit of the last digit", () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1e12, noNaN: true }), (value) => {
        const back = Number(number(value).replaceAll(",", ""));
        return Math.abs(back - value) <= 0.5 * (value >= 1000 ? 1 : value * 1.001e-3);
      }),
    );
  });

  it("groups thousands from the right only", () => {
    fc.assert(
      fc.property(fc.nat(), (n) => /^\d{1,3}(,\d{3})*$/.test(count(n)) && Number(count(n).replaceAll(",", "")) === n),
    );
  });
});

describe("percent", () => {
  it.each([
    [0, "0%"],
    [0.12, "12.0%"],
    [0.0012, "0.12%"],
    [0.000012, "0.0012%"],
    [1, "100.0%"],
    [0.99999, "99.9990%"],
    [12.34, "1,234%"],
  ])("writes %s as %s", (share, text) => expect(percent(share)).toBe(text));

  it("has a sign where asked", () => {
    expect(signedPercent(0.1)).toBe("+10.0%");
    expect(signedPercent(-0.012)).toBe("−1.2%");
    expect(signedPercent(0)).toBe("0%");
  });

  it("keeps the plan's digits for what the plan states", () => {
    expect([0.05, 0.075, 0.07, 0.001, 1.5].map(planPercent)).toEqual(["5%", "7.5%", "7%", "0.1%", "150%"]);
  });
});

describe("p-values", () => {
  it.each([
    [0, "p < 0.0001"],
    [0.0000999, "p < 0.0001"],
    [0.0001, "p = 0.0001"],
    [0.00052, "p = 0.00052"],
    [0.0312, "p = 0.031"],
    [0.3173, "p = 0.317"],
    [1, "p = 1"],
  ])("writes %s as %s", (p, text) => expect(pText(p)).toBe(text));

  it("never rounds a p-value across a limit that readers know", () => {
    expect(pText(0.04996)).toBe("p = 0.04996");
    expect(pText(0.00996)).toBe("p = 0.00996");
    expect(pText(0.000997)).toBe("p = 0.000997");
    const limits = [0.05, 0.01, 0.001];
    fc.assert(
      fc.property(fc.double({ min: 0.0001, max: 1, noNaN: true }), (p) => {
        const shown = Number(pText(p).replace("p = ", ""));
        return limits.every((limit) => p < limit === shown < limit || p > limit - 1e-5);
      }),
    );
  });

  it("says how often chance does that", () => {
    expect(chanceText(1e-9)).toBe("in fewer than one test in a million");
    expect(chanceText(0.00077)).toBe("in about one test in 1,300");
    expect(chanceText(0.12)).toBe("in about 12 of 100 tests");
  });
});
