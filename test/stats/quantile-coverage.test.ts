import { describe, expect, it } from "vitest";
import { compared } from "./ordered.ts";

/** A repeatable stream of numbers in (0, 1): mulberry32, T. Ettinger 2017, public domain. */
function stream(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return (((t ^ (t >>> 14)) >>> 0) + 0.5) / 4294967296;
  };
}

type Inverse = (u: number) => number;
/** Values of 9 places at most, as the engine has them. */
const exponential =
  (mean: number): Inverse =>
  (u) =>
    Number((-mean * Math.log1p(-u)).toFixed(6));
const lognormalLike: Inverse = (u) => Number(Math.exp(2 * Math.log(u / (1 - u))).toFixed(6)); // log-logistic, heavy tail
const poisson =
  (mean: number): Inverse =>
  (u) => {
    let [k, term] = [0, Math.exp(-mean)];
    for (let sum = term; sum < u; sum += term) {
      k++;
      term *= mean / k;
    }
    return k;
  };

const DRAWS = 2000;

/** How often the 95% interval holds the true difference, and how often p is under 0.05. An open end, or none, holds it. */
function simulated(control: Inverse, variant: Inverse, units: readonly [number, number], q: string) {
  const random = stream(20240229);
  const truth = variant(Number(q)) - control(Number(q));
  let [held, below, above, significant] = [0, 0, 0, 0];
  for (let i = 0; i < DRAWS; i++) {
    const draw = (inverse: Inverse, n: number) => Array.from({ length: n }, () => inverse(random()));
    const { difference } = compared(draw(control, units[0]), draw(variant, units[1]), q, 0.05);
    const isBelow = difference.high !== null && difference.high < truth - 1e-9;
    const isAbove = difference.low !== null && difference.low > truth + 1e-9;
    if (isBelow) below++;
    else if (isAbove) above++;
    else held++;
    if (difference.p !== null && difference.p < 0.05) significant++;
  }
  return { coverage: held / DRAWS, below: below / DRAWS, above: above / DRAWS, significant: significant / DRAWS };
}

// Three standard errors of a share of 0.05 in 2,000 draws are 0.0146. The ends are rounded outwards by up to a rank each, so
// the coverage may lie above 0.95; below it by chance only.
const LEAST = 0.95 - 0.0146;

describe("the 95% interval of a difference of quantiles", () => {
  it.each([
    ["medians, one exponential", exponential(1), exponential(1), [300, 300], "0.5", 0.98],
    ["medians a third apart, arms of 150 and 600", exponential(1), exponential(4 / 3), [150, 600], "0.5", 0.98],
    ["upper deciles", exponential(1), exponential(1.2), [400, 250], "0.9", 0.98],
    ["lower deciles of small arms", exponential(3), exponential(3), [60, 90], "0.1", 0.995],
    ["medians of a heavy tail", lognormalLike, lognormalLike, [200, 400], "0.5", 0.98],
    ["the 0.95 of a heavy tail", lognormalLike, lognormalLike, [500, 500], "0.95", 0.985],
  ] as const)("holds the truth about that often: %s", (_, control, variant, units, q, most) => {
    const found = simulated(control, variant, units, q);
    expect(found.coverage).toBeGreaterThan(LEAST);
    expect(found.coverage).toBeLessThan(most);
    expect(Math.max(found.below, found.above)).toBeLessThan(0.025 + 0.0146);
  });

  // Whole numbers: most intervals reach a whole step further than they must.
  it.each([
    ["medians of counts alike", poisson(2), poisson(2), [300, 300], "0.5"],
    ["medians of counts that lie at a step", poisson(2.674), poisson(2.674), [200, 300], "0.5"],
    ["upper deciles of counts a step apart", poisson(2), poisson(3), [300, 200], "0.9"],
    ["upper quartiles of rare counts", poisson(0.3), poisson(0.3), [400, 400], "0.75"],
    ["medians of large counts", poisson(40), poisson(42), [250, 250], "0.5"],
  ] as const)("holds it at least that often with ties: %s", (_, control, variant, units, q) => {
    const found = simulated(control, variant, units, q);
    expect(found.coverage).toBeGreaterThan(LEAST);
  });

  it("has a p under 0.05 in no more than 5% of tests without an effect", () => {
    for (const [one, q] of [
      [exponential(1), "0.5"],
      [exponential(1), "0.9"],
      [poisson(2), "0.5"],
      [poisson(2.674), "0.5"],
    ] as const) {
      expect(simulated(one, one, [200, 250], q).significant).toBeLessThan(0.05 + 0.0146);
    }
  });
});
