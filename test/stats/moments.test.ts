import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { PowerSums } from "../../src/cells/types.ts";
import { moments } from "../../src/stats/index.ts";
import { sumBounds } from "../../src/stats/rounding.ts";
import { nanoOf, sumsOf, sumsTogether } from "./arms.ts";
import { expectFinite, expectPrinted, expectWithin } from "./expect.ts";
import { exactMoments, nist } from "./reference.ts";

const sets = nist().map(({ name, mean, sd, values, digits }) => ({
  name,
  mean,
  sd,
  values: values ?? [...(digits ?? "")].map(Number),
}));
/** One value, then pairs of two others, as NIST builds NumAcc2 to NumAcc4. */
const pairs = (first: number, low: number, high: number) => [first, ...Array(500).fill([low, high]).flat()] as number[];
// NIST StRD, univariate, level of difficulty lower (NumAcc1: lower; 2 and 3: average; 4: higher): certified and exact.
const constructed = [
  { name: "NumAcc1", mean: "10000002.00000", sd: "1.000000000000", values: [10000001, 10000003, 10000002] },
  { name: "NumAcc2", mean: "1.200000000000", sd: "0.1000000000000", values: pairs(1.2, 1.1, 1.3) },
  { name: "NumAcc3", mean: "1000000.200000", sd: "0.1000000000000", values: pairs(1000000.2, 1000000.1, 1000000.3) },
  { name: "NumAcc4", mean: "10000000.20000", sd: "0.1000000000000", values: pairs(10000000.2, 10000000.1, 10000000.3) },
];

describe("the reference data of NIST", () => {
  it.each([...sets, ...constructed])(
    "$name: mean and standard deviation to all certified digits",
    ({ mean, sd, values }) => {
      const found = moments(sumsOf(values));
      expectPrinted(found.mean, mean);
      expectPrinted(Math.sqrt(found.variance ?? Number.NaN), sd);
    },
  );
});

describe("moments against exact fractions", () => {
  it.each(
    exactMoments().flatMap(({ name, arms }) => {
      const sums = sumsTogether(arms.map((arm) => arm.values.map(Number)));
      return arms.map((arm, i) => ({ name, arm: i, expected: arm, sums: sums[i] as PowerSums }));
    }),
  )("$name, arm $arm", ({ name, arm, expected, sums }) => {
    const found = moments(sums);
    expectWithin(found.mean, expected.mean, 2 ** -53);
    // An outlier sets the scale for both arms: the digits that its size costs the other arm's higher moments.
    const isBeside = arm === 0 && name.startsWith("an outlier");
    expectWithin(found.variance, expected.variance, isBeside ? 1e-14 : 1e-15);
    if (isBeside && name.includes("1e12")) {
      // u is about 1e-10 here: four digits of u^3 are left in 2^-120, none of u^4.
      expectWithin(found.skewness, expected.skewness, 1e-4);
      expect(found.kurtosis).toBeNull();
      return;
    }
    const lost = isBeside ? 1e-11 : 1e-14;
    if (expected.skewness === "0.0") expect(found.skewness).toBeNull();
    else expectWithin(found.skewness, expected.skewness, lost);
    const kurtosis = Number(expected.kurtosis);
    expect(Math.abs((found.kurtosis ?? Number.NaN) - kurtosis)).toBeLessThan(lost * (kurtosis + 3));
  });
});

const decimal = fc
  .tuple(fc.integer({ min: -(2 ** 40), max: 2 ** 40 }), fc.integer({ min: 0, max: 9 }))
  .map(([n, places]) => n / 10 ** places);
const close = fc
  .tuple(fc.integer({ min: 0, max: 50 }), fc.constantFrom(0, 0.1, 1e6, -3e9))
  .map(([n, from]) => Number((from + n * 0.01).toFixed(2)));
const values = fc.oneof(
  fc.array(decimal, { minLength: 1, maxLength: 40 }),
  fc.array(close, { minLength: 1, maxLength: 40 }),
  fc.tuple(close, fc.integer({ min: 1, max: 40 })).map(([value, n]) => Array<number>(n).fill(value)),
);

const ONE = 2n ** 120n;
/** The sum of ((x - pivot) / scale)^k in units of 2^-120, as a fraction over 10^9k scale^k. */
function exactSum(
  xs: readonly number[],
  { pivot, scale }: PowerSums,
  k: number,
): { numerator: bigint; denominator: bigint } {
  const from = nanoOf(Number(pivot));
  const [up, down] = scale >= 1 ? [BigInt(scale), 1n] : [1n, BigInt(1 / scale)];
  const numerator = xs.reduce((sum, x) => sum + ((nanoOf(x) - from) * down) ** BigInt(k), 0n) * ONE;
  return { numerator, denominator: (1_000_000_000n * up) ** BigInt(k) };
}

function expectWithinBounds(xs: readonly number[], sums: PowerSums): void {
  // A pivot that a double cannot hold is not what this test is about.
  fc.pre(nanoOf(Number(sums.pivot)) === decimalNano(sums.pivot));
  const bounds = sumBounds(sums, 0);
  for (const k of [1, 2, 3, 4] as const) {
    const { numerator, denominator } = exactSum(xs, sums, k);
    const off = (sums.powers[k - 1] as bigint) * denominator - numerator;
    expect(off < 0n ? -off : off).toBeLessThanOrEqual((bounds[k - 1] as bigint) * denominator);
  }
}

describe("what rounding can do", () => {
  it("stays within the bound of every power sum", () => {
    fc.assert(
      fc.property(values, (xs) => expectWithinBounds(xs, sumsOf(xs))),
      { numRuns: 500 },
    );
  });

  // Small negative terms round in a way of their own, 2^-114 each: there is nothing else to see beside an outlier elsewhere.
  it("stays within it beside an outlier in the other arm too", () => {
    const whole = fc.array(fc.integer({ min: -50, max: 50 }), { minLength: 1, maxLength: 40 });
    fc.assert(
      fc.property(whole, fc.constantFrom(1e5, 1e7, -1e9, 1e15), (xs, outlier) => {
        const [sums] = sumsTogether([xs, [outlier]]);
        expectWithinBounds(xs, sums as PowerSums);
      }),
      { numRuns: 500 },
    );
  });

  it("never shows as a variance: units that are all alike have none", () => {
    fc.assert(
      fc.property(close, fc.integer({ min: 1, max: 60 }), decimal, (value, n, other) => {
        const [alike] = sumsTogether([Array<number>(n).fill(value), [other, other + 1]]);
        const { variance, skewness, kurtosis } = moments(alike as PowerSums);
        expect({ variance, skewness, kurtosis }).toEqual({ variance: null, skewness: null, kurtosis: null });
      }),
    );
  });

  it("takes what is too small beside an outlier in the other arm, and says so", () => {
    const [small] = sumsTogether([
      [1, 1.000000001, 1.000000002],
      [0, 1e17],
    ]);
    expect(moments(small as PowerSums).variance).toBeNull();
    expect(moments(sumsOf([1, 1.000000001, 1.000000002])).variance).toBeCloseTo(1e-18, 30);
  });

  it("does not take a spread that is real: 2e-8 of the distance from the pivot", () => {
    // u is about 0.5 here and rounds by 2^-54: m2 is 5e-16, some four times the bound, and known to a tenth or so.
    const far = Array.from({ length: 10 }, (_, i) => 0.5 + (i % 2 === 0 ? 22e-9 : -22e-9));
    const [, arm] = sumsTogether([Array.from({ length: 1000 }, (_, i) => (i % 2 === 0 ? 1 : -1)), far]);
    expectWithin(moments(arm as PowerSums).variance, (22e-9 ** 2 * 10) / 9, 0.3);
  });

  it("counts noise in the values themselves", () => {
    const sums = sumsOf([1, 1.0001, 0.9999, 1]); // m2 = 5e-9: a sd of 7.1e-5
    expect(moments(sums, 1e-5).variance).toBe(moments(sums).variance);
    expect(moments(sums, 5e-5).variance).toBeNull();
  });

  it("leaves a symmetric arm without a skewness rather than with a skewness of 0", () => {
    expect(moments(sumsOf([1, 2, 3, 4])).skewness).toBeNull();
  });
});

describe("moments of any data", () => {
  it("are finite or null, and never of the wrong sign", () => {
    fc.assert(
      fc.property(values, (xs) => {
        const found = moments(sumsOf(xs));
        expectFinite(found);
        if (found.variance !== null) expect(found.variance).toBeGreaterThan(0);
        // g2 >= g1^2 - 2: Pearson 1916, Philosophical Transactions A 216, 429-457.
        if (found.kurtosis !== null)
          expect(found.kurtosis).toBeGreaterThanOrEqual((found.skewness ?? 0) ** 2 - 2 - 1e-9);
      }),
    );
  });

  it("do not depend on the order of the units", () => {
    fc.assert(
      fc.property(values, (xs) => {
        expect(moments(sumsOf([...xs].reverse()))).toEqual(moments(sumsOf(xs)));
      }),
    );
  });

  it("move with a shift and stretch with a scale", () => {
    const whole = fc
      .array(fc.integer({ min: 0, max: 1000 }), { minLength: 3, maxLength: 50 })
      .filter((xs) => new Set(xs).size > 2);
    fc.assert(
      fc.property(
        whole,
        fc.integer({ min: -1_000_000, max: 1_000_000 }),
        fc.constantFrom(0.25, 2, 1024),
        (xs, shift, stretch) => {
          const [plain, moved] = [moments(sumsOf(xs)), moments(sumsOf(xs.map((x) => x * stretch + shift)))];
          expectWithin(moved.mean, (plain.mean ?? 0) * stretch + shift, 1e-15 * 1e6);
          expectWithin(moved.variance, (plain.variance ?? 0) * stretch * stretch, 1e-13);
          expect((moved.skewness ?? 0) - (plain.skewness ?? 0)).toBeCloseTo(0, 10);
          expect((moved.kurtosis ?? 0) - (plain.kurtosis ?? 0)).toBeCloseTo(0, 10);
        },
      ),
    );
  });

  it("do not exist without units, and of one unit only the mean does", () => {
    expect(moments(sumsOf([]))).toEqual({ mean: null, variance: null, skewness: null, kurtosis: null });
    expect(moments(sumsOf([7.5]))).toEqual({ mean: 7.5, variance: null, skewness: null, kurtosis: null });
  });
});

function decimalNano(text: string): bigint {
  const [whole = "0", places = ""] = text.replace("-", "").split(".");
  const size = BigInt(whole + places.padEnd(9, "0"));
  return text.startsWith("-") ? -size : size;
}
