import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { divideRounded } from "../../src/engine/nano.ts";
import { pivotAndScale, scaleOver } from "../../src/engine/pivot.ts";
import { ascending } from "../oracle/number.ts";

const ONE = 10n ** 9n;
const size = (x: bigint) => (x < 0n ? -x : x);

/** Values in 10^-9 by power-of-two class of their size, as the statement gives them. */
function classesOf(values: readonly bigint[]): Parameters<typeof pivotAndScale>[0] {
  const groups = new Map<number | null, bigint[]>();
  for (const x of values) {
    const power = x === 0n ? null : Math.floor(Math.log2(Number(size(x)) / 1e9));
    groups.set(power, [...(groups.get(power) ?? []), x]);
  }
  return [...groups].map(([powerOfTwo, xs]) => ({
    powerOfTwo,
    n: BigInt(xs.length),
    total: xs.reduce((sum, x) => sum + x, 0n),
    least: [...xs].sort(ascending)[0] ?? 0n,
    most: [...xs].sort(ascending).at(-1) ?? 0n,
  }));
}
const of = (values: readonly number[]) => pivotAndScale(classesOf(values.map((x) => BigInt(Math.round(x * 1e9)))));
const times = (n: number, x: number): number[] => Array.from({ length: n }, () => x);

describe("the pivot", () => {
  it("is the mean where no unit stands out", () => {
    expect(of([4, 5, 6, 7]).pivot).toBe((22n * ONE) / 4n);
  });
  it.each([
    ["one outlier is left out of it", [...times(10, 3), 1e8], [3n, 1n]],
    ["two outliers among few units stay in it", [...times(10, 3), 1e8, 1e8], [30n + 200_000_000n, 12n]],
    [
      "of two outliers in two classes the larger goes: together they are two",
      [...times(10, 3), 1e6, 1e8],
      [1_000_030n, 11n],
    ],
    ["1 in 1,000 is left out", [...times(1_998, 3), 1e8, 1e8], [3n, 1n]],
    ["a little more than 1 in 1,000 is not", [...times(1_997, 3), 1e8, 1e8], [1_997n * 3n + 200_000_000n, 1_999n]],
    ["a single unit is its own pivot", [1e8], [100_000_000n, 1n]],
    ["of two units the larger class is left out", [3, 1e8], [3n, 1n]],
    ["of two units in one class none is", [5, 7], [6n, 1n]],
    ["an outlier below zero is left out like one above", [...times(10, 3), -1e8], [3n, 1n]],
    ["zeros are a class of their own, below all others", [...times(10, 0), 5], [0n, 1n]],
    ["all zeros have it at zero", times(3, 0), [0n, 1n]],
  ] as const)("%s", (_, values, [total, n]) => {
    expect(of(values).pivot).toBe(divideRounded(total * ONE, n));
  });
  it("is rounded to nine places, half away from zero", () => {
    expect(pivotAndScale(classesOf([4n * ONE, 4n * ONE + 1n])).pivot).toBe(4n * ONE + 1n);
    expect(pivotAndScale(classesOf([-4n * ONE, -4n * ONE - 1n])).pivot).toBe(-4n * ONE - 1n);
  });
  it("is 0, and the scale 1, without units", () => {
    expect(pivotAndScale([])).toEqual({ pivot: 0n, scale: 1 });
  });
});

describe("pivot and scale", () => {
  const value = fc
    .integer({ min: 0, max: 89 })
    .chain((bits) => fc.bigInt({ min: -(2n ** BigInt(bits)), max: 2n ** BigInt(bits) }));
  const sample = fc.array(value, { minLength: 1, maxLength: 60 });

  it("put every value within [-1, 1], with the smallest power of two that does", () => {
    fc.assert(
      fc.property(sample, (values) => {
        const { pivot, scale } = pivotAndScale(classesOf(values));
        const [reach = 0n] = values.map((x) => size(x - pivot)).sort((a, b) => ascending(b, a));
        // Both times 2^40, so that a scale under 1 is a whole number too.
        const scaled = BigInt(scale * 2 ** 40) * 10n ** 9n;
        if (reach === 0n) return scale === 1;
        return reach * 2n ** 40n <= scaled && reach * 2n ** 41n > scaled && Number.isInteger(Math.log2(scale));
      }),
      { numRuns: 500 },
    );
  });
  it.each([
    [[1, 9], 1, 8],
    [[1, 2], 1, 1],
    [[1, 1.5], 1.25, 0.25],
    [[1, 9.000000001], 1, 16],
    [[0, 0.000000001], 0, 2 ** -29], // 10^-9 lies between 2^-30 and 2^-29
    [[-7, -8], -7, 1],
  ])("of %j are %s and %s", (values, pivot, scale) => {
    expect(of(values)).toEqual({ pivot: BigInt(Math.round(pivot * 1e9)), scale });
  });
  it("are the same for any order of the classes", () => {
    fc.assert(
      fc.property(sample, fc.integer({ min: 0, max: 1_000 }), (values, by) => {
        const classes = classesOf(values);
        const turned = [...classes.slice(by % classes.length), ...classes.slice(0, by % classes.length)];
        expect(pivotAndScale(turned.reverse())).toEqual(pivotAndScale(classes));
      }),
    );
  });
  it("follow the definition: classes from the top go while they hold one unit, or 1 in 1,000", () => {
    fc.assert(
      fc.property(sample, (values) => {
        const spared = Math.max(1, Math.floor(values.length / 1_000));
        const powers = [...new Set(values.map(powerOf))].sort((a, b) => a - b);
        const cut = powers.find((power, i) => i > 0 && values.filter((x) => powerOf(x) >= power).length <= spared);
        const bulk = values.filter((x) => cut === undefined || powerOf(x) < cut);
        const total = bulk.reduce((sum, x) => sum + x, 0n);
        return pivotAndScale(classesOf(values)).pivot === divideRounded(total, BigInt(bulk.length));
      }),
      { numRuns: 500 },
    );
  });
  const powerOf = (x: bigint) => (x === 0n ? Number.NEGATIVE_INFINITY : Math.floor(Math.log2(Number(size(x)) / 1e9)));
});

describe("the scale of doubles", () => {
  it.each([
    [0, 1],
    [1, 1],
    [1 + Number.EPSILON, 2],
    [1 - Number.EPSILON, 1],
    [0.5, 0.5],
    [0.5 + Number.EPSILON, 1],
    [3, 4],
    [2 ** 60 + 2 ** 8, 2 ** 61],
    [2 ** -30, 2 ** -30],
    [1e-300, 2 ** -996],
  ])("over %s is %s", (reach, expected) => {
    expect(scaleOver(reach)).toBe(expected);
  });
  it("is the smallest power of two that is not under it", () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-300, max: 1e300, noNaN: true }), (reach) => {
        const scale = scaleOver(reach);
        return scale >= reach && scale / 2 < reach && Number.isInteger(Math.log2(scale));
      }),
      { numRuns: 1_000 },
    );
  });
});
