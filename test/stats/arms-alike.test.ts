import { describe, expect, it } from "vitest";
import type { BucketCells } from "../../src/cells/types.ts";
import { armsAlike, blocksOf, kolmogorov } from "../../src/stats/arms-alike.ts";
import { bucketScores } from "../../src/stats/bucket-scores.ts";
import { simulatedArm } from "../bench/arms.ts";
import { bernoulli, buyers, type Distribution, lognormal, normal } from "../bench/samplers.ts";
import { cellsOf, resampled, type Unit } from "./buckets.ts";

function alike(control: Distribution, nc: number, variant: Distribution, nt: number, word = 1): number {
  const arm = (distribution: Distribution, n: number, last: number) =>
    simulatedArm(distribution.sampler([word, 2, 3, last])(n), 1024).buckets;
  return armsAlike({ kind: "mean", control: arm(control, nc, 4), variant: arm(variant, nt, 5) });
}

const sum = (values: readonly number[]) => values.reduce((a, b) => a + b, 0);
const squaresAboutMean = (values: readonly number[]) => sum(values.map((x) => (x - sum(values) / values.length) ** 2));

/** y itself, (y - R x) / mean(x) + R with the arm's R and mean, or y - theta x, unit by unit. */
function scoresOf(kind: BucketCells["kind"], units: readonly Unit[]): Unit[] {
  const arms = ([0, 1] as const).map((is) => units.filter(([, isVariant]) => isVariant === is));
  const covariance = (of: readonly Unit[], a: 2 | 3, b: 2 | 3) => {
    const [meanA, meanB] = [sum(of.map((unit) => unit[a])) / of.length, sum(of.map((unit) => unit[b])) / of.length];
    return sum(of.map((unit) => (unit[a] - meanA) * (unit[b] - meanB))) / (of.length - 1) / of.length;
  };
  const theta = sum(arms.map((of) => covariance(of, 2, 3))) / sum(arms.map((of) => covariance(of, 3, 3)));
  return units.map(([bucket, isVariant, y, x]): Unit => {
    const of = arms[isVariant] ?? [];
    const [sumY, sumX] = [sum(of.map((unit) => unit[2])), sum(of.map((unit) => unit[3]))];
    const [ratio, mean] = [sumY / sumX, sumX / of.length];
    return [bucket, isVariant, { mean: y, ratio: (y - ratio * x) / mean + ratio, adjusted: y - theta * x }[kind], x];
  });
}

describe("whether the arms look alike", () => {
  // D = 4/5 at 4: ranks by hand. R 4.2.2: ks.test(c(1, 2, 3, 4, 9), c(5, 6, 7, 8, 10)) prints D = 0.8.
  it("is Kolmogorov's statistic, with ties taken together", () => {
    const d = (a: number[], b: number[]) => kolmogorov(Float64Array.from(a), Float64Array.from(b));
    expect(d([1, 2, 3, 4, 9], [5, 6, 7, 8, 10])).toBeCloseTo(0.8 * Math.sqrt(25 / 10), 12);
    expect(d([0, 0, 0, 1], [0, 0, 0, 0, 0, 0, 1, 1])).toBe(0);
    expect(d([0, 0], [0, 0, 1, 1])).toBeCloseTo(0.5 * Math.sqrt(8 / 6), 12);
  });

  it("makes blocks of as many units in both arms, of at least four", () => {
    expect(blocksOf(9000, 1000, 1024)).toEqual({ control: 1, variant: 9 });
    expect(blocksOf(1000, 9000, 1024)).toEqual({ control: 9, variant: 1 });
    expect(blocksOf(5000, 5000, 1024)).toEqual({ control: 1, variant: 1 });
    expect(blocksOf(4000, 4000, 1024)).toEqual({ control: 2, variant: 2 });
    expect(blocksOf(4000, 6000, 1024)).toEqual({ control: 3, variant: 2 });
    expect(blocksOf(500_000, 500_000, 1024)).toEqual({ control: 1, variant: 1 });
    // 7 buckets of the smaller hold as many as 5 of the larger; 3 for 2 would be off by 6%, 4 for 3 likewise.
    expect(blocksOf(10_000, 14_142, 1024)).toEqual({ control: 7, variant: 5 });
  });

  it("cannot be told where one arm has too few blocks: then they are not taken as alike", () => {
    expect(blocksOf(99_000, 1000, 1024)).toBeNull();
    expect(blocksOf(100, 100, 1024)).toBeNull();
    expect(blocksOf(100, 0, 1024)).toBeNull();
    expect(alike(normal, 100, normal, 100)).toBe(0);
  });

  it.each([
    [normal, 5000, 5000],
    [lognormal(2), 9000, 1000],
    [buyers(0.1, 1), 9000, 1000],
    [buyers(0.02, 1), 4000, 6000],
    [bernoulli(0.01), 1000, 9000],
  ])("is so for two samples of one distribution: $name", (distribution, nc, nt) => {
    const found = Array.from({ length: 20 }, (_, word) => alike(distribution, nc, distribution, nt, word + 1));
    // By Kolmogorov's distribution each of two statistics is above 1.5 once in 45 tests, above 2 once in 1,500.
    expect(found.filter((share) => share === 1).length).toBeGreaterThanOrEqual(16);
    expect(Math.min(...found)).toBeGreaterThan(0);
  });

  it.each([
    [buyers(0.02, 1), buyers(0.1, 1)],
    [lognormal(1.5), lognormal(1)],
  ])("is not so for equal means and other shapes: $name", (one, other) => {
    const found = Array.from({ length: 20 }, (_, word) => [
      alike(one, 9000, other, 1000, word + 1),
      alike(one, 1000, other, 9000, word + 1),
      alike(one, 5000, other, 5000, word + 1),
    ]).flat();
    expect(found.filter((share) => share < 0.5).length).toBeGreaterThanOrEqual(50);
  });

  it.each(resampled().bootstrap)("compares what the contrast compares of each unit: $kind", ({ kind, units }) => {
    const found = bucketScores(cellsOf(kind, units, 64));
    const scores = scoresOf(kind, units);
    // Pivot and scale of cells are their own; a ratio's scores come in the metric's unit.
    const scale = kind === "ratio" ? 1 : 8;
    for (const [arm, is] of [
      ["control", 0],
      ["variant", 1],
    ] as const) {
      const sums = found?.[arm];
      for (let bucket = 0; bucket < 64; bucket++) {
        const own = scores.filter(([at, isVariant]) => at === bucket && isVariant === is).map(([, , y]) => y);
        const [n = 0, s1 = 0, s2 = 0] = [sums?.n[bucket], sums?.s1[bucket], sums?.s2[bucket]];
        expect(n).toBe(own.length);
        if (n === 0) continue;
        expect(scale ** 2 * (s2 - (s1 * s1) / n)).toBeCloseTo(squaresAboutMean(own), 6);
        if (kind === "ratio") expect(s1).toBeCloseTo(sum(own), 6);
      }
    }
  });

  it("is not so for one mean and another spread", () => {
    const wider: Distribution = {
      ...normal,
      sampler: (seed) => (n) =>
        normal
          .sampler(seed)(n)
          .map((x) => 1.3 * x),
    };
    const found = Array.from({ length: 10 }, (_, word) => alike(wider, 5000, normal, 5000, word + 1));
    expect(Math.max(...found)).toBe(0);
  });

  // Blocks of none but the commonest value are equal, whatever their size and however that value is rounded: these samples
  // were told apart by the last bit of n times 0.1.
  it("does not change with where the commonest value lies", () => {
    const moved: Distribution = {
      ...normal,
      sampler: (seed) => (n) =>
        buyers(0.02, 1)
          .sampler(seed)(n)
          .map((x) => x + 0.1),
    };
    for (const [nc, nt] of [
      [6500, 3250],
      [9000, 1000],
    ] as const) {
      expect(alike(moved, nc, moved, nt)).toBe(alike(buyers(0.02, 1), nc, buyers(0.02, 1), nt));
    }
  });

  it("takes a change of a tenth in a heavy-tailed metric as alike, for that moves no shape", () => {
    const found = Array.from({ length: 20 }, (_, word) => alike(buyers(0.11, 1), 1000, buyers(0.1, 1), 9000, word + 1));
    expect(found.filter((share) => share === 1).length).toBeGreaterThanOrEqual(14);
  });
});
