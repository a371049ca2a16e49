import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { departures, expansionOf, tailsOf } from "../../src/stats/expansion.ts";
import { normalUpperTail } from "../../src/stats/normal.ts";
import { shapedArm } from "../../src/stats/shaped-arm.ts";
import { tails } from "../../src/stats/tails.ts";
import { meanArm, ratioArm, shareArm } from "./arms.ts";
import { expectPrinted, expectWithin, present } from "./expect.ts";
import { anyShape, edgeworth, exponential, ratioTails, shaped } from "./shapes.ts";

const Z = 1.959963984540054;
const below = (x: number) => normalUpperTail(-x);

describe("the distribution of the studentised difference", () => {
  it.each(edgeworth())(
    "agrees with two public programs for arms $variant and $control",
    ({ variant, control, rows }) => {
      const [t, c] = [shaped(...variant), shaped(...control)];
      for (const { x, tcftt1, tcftt2, edgee1, edgee2 } of rows) {
        const [first, second] = departures(x, expansionOf(c, t));
        expectPrinted(below(x) + first, tcftt1);
        expectPrinted(below(x) + first, edgee1);
        expectPrinted(below(x) + first + second, tcftt2);
        // edgee has variances over n: T is then larger by the share (w_t / n_t + w_c / n_c) / 2.
        const total = t.variance + c.variance;
        const larger = (t.variance / t.n + c.variance / c.n) / total / 2;
        const density = Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
        expectPrinted(below(x) + first + second - density * x * larger, edgee2);
      }
    },
  );

  it("is the mirror image when the arms change places", () => {
    fc.assert(
      fc.property(anyShape, anyShape, fc.double({ min: -4, max: 4, noNaN: true }), (a, b, x) => {
        const [first, second] = departures(x, expansionOf(a, b));
        const [turnedFirst, turnedSecond] = departures(-x, expansionOf(b, a));
        expect(turnedFirst).toBeCloseTo(-first, 10);
        expect(turnedSecond).toBeCloseTo(-second, 10);
      }),
    );
  });
});

describe("the tails of the normal interval", () => {
  // Simulated 4.55% and 1.43%; by hand the formula gives 4.67% and 1.46%, its first part alone 4.10% and 0.90%.
  it("are METHODS' for exponential units, 50 against 200", () => {
    const { reported, skew, level } = present(tails(exponential(200), exponential(50), Z));
    expectPrinted(100 * reported.lowerTail, "4.67");
    expectPrinted(100 * reported.upperTail, "1.46");
    expect(level).toBe("strong");
    const [first] = departures(-Z, present(tails(exponential(200), exponential(50), Z)).expansions.own);
    expectPrinted(100 * (0.025 + first), "4.10");
    expectPrinted(100 * (0.025 - first), "0.90");
    expect(skew).toBeGreaterThan(0);
  });

  it("have no skewness for arms of one size and shape", () => {
    fc.assert(
      fc.property(anyShape, (arm) => {
        const { skew, pooled } = present(tails(arm, arm, Z));
        expect(skew).toBe(0);
        expect(pooled.lowerTail).toBe(pooled.upperTail);
      }),
    );
  });

  it("change places with the arms", () => {
    fc.assert(
      fc.property(anyShape, anyShape, (a, b) => {
        const [one, other] = [present(tails(a, b, Z)), present(tails(b, a, Z))];
        for (const pair of ["pooled", "own"] as const) {
          expect(other[pair].lowerTail).toBeCloseTo(one[pair].upperTail, 10);
          expect(other[pair].upperTail).toBeCloseTo(one[pair].lowerTail, 10);
        }
        expect(other.level).toBe(one.level);
      }),
    );
  });

  it("never leave 0 to 1, however far from normal", () => {
    fc.assert(
      fc.property(anyShape, anyShape, (a, b) => {
        const { pooled, own } = present(tails(a, b, Z));
        for (const tail of [pooled.lowerTail, pooled.upperTail, own.lowerTail, own.upperTail]) {
          expect(tail).toBeGreaterThanOrEqual(0);
          expect(tail).toBeLessThanOrEqual(1);
        }
      }),
    );
  });

  // A million simulated tests each; test/reference/ratio-tails.py.
  it.each(ratioTails())(
    "count the denominator of a ratio: $control against $variant, a = b to the power $power",
    (simulated) => {
      const { sd, skewness, kurtosis, covariance } = simulated;
      const arm = (n: number, c: number | null) => shaped(n, sd, skewness, kurtosis, c);
      const gap = (c: number | null) => {
        const expansion = expansionOf(arm(simulated.control, c), arm(simulated.variant, c));
        const { lowerTail, upperTail } = tailsOf(Z, expansion);
        return Math.max(Math.abs(lowerTail - simulated.below), Math.abs(upperTail - simulated.above));
      };
      expect(gap(covariance)).toBeLessThan(0.8 * gap(null));
      // Arms of 500 and more with moderate skewness: the expansion is then good to a quarter of a percent.
      if (Math.min(simulated.control, simulated.variant) >= 500) expect(gap(covariance)).toBeLessThan(0.0025);
    },
  );

  it("report the worse of pooled and own shapes, and say that the shapes differ", () => {
    const alike = present(tails(exponential(1000), exponential(1000), Z));
    expect([alike.level, alike.shapesDiffer]).toEqual(["near", false]);
    const apart = present(tails(exponential(300), shaped(300, 1, 12, 200), Z));
    expect(apart.pooled.lowerTail).toBe(apart.pooled.upperTail);
    expect(apart.reported).toEqual(apart.own);
    expect([apart.level, apart.shapesDiffer]).toEqual(["strong", true]);
  });

  // a = 12 / sqrt(2^3 n), first part phi(z) a (2 z^2 + 1) / 6: 0.005 and 0.0125 away at about n = 5,300 and 850.
  it.each([
    [8000, "near"],
    [3000, "caution"],
    [500, "strong"],
  ])("draw at %i units an arm: %s", (n, level) => {
    expect(present(tails(shaped(n, 1, 0, 0), shaped(n, 1, 12, 0), Z)).level).toBe(level);
  });

  it("do not exist where neither arm varies, and take the other's shape where one does not", () => {
    const still = { n: 10, variance: 0, skewness: 0, kurtosis: 0, ratio: null };
    expect(tails(still, still, Z)).toEqual({ absent: "zero-variance" });
    const { pooled, own } = present(tails(still, exponential(100), Z));
    expect(pooled).toEqual(own);
  });
});

describe("an arm's shape", () => {
  it("is that of its units, with n and the variance of its level", () => {
    // 20 of 100: g1 = 0.6 / 0.4 and g2 = (1 - 6 * 0.16) / 0.16, v = 0.16 / 99.
    const arm = present(shapedArm(shareArm(20, 100)));
    expectWithin(arm.skewness, 1.5, 1e-14);
    expectWithin(arm.kurtosis, 0.25, 1e-13);
    expectWithin(arm.variance, 0.16 / 99, 1e-14);
  });

  it("has the skewness 0 where it cannot be told from 0", () => {
    expect(present(shapedArm(meanArm([1, 2, 3, 4, 5]))).skewness).toBe(0);
  });

  it("of a ratio has c = cov(a - R b, b) / (n mean(b)^2), found without joint sums", () => {
    const [a, b] = [
      [3, 1, 4, 1, 5, 9, 2, 6],
      [2, 7, 1, 8, 2, 8, 1, 8],
    ];
    const sum = (xs: number[]) => xs.reduce((x, y) => x + y, 0);
    const ratio = sum(a) / sum(b);
    const mean = sum(b) / b.length;
    const covariance = sum(b.map((x, i) => ((a[i] ?? 0) - ratio * x) * (x - mean))) / (b.length - 1);
    expectWithin(present(shapedArm(ratioArm(a, b))).ratio, covariance / b.length / mean ** 2, 1e-12);
  });

  it("is absent as the level is", () => {
    expect(shapedArm(meanArm([]))).toEqual({ absent: "no-units" });
    expect(shapedArm(meanArm([1]))).toEqual({ absent: "few-units" });
  });
});
