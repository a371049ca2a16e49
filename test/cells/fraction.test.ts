import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fraction, nearestNumber } from "../../src/cells/index.ts";

const near = (numerator: bigint, denominator: bigint) => nearestNumber(fraction(numerator, denominator));

describe("the double nearest to a fraction", () => {
  it("is the one that reading the decimal gives", () => {
    fc.assert(
      fc.property(
        fc.bigInt({ min: -(10n ** 40n), max: 10n ** 40n }),
        fc.integer({ min: 0, max: 60 }),
        (digits, places) => {
          expect(near(digits, 10n ** BigInt(places))).toBe(Number(`${digits}e-${places}`) + 0);
        },
      ),
      { numRuns: 1000 },
    );
  });

  it("is a double itself where the fraction is one", () => {
    fc.assert(
      fc.property(fc.maxSafeInteger(), fc.integer({ min: -900, max: 900 }), (whole, exponent) => {
        const power = 2n ** BigInt(Math.abs(exponent));
        const exact = exponent < 0 ? near(BigInt(whole), power) : near(BigInt(whole) * power, 1n);
        expect(exact).toBe(whole * 2 ** exponent + 0);
      }),
    );
  });

  it("rounds a tie to even, and anything beyond a tie away from it", () => {
    const tie = 2n ** 53n + 1n; // half way between 2^53 and 2^53 + 2
    expect(near(tie, 1n)).toBe(2 ** 53);
    expect(near(tie + 2n, 1n)).toBe(2 ** 53 + 4);
    expect(near(tie * 10n ** 60n + 1n, 10n ** 60n)).toBe(2 ** 53 + 2);
    expect(near(tie * 10n ** 60n - 1n, 10n ** 60n)).toBe(2 ** 53);
  });

  it("does not depend on how the fraction is written", () => {
    fc.assert(
      fc.property(
        fc.bigInt({ min: -(2n ** 200n), max: 2n ** 200n }),
        fc.bigInt({ min: 1n, max: 2n ** 200n }),
        fc.bigInt({ min: 1n, max: 2n ** 900n }),
        (a, b, times) => {
          expect(near(a * times, b * times)).toBe(near(a, b));
          expect(near(-a, -b)).toBe(near(a, b));
          expect(near(-a, b)).toBe(0 - near(a, b));
        },
      ),
    );
  });

  it("is 0 and not -0 for nothing, and ends where doubles end", () => {
    expect(Object.is(near(0n, -5n), 0)).toBe(true);
    expect(near(1n, 10n ** 400n)).toBe(0);
    expect(near(10n ** 400n, 1n)).toBe(Number.POSITIVE_INFINITY);
    expect(near(1n, 10n ** 300n)).toBe(1e-300);
  });

  it("refuses a denominator of 0: that is our mistake", () => {
    expect(() => fraction(3n, 0n)).toThrow("3 over 0");
  });
});
