import { readFileSync } from "node:fs";
import fc from "fast-check";
import type { ShapedArm } from "../../src/stats/expansion.ts";

/** An arm of n units of a distribution with this standard deviation and shape. */
export function shaped(n: number, sd: number, skewness: number, kurtosis: number, c: number | null = null): ShapedArm {
  return { n, variance: sd ** 2 / n, skewness, kurtosis, ratio: c === null ? null : c / n };
}

/** Exponential: g1 2, g2 6 (Johnson, Kotz and Balakrishnan 1994, 19.4). */
export const exponential = (n: number) => shaped(n, 1, 2, 6);

/** Arms whose g2 is at least g1^2 - 2, as it must be (Kendall and Stuart 1969, exercise 3.19). */
export const anyShape = fc
  .record({
    n: fc.integer({ min: 2, max: 1_000_000 }),
    sd: fc.double({ min: 0.01, max: 100, noNaN: true }),
    skewness: fc.double({ min: -20, max: 20, noNaN: true }),
    over: fc.double({ min: 0, max: 50, noNaN: true }),
    ratio: fc.option(fc.double({ min: -2, max: 2, noNaN: true })),
  })
  .map(({ n, sd, skewness, over, ratio }) => shaped(n, sd, skewness, skewness ** 2 - 2 + over, ratio));

function read<Shape>(name: string): Shape {
  return JSON.parse(readFileSync(new URL(`../reference/${name}`, import.meta.url), "utf8")) as Shape;
}

type Four = [n: number, sd: number, skewness: number, kurtosis: number];

/** Two public programs for Edgeworth expansions; the file says which, and how they were called. */
export const edgeworth = () =>
  read<{
    cases: {
      variant: Four;
      control: Four;
      rows: { x: number; tcftt1: string; tcftt2: string; edgee1: string; edgee2: string }[];
    }[];
  }>("edgeworth.json").cases;

/** Simulated misses of the normal interval of two ratios, beside the population's moments. */
export const ratioTails = () =>
  read<
    {
      power: number;
      control: number;
      variant: number;
      sd: number;
      skewness: number;
      kurtosis: number;
      covariance: number;
      runs: number;
      below: number;
      above: number;
    }[]
  >("ratio-tails.json");
