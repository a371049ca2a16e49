import { describe, expect, it } from "vitest";
import { armsAlike, blocksOf, kolmogorov } from "../../src/stats/arms-alike.ts";
import { simulatedArm } from "../bench/arms.ts";
import { bernoulli, buyers, type Distribution, lognormal, normal } from "../bench/samplers.ts";

function alike(control: Distribution, nc: number, variant: Distribution, nt: number, word = 1): number {
  const arm = (distribution: Distribution, n: number, last: number) =>
    simulatedArm(distribution.sampler([word, 2, 3, last])(n), 1024).buckets;
  return armsAlike(arm(control, nc, 4), arm(variant, nt, 5));
}

describe("whether the arms look alike", () => {
  // D = 4/5 at 4: ranks by hand. R 4.2.2: ks.test(c(1, 2, 3, 4, 9), c(5, 6, 7, 8, 10)) prints D = 0.8.
  it("is Kolmogorov's statistic, with ties taken together", () => {
    const d = (a: number[], b: number[]) => kolmogorov(Float64Array.from(a), Float64Array.from(b));
    expect(d([1, 2, 3, 4, 9], [5, 6, 7, 8, 10])).toBeCloseTo(0.8 * Math.sqrt(25 / 10), 12);
    expect(d([0, 0, 0, 1], [0, 0, 0, 0, 0, 0, 1, 1])).toBe(0);
    expect(d([0, 0], [0, 0, 1, 1])).toBeCloseTo(0.5 * Math.sqrt(8 / 6), 12);
  });

  it("makes blocks of as many units in both arms, of at least eight", () => {
    expect(blocksOf(9000, 1000, 1024)).toEqual({ control: 1, variant: 9 });
    expect(blocksOf(1000, 9000, 1024)).toEqual({ control: 9, variant: 1 });
    expect(blocksOf(5000, 5000, 1024)).toEqual({ control: 2, variant: 2 });
    expect(blocksOf(4000, 6000, 1024)).toEqual({ control: 3, variant: 2 });
    expect(blocksOf(500_000, 500_000, 1024)).toEqual({ control: 1, variant: 1 });
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

  it("takes a change of a tenth in a heavy-tailed metric as alike, for that moves no shape", () => {
    const found = Array.from({ length: 20 }, (_, word) => alike(buyers(0.11, 1), 1000, buyers(0.1, 1), 9000, word + 1));
    expect(found.filter((share) => share === 1).length).toBeGreaterThanOrEqual(14);
  });
});
