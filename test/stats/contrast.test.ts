import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Arm, PowerSums } from "../../src/cells/types.ts";
import { armFigures, contrast, normalCritical } from "../../src/stats/index.ts";
import { meanArm, ratioArm, shareArm, sumsTogether } from "./arms.ts";
import { expectFinite, expectPrinted, expectWithin } from "./expect.ts";
import { range } from "./levels.ts";

/** n units of which the first `k` hold one value and the others another. */
const units = (n: number, low = 1, high = 2, k = Math.floor(n / 2)) => range(1, n).map((i) => (i <= k ? low : high));
const methodOf = (control: Arm, variant: Arm) => contrast(control, variant, normalCritical(0.05)).difference.method;

describe("which method counts", () => {
  it("is Welch's for a mean with under 200 units in an arm, else the normal", () => {
    expect(methodOf(meanArm(units(200)), meanArm(units(200)))).toBe("normal");
    expect(methodOf(meanArm(units(199)), meanArm(units(200)))).toBe("welch");
    expect(methodOf(meanArm(units(200)), meanArm(units(199)))).toBe("welch");
  });

  it("is Welch's for a ratio with under 200 units in an arm, else the normal", () => {
    const ratio = (n: number) => ratioArm(units(n), units(n, 2, 5));
    expect(methodOf(ratio(200), ratio(200))).toBe("normal");
    expect(methodOf(ratio(200), ratio(199))).toBe("welch");
  });

  it("is the score interval for a proportion with under 10 successes or failures in an arm, else the normal", () => {
    expect(methodOf(shareArm(10, 20), shareArm(10, 20))).toBe("normal");
    expect(methodOf(shareArm(9, 1000), shareArm(100, 1000))).toBe("score");
    expect(methodOf(shareArm(100, 1000), shareArm(991, 1000))).toBe("score");
    expect(methodOf(shareArm(990, 1000), shareArm(10, 1000))).toBe("normal");
  });
});

describe("the intervals beside", () => {
  it("are the normal one beside Welch's", () => {
    const { difference, beside, critical, df } = contrast(
      meanArm(range(1, 10)),
      meanArm(range(7, 20)),
      normalCritical(0.05),
    );
    // R 4.2.2, t.test(7:20, 1:10): interval 4.947198 to 11.052802, df = 21.982; qt(0.975, 21.982) is 2.0739704.
    expectPrinted(difference.low, "4.947198");
    expectPrinted(difference.high, "11.052802");
    expectPrinted(df, "21.982");
    expectPrinted(critical, "2.07397");
    expect(beside).toHaveLength(1);
    const half = 1.47196014438797 * normalCritical(0.05); // R: t.test(7:20, 1:10)$stderr
    expect(beside[0]?.method).toBe("normal");
    expectWithin(beside[0]?.low ?? Number.NaN, 8 - half, 1e-13);
    expectWithin(beside[0]?.high ?? Number.NaN, 8 + half, 1e-13);
  });

  it("are the score one beside a proportion's, and the plain one beside the score", () => {
    const many = contrast(shareArm(48, 80), shareArm(56, 70), normalCritical(0.05));
    expect(many).toMatchObject({ difference: { method: "normal" }, df: null, why: null });
    // Newcombe 1998, table II (a), method 10: 0.0524 to 0.3339.
    expect(many.beside.map(({ method }) => method)).toEqual(["score"]);
    expectPrinted(many.beside[0]?.low ?? null, "0.0524");
    expectPrinted(many.beside[0]?.high ?? null, "0.3339");

    const few = contrast(shareArm(1, 34), shareArm(7, 34), normalCritical(0.05));
    expect(few).toMatchObject({ difference: { method: "score", z: null }, df: null, why: null });
    expectPrinted(few.difference.low, "0.0189"); // Newcombe hybrid score, see shares.test.ts
    expect(few.beside.map(({ method }) => method)).toEqual(["normal"]);
    // By hand: s^2 = 34 p (1 - p) / 33, so SE^2 = (27 x 7 + 33 x 1) / (34^2 x 33).
    expectWithin(few.difference.standardError, Math.sqrt(222 / (34 * 34 * 33)), 1e-14);
  });

  it("of a proportion use the unbiased variance of its units", () => {
    const { difference } = contrast(shareArm(48, 80), shareArm(56, 70), normalCritical(0.05));
    // By hand: 48 x 32 / (80^2 x 79) + 56 x 14 / (70^2 x 69).
    expectWithin(difference.standardError, Math.sqrt(1536 / (6400 * 79) + 784 / (4900 * 69)), 1e-14);
    expectWithin(difference.z, 0.2 / Math.sqrt(1536 / (6400 * 79) + 784 / (4900 * 69)), 1e-14);
  });
});

describe("the ends at alpha, z and p of the one contrast", () => {
  it.each([
    ["mean", meanArm(units(300)), meanArm(units(300, 1, 2.2))],
    ["small mean", meanArm(range(1, 10)), meanArm(range(2, 14))],
    ["proportion", shareArm(40, 300), shareArm(60, 300)],
    ["few events", shareArm(4, 300), shareArm(9, 300)],
    ["ratio", ratioArm(units(250), units(250, 2, 5)), ratioArm(units(250, 1, 3), units(250, 2, 5))],
  ] as const)("widen with alpha for a %s", (_, control, variant) => {
    const [one, three] = [
      contrast(control, variant, normalCritical(0.05)),
      contrast(control, variant, normalCritical(0.05 / 3)),
    ];
    expect(three.critical).toBeGreaterThan(one.critical);
    expect(three.difference.low).toBeLessThan(one.difference.low ?? Number.NaN);
    expect(three.difference.high).toBeGreaterThan(one.difference.high ?? Number.NaN);
    for (const key of ["estimate", "standardError", "z", "p"] as const)
      expect(three.difference[key]).toBe(one.difference[key]);
  });

  it("take Welch's quantile at the normal's tail", () => {
    const { critical, df } = contrast(meanArm([1, 2, 4]), meanArm([2, 4, 9]), normalCritical(0.05 / 3));
    // R 4.2.2: t.test(c(2, 4, 9), c(1, 2, 4))$parameter is 2.6955414012738848, qt(1 - 0.05 / 6, that) 5.3540425682756938.
    expectWithin(df, 2.6955414012738848, 1e-14);
    expectWithin(critical, 5.3540425682756938, 1e-12);
  });
});

describe("a contrast that cannot be had", () => {
  const nothing = { standardError: null, low: null, high: null, z: null, p: null };

  it("has an estimate, and nothing else, for an arm of one unit", () => {
    const found = contrast(meanArm([5]), meanArm([1, 2, 6]), normalCritical(0.05));
    expect(found.difference).toEqual({ ...nothing, estimate: -2, method: "welch" });
    expect(found).toMatchObject({
      relative: { absent: "few-units" },
      why: { absent: "few-units" },
      df: null,
      beside: [],
    });
  });

  it("has not even an estimate for an arm without units", () => {
    for (const [control, variant] of [
      [meanArm([]), meanArm([1, 2])],
      [meanArm([1, 2]), meanArm([])],
      [shareArm(0, 0), shareArm(1, 2)],
      [ratioArm([], []), ratioArm([1], [2])],
      [ratioArm([1], [0]), ratioArm([], [])],
    ] as const) {
      const found = contrast(control, variant, normalCritical(0.05));
      expect(found.difference).toMatchObject({ ...nothing, estimate: null });
      expect(found).toMatchObject({ relative: { absent: "no-units" }, why: { absent: "no-units" }, beside: [] });
    }
    expect(contrast(meanArm([]), meanArm([]), normalCritical(0.05)).control).toMatchObject({
      units: 0,
      mean: null,
      total: 0,
    });
  });

  it("has an estimate, and nothing else, where all units of both arms are alike", () => {
    const found = contrast(meanArm([1, 1, 1]), meanArm([1.5, 1.5]), normalCritical(0.05));
    expect(found.difference).toEqual({ ...nothing, estimate: 0.5, method: "welch" });
    expect(found).toMatchObject({ relative: { absent: "zero-variance" }, why: { absent: "zero-variance" } });
    expect(found.control).toMatchObject({ mean: 1, sd: null, skewness: null, kurtosis: null });
  });

  it("stands where one arm varies: the other counts with a variance of exactly 0", () => {
    const { difference, control } = contrast(meanArm([0.1, 0.1, 0.1]), meanArm([1, 2, 3]), normalCritical(0.05));
    expectWithin(difference.standardError, Math.sqrt(1 / 3), 1e-15);
    expect(control.sd).toBeNull();
  });

  it("says that digits are lost where units differ by too little to be measured", () => {
    // A unit of 10^17 in the other arm sets the scale: in u the three lie under 2^-86 apart.
    const [small, large] = sumsTogether([
      [1, 1.000000001, 1.000000002],
      [0, 1e17],
    ]) as [PowerSums, PowerSums];
    const found = contrast({ kind: "mean", sums: small }, { kind: "mean", sums: large }, normalCritical(0.05));
    expect(found).toMatchObject({ why: { absent: "lost-digits" }, relative: { absent: "lost-digits" } });
    expect(found.difference.estimate).not.toBeNull();
    expect(found.difference.low).toBeNull();
  });

  it("has a score interval even for 0 of n against 0 of m", () => {
    const { difference, relative, why, beside } = contrast(shareArm(0, 20), shareArm(0, 10), normalCritical(0.05));
    expect(difference).toMatchObject({ estimate: 0, z: null, p: 1, standardError: null, method: "score" });
    expectPrinted(difference.low, "-0.1611"); // Newcombe 1998, table II (e)
    expectPrinted(difference.high, "0.2775");
    expect({ relative, why, beside }).toEqual({ relative: { absent: "control-near-zero" }, why: null, beside: [] });
  });

  it("has no relative difference where the control is not clearly above 0, and says why", () => {
    const found = contrast(meanArm([-1, 1, 2]), meanArm([5, 6, 9]), normalCritical(0.05));
    expect(found.relative).toEqual({ absent: "control-near-zero" });
    expect(found.why).toBeNull();
  });

  it("has no ratio where a denominator adds up to 0", () => {
    const found = contrast(ratioArm([1, 2], [1, 1]), ratioArm([1, 2], [0, 0]), normalCritical(0.05));
    expect(found).toMatchObject({ why: { absent: "zero-denominator" }, difference: { estimate: null } });
  });
});

describe("the figures of an arm", () => {
  it("of a proportion come from the counts", () => {
    // By hand, p = 0.2: sd^2 = 50 x 0.16 / 49, g1 = 0.6 / 0.4, g2 = (1 - 0.96) / 0.16.
    const { mean, sd, skewness, kurtosis, total, smallest, largest } = armFigures(shareArm(10, 50));
    expect({ mean, total, smallest, largest }).toEqual({ mean: 0.2, total: 10, smallest: 0, largest: 1 });
    expectWithin(sd, Math.sqrt(8 / 49), 1e-15);
    expectWithin(skewness, 1.5, 1e-15);
    expectWithin(kurtosis, 0.25, 1e-15);
  });

  it("of a proportion of a half have a skewness of exactly 0: counts do not round", () => {
    expect(armFigures(shareArm(25, 50)).skewness).toBe(0);
  });

  it("have no spread at 0 of n, n of n and for one unit", () => {
    for (const arm of [shareArm(0, 9), shareArm(9, 9), shareArm(1, 1), meanArm([4]), meanArm([4, 4, 4])]) {
      expect(armFigures(arm)).toMatchObject({ sd: null, skewness: null, kurtosis: null });
    }
  });
});

const value = fc.oneof(
  fc.integer({ min: -5, max: 5 }),
  fc.integer({ min: 0, max: 1e9 }).map((n) => n / 1000),
  fc.constantFrom(0, 1e12, -1e9, 1e-9),
);
const list = fc.oneof(
  fc.array(value, { maxLength: 30 }),
  fc.tuple(value, fc.integer({ min: 0, max: 30 })).map(([x, n]) => Array<number>(n).fill(x)),
  fc
    .tuple(fc.array(value, { minLength: 1, maxLength: 5 }), fc.integer({ min: 40, max: 60 }))
    .map(([xs, n]) => Array<number[]>(n).fill(xs).flat()),
);
const mean = list.map(meanArm);
const share = fc.tuple(fc.nat(300), fc.nat(300)).map(([k, more]) => shareArm(k, k + more));
const ratio = fc
  .tuple(list, fc.array(fc.integer({ min: 0, max: 9 }), { minLength: 300, maxLength: 300 }))
  .map(([a, b]) => ratioArm(a, b.slice(0, a.length)));
const pair = fc.oneof(fc.tuple(mean, mean), fc.tuple(share, share), fc.tuple(ratio, ratio));
const alphas = fc.oneof(fc.constantFrom(0.05, 0.05 / 3, 0.1, 0.01), fc.double({ min: 1e-9, max: 0.99, noNaN: true }));

describe("every contrast", () => {
  it("holds numbers or null, never NaN or infinity", () => {
    fc.assert(
      fc.property(pair, alphas, ([control, variant], alpha) => {
        expectFinite(contrast(control, variant, normalCritical(alpha)));
      }),
      { numRuns: 1000 },
    );
  });

  it("agrees with itself about 0: difference, relative and p", () => {
    fc.assert(
      fc.property(pair, alphas, ([control, variant], alpha) => {
        const { difference, relative } = contrast(control, variant, normalCritical(alpha));
        if (difference.low === null || difference.high === null) {
          expect(difference.p).toBeNull();
          return;
        }
        expect(difference.low).toBeLessThanOrEqual(difference.high);
        const excludes = difference.low > 0 || difference.high < 0;
        const p = difference.p ?? Number.NaN;
        if (Math.abs(p / alpha - 1) > 1e-9) expect(p < alpha).toBe(excludes);
        if ("absent" in relative) return;
        expect(Math.sign(relative.low ?? Number.NaN)).toBe(Math.sign(difference.low));
        expect(Math.sign(relative.high ?? Number.NaN)).toBe(Math.sign(difference.high));
      }),
      { numRuns: 1000 },
    );
  });

  it("is mirrored when the arms change places", () => {
    fc.assert(
      fc.property(pair, alphas, ([control, variant], alpha) => {
        const [there, back] = [
          contrast(control, variant, normalCritical(alpha)),
          contrast(variant, control, normalCritical(alpha)),
        ];
        const turned = (x: number | null) => (x === null ? null : 0 - x);
        const { estimate, low, high, z } = there.difference;
        expect(back.difference).toEqual({
          ...there.difference,
          estimate: turned(estimate),
          low: turned(high),
          high: turned(low),
          z: turned(z),
        });
        expect(back.df).toBe(there.df);
        expect(back.critical).toBe(there.critical);
        expect(back.why).toEqual(there.why);
      }),
      { numRuns: 500 },
    );
  });

  it("moves with the values: a shift leaves the difference, a scale stretches it and leaves the relative one", () => {
    const whole = fc
      .array(fc.integer({ min: 1, max: 1000 }), { minLength: 3, maxLength: 40 })
      .filter((xs) => new Set(xs).size > 1);
    fc.assert(
      fc.property(
        whole,
        whole,
        fc.integer({ min: -1e6, max: 1e6 }),
        fc.constantFrom(0.5, 4, 1000),
        (a, b, shift, stretch) => {
          const plain = contrast(meanArm(a), meanArm(b), normalCritical(0.05));
          const shifted = contrast(
            meanArm(a.map((x) => x + shift)),
            meanArm(b.map((x) => x + shift)),
            normalCritical(0.05),
          );
          const stretched = contrast(
            meanArm(a.map((x) => x * stretch)),
            meanArm(b.map((x) => x * stretch)),
            normalCritical(0.05),
          );
          const near = (found: number | null, expected: number | null, size: number) =>
            expect(Math.abs((found ?? Number.NaN) - (expected ?? Number.NaN))).toBeLessThan(1e-12 * size);
          const size = Math.abs(plain.difference.low ?? 0) + Math.abs(plain.difference.high ?? 0);
          for (const key of ["estimate", "low", "high"] as const) {
            near(shifted.difference[key], plain.difference[key], size);
            near(stretched.difference[key], (plain.difference[key] ?? Number.NaN) * stretch, size * stretch);
          }
          if ("absent" in plain.relative || "absent" in stretched.relative)
            expect(stretched.relative).toEqual(plain.relative);
          else near(stretched.relative.high, plain.relative.high, 1e3 * (1 + Math.abs(plain.relative.high ?? 0)));
        },
      ),
    );
  });
});
