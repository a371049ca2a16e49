import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { atLeast, casesText, spanText } from "../../src/words/index.ts";

describe("how often, in cases", () => {
  it.each([
    [0.8, "4 of 5"],
    [0.9, "9 of 10"],
    [0.5, "1 of 2"],
    [0.75, "3 of 4"],
    [0.85, "17 of 20"],
    [0.825, "82 of 100"],
    [0.93812, "93 of 100"],
    [0.07, "7 of 100"],
    [0.9999, "over 99 of 100"],
    [1, "over 99 of 100"],
    [0.004, "fewer than 1 of 100"],
    [0, "fewer than 1 of 100"],
  ])("writes %d as %s", (share, text) => {
    expect(casesText(share)).toBe(text);
  });

  it("never promises more than there is", () => {
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 0.99, noNaN: true }), (share) => {
        const [cases = 0, of = 1] = casesText(share).split(" of ").map(Number);
        expect(cases / of).toBeLessThanOrEqual(share + 1e-9);
        expect(cases / of).toBeGreaterThan(share - 0.0101);
      }),
    );
  });
});

describe("a size for the reader who plans", () => {
  it.each([
    [46_541, "46,600"],
    [46_600, "46,600"],
    [999, "999"],
    [999.2, "1,000"],
    [1001, "1,010"],
    [7, "7"],
    [0.3, "1"],
    [1_000_000_001, "1,010,000,000"],
  ])("rounds %d up to %s", (units, text) => {
    expect(atLeast(units)).toBe(text);
  });
});

describe("how long", () => {
  it.each([
    [1, "1 day"],
    [13, "13 days"],
    [14, "2 weeks"],
    [31, "5 weeks"],
    [730, "105 weeks"],
    [731, "over 2 years"],
    [40_000, "over 109 years"],
  ])("writes %d days as %s", (days, text) => {
    expect(spanText(days)).toBe(text);
  });
});
