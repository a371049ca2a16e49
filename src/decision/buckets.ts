import { type BucketSums, bucketNumbers, bucketPairs, bucketSums, type PairSums, withoutX } from "../cells/index.ts";
import type { CellTable, JointTable, KeptBuckets, MetricCells } from "../engine/types.ts";
import type { Metric } from "../plan/types.ts";
import { armsAlike, type BucketCells } from "../stats/index.ts";

/** What the cells by bucket say of one contrast. */
export interface Buckets {
  /** How far its arms look like one distribution, 1 to 0. */
  readonly alike: number;
  /** What it is drawn from; null where the buckets were not kept. */
  readonly cells: BucketCells | null;
  /** What was drawn from them before they were given up. */
  readonly drawn: KeptBuckets["drawn"];
  /** Whole numbers of both arms, which tell its draws from those of other cells. */
  readonly numbers: readonly (readonly (number | bigint)[])[];
}

/** The buckets of the contrast of two variants, by their place in the plan; of its adjusted values or of its own. */
export type BucketsOf = (control: number, variant: number, isAdjusted: boolean) => Buckets;

/** @returns null for a quantile, which is not resampled */
export function bucketsOf(metric: Metric, cells: MetricCells, variants: number): BucketsOf | null {
  if (cells.kept !== undefined && metric.summary !== "quantile") return ofKept(cells.kept);
  switch (metric.summary) {
    case "quantile":
      return null;
    case "ratio-of-totals":
      return ofRatio(metric, cells, variants);
    case "mean":
    case "proportion": {
      const plain = ofMean(cells, variants);
      const adjusted = cells.covariate === null ? null : ofAdjusted(cells.of, cells.covariate, variants);
      return (control, variant, isAdjusted) => {
        if (!isAdjusted) return plain(control, variant);
        if (adjusted === null) throw new Error(`"${metric.name}" is adjusted and came without its covariate's cells`);
        return adjusted(control, variant);
      };
    }
    default:
      return unknown(metric.summary);
  }
}

function ofMean({ of }: MetricCells, variants: number) {
  const sums = bucketSums(of, variants);
  const numbers = bucketNumbers(of, [of.n, of.high1, of.high2], variants);
  return (c: number, t: number): Buckets => {
    return withAlike({ kind: "mean", control: at(sums, c), variant: at(sums, t) }, [
      ...at(numbers, c),
      ...at(numbers, t),
    ]);
  };
}

function ofRatio(metric: Metric, { ratio }: MetricCells, variants: number) {
  if (ratio === null) throw new Error(`the ratio "${metric.name}" came without the cells of its denominator`);
  const pairs = bucketPairs(ratio.joint, variants);
  const numbers = numbersOf(ratio.joint, variants);
  return (c: number, t: number): Buckets =>
    withAlike(pairCells("ratio", ratio.joint, at(pairs, c), at(pairs, t)), [...at(numbers, c), ...at(numbers, t)]);
}

/** The slope is found anew in each draw, so the value and the covariate are drawn and not the adjusted value. */
function ofAdjusted(of: CellTable, { joint }: NonNullable<MetricCells["covariate"]>, variants: number) {
  const values = bucketSums(of, variants);
  const pairs = bucketPairs(joint, variants);
  const numbers = [bucketNumbers(of, [of.n, of.high1, of.high2], variants), numbersOf(joint, variants)];
  return (c: number, t: number): Buckets => {
    const [control, variant] = [at(pairs, c), at(pairs, t)];
    const having = sum(control.n) + sum(variant.n);
    const mean = having === 0 ? 0 : (sum(control.x) + sum(variant.x)) / having;
    return withAlike(
      pairCells("adjusted", joint, withoutX(at(values, c), control, mean), withoutX(at(values, t), variant, mean)),
      [c, t].flatMap((v) => numbers.flatMap((of) => at(of, v))),
    );
  };
}

function withAlike(cells: BucketCells, numbers: Buckets["numbers"]): Buckets {
  return { alike: armsAlike(cells), cells, drawn: null, numbers };
}

function ofKept(kept: readonly KeptBuckets[]): BucketsOf {
  return (c, t, isAdjusted) => {
    const found = kept.find((one) => one.control === c && one.variant === t && one.isAdjusted === isAdjusted);
    if (found === undefined) throw new Error(`nothing was kept of the buckets of variants ${c} and ${t}`);
    return { alike: found.alike, cells: null, drawn: found.drawn, numbers: [] };
  };
}

function pairCells(
  kind: "ratio" | "adjusted",
  { pivots, scales }: JointTable,
  control: PairSums,
  variant: PairSums,
): BucketCells {
  return { kind, pivots: [Number(pivots[0]), Number(pivots[1])], scales, control, variant };
}

function numbersOf(joint: JointTable, variants: number) {
  return bucketNumbers(joint, [joint.n, joint.high10, joint.high01, joint.high11], variants);
}

function sum(values: BucketSums["n"]): number {
  return values.reduce((a, b) => a + b, 0);
}

function at<Of>(of: readonly Of[], variant: number): Of {
  const found = of[variant];
  if (found === undefined) throw new Error(`no buckets of variant ${variant} among ${of.length}`);
  return found;
}

function unknown(summary: never): never {
  throw new Error(`no buckets of the summary ${String(summary)}`);
}
