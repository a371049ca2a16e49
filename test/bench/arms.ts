import type { BucketSums } from "../../src/stats/bucket-cells.ts";
import type { ShapedArm } from "../../src/stats/expansion.ts";

/** A simulated arm: what the intervals take, from doubles and not from exact sums, for speed. */
export interface SimulatedArm extends ShapedArm {
  readonly mean: number;
  readonly buckets: BucketSums;
}

/** Units go to the buckets in turn, which for independent units is as good as by a hash. */
export function simulatedArm(units: Float64Array, buckets: number): SimulatedArm {
  const n = units.length;
  const mean = units.reduce((sum, x) => sum + x, 0) / n;
  let [m2, m3, m4] = [0, 0, 0];
  const [size, s1, s2] = [new Float64Array(buckets), new Float64Array(buckets), new Float64Array(buckets)];
  for (let i = 0; i < n; i++) {
    const x = units[i] ?? 0;
    const d = x - mean;
    const square = d * d;
    m2 += square;
    m3 += square * d;
    m4 += square * square;
    const bucket = i % buckets;
    size[bucket] = (size[bucket] ?? 0) + 1;
    s1[bucket] = (s1[bucket] ?? 0) + x;
    s2[bucket] = (s2[bucket] ?? 0) + x * x;
  }
  const varies = m2 > 0;
  return {
    n,
    mean,
    variance: m2 / (n - 1) / n,
    skewness: varies ? m3 / n / (m2 / n) ** 1.5 : 0,
    kurtosis: varies ? m4 / n / (m2 / n) ** 2 - 3 : 0,
    ratio: null,
    buckets: { n: size, s1, s2 },
  };
}
