import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { divideRounded, nanoNumber, nanoText, quotient } from "../../src/engine/nano.ts";

const large = fc
  .integer({ min: 0, max: 130 })
  .chain((bits) => fc.bigInt({ min: -(2n ** BigInt(bits)), max: 2n ** BigInt(bits) }));
const positive = fc.integer({ min: 0, max: 130 }).chain((bits) => fc.bigInt({ min: 1n, max: 2n ** BigInt(bits) }));

/** Twice the exact distance of a double from value / by, times by and a power of two: a whole number. */
function distance(found: number, value: bigint, by: bigint): bigint {
  const [digits, power] = exact(found);
  const off = digits * by * 2n ** BigInt(Math.max(0, power)) - value * 2n ** BigInt(Math.max(0, -power));
  return off < 0n ? -off : off;
}

/** A double as digits * 2^power, without rounding. */
function exact(double: number): [bigint, number] {
  let power = 0;
  let digits = double;
  while (!Number.isInteger(digits)) {
    digits *= 2;
    power -= 1;
  }
  return [BigInt(digits), power];
}

/** The doubles right above and below. */
function neighbours(double: number): [number, number] {
  const view = new DataView(new ArrayBuffer(8));
  const moved = (by: bigint) => {
    view.setFloat64(0, double);
    view.setBigInt64(0, view.getBigInt64(0) + by);
    return view.getFloat64(0);
  };
  return [moved(1n), moved(-1n)];
}

function isNearest(found: number, value: bigint, by: bigint): boolean {
  return neighbours(found).every((other) => {
    // All three as whole numbers over one power of two.
    const [, power] = exact(other);
    const [, own] = exact(found);
    const common = 2n ** BigInt(Math.max(-power, -own, 0));
    const off = (double: number) =>
      distance(double, value, by) * (common / 2n ** BigInt(Math.max(0, -exact(double)[1])));
    if (off(found) !== off(other)) return off(found) < off(other);
    return (BigInt((Math.abs(found) / powerUnder(Math.abs(found))) * 2 ** 52) & 1n) === 0n;
  });
}

/** The largest power of two that is not over a double; log2 rounds up just under one. */
function powerUnder(size: number): number {
  const power = 2 ** Math.floor(Math.log2(size));
  return power > size ? power / 2 : power;
}

describe("a quotient of whole numbers", () => {
  it("is the nearest double, whatever their sizes", () => {
    fc.assert(
      fc.property(large, positive, (value, by) => value === 0n || isNearest(quotient(value, by), value, by)),
      { numRuns: 2_000 },
    );
  });
  it.each([
    // 2^53 + 1 lies halfway between two doubles, and goes to the even one; a hair to either side decides.
    [2n ** 53n + 1n, 1n, 2 ** 53],
    [2n ** 53n + 3n, 1n, 2 ** 53 + 4],
    [(2n ** 53n + 1n) * 10n ** 40n + 1n, 10n ** 40n, 2 ** 53 + 2],
    [(2n ** 53n + 3n) * 10n ** 40n - 1n, 10n ** 40n, 2 ** 53 + 2],
    // The same far behind the point, where the half has more decimal places than any text of 25 digits.
    [2n ** 53n + 1n, 2n ** 100n, 2 ** -47],
    [2n ** 53n + 3n, 2n ** 100n, (2 ** 53 + 4) * 2 ** -100],
    [-(2n ** 53n) - 3n, 2n ** 100n, -(2 ** 53 + 4) * 2 ** -100],
    [1n, 3n, 1 / 3],
    [-1n, 3n, -1 / 3],
    [0n, 7n, 0],
    [18014398509481981n, 1n, 18014398509481980],
    [10n ** 38n, 10n ** 38n, 1],
    [1n, 10n ** 38n, 1e-38],
    [10n ** 38n, 1n, 1e38],
  ])("of %s and %s is rounded once, ties to even", (value, by, expected) => {
    expect(quotient(value, by)).toBe(expected);
  });
});

describe("a quotient rounded to a whole number", () => {
  it.each([
    [7n, 2n, 4n],
    [-7n, 2n, -4n],
    [7n, -2n, -4n],
    [-7n, -2n, 4n],
    [1n, 3n, 0n],
    [-1n, 3n, 0n],
    [2n, 3n, 1n],
    [1n, 2n, 1n],
    [-1n, 2n, -1n],
    [10n ** 38n + 1n, 2n, 5n * 10n ** 37n + 1n],
  ])("of %s and %s goes half away from zero", (value, by, expected) => {
    expect(divideRounded(value, by)).toBe(expected);
  });
  it("is off by half of the divisor at most", () => {
    fc.assert(
      fc.property(large, positive, (value, by) => {
        const off = 2n * (value - divideRounded(value, by) * by);
        return off <= by && off >= -by;
      }),
    );
  });
});

describe("a decimal of nine places", () => {
  it.each([
    [0n, "0"],
    [1n, "0.000000001"],
    [-1n, "-0.000000001"],
    [1_500_000_000n, "1.5"],
    [-100_000_000_000n, "-100"],
    [10n ** 27n - 1n, "999999999999999999.999999999"],
  ])("%s is written %s", (nano, expected) => {
    expect(nanoText(nano)).toBe(expected);
  });
  it("is written so that its digits come back", () => {
    fc.assert(
      fc.property(large, (nano) => {
        const [whole = "", places = ""] = nanoText(nano).replace("-", "").split(".");
        const size = BigInt(whole) * 10n ** 9n + BigInt(places.padEnd(9, "0"));
        return (nano < 0n ? -size : size) === nano;
      }),
    );
  });
  it("is the nearest double", () => {
    fc.assert(fc.property(large, (nano) => nano === 0n || isNearest(nanoNumber(nano), nano, 10n ** 9n)));
  });
});
