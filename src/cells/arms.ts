import type { CellTable, MetricCells } from "../engine/types.ts";
import type { Metric } from "../plan/types.ts";
import { fraction, nearestNumber } from "./fraction.ts";
import { jointSums } from "./joint.ts";
import { partSums, scoreSums } from "./roll-up.ts";
import type { Arm, JointSums, PowerSums } from "./types.ts";

/** Order statistics are no cells: they are asked of the units, rank by rank. */
const NONE_ASKED: ReadonlyMap<number, bigint> = new Map();

type Ratio = NonNullable<MetricCells["ratio"]>;

/** What an arm is rolled up from; an engine's cells hold more. */
export interface ArmCells {
  readonly of: CellTable;
  readonly ratio: (Pick<Ratio, "per" | "score"> & Partial<Pick<Ratio, "joint">>) | null;
}

/**
 * One metric's cells, rolled up over buckets to one arm a variant.
 * @param variants how many the plan has; a variant without analysed units has no cells and gets sums of n 0
 * @returns index = variant in plan order
 */
export function arms(metric: Metric, cells: ArmCells, variants: number): Arm[] {
  const of = partSums(cells.of, variants);
  switch (metric.summary) {
    case "mean":
    case "proportion": {
      const kind = metric.summary;
      return of.map((sums) => ({ kind, sums }));
    }
    case "ratio-of-totals": {
      if (cells.ratio === null) throw new Error(`the ratio "${metric.name}" came without the cells of its denominator`);
      const per = partSums(cells.ratio.per, variants);
      const scores = scoreSums(cells.ratio.score, variants);
      const joint = cells.ratio.joint === undefined ? [] : jointSums(cells.ratio.joint, variants);
      return of.map((numerator, v) => ratioArm(numerator, at(per, v), at(scores, v), joint[v] ?? null));
    }
    case "quantile": {
      const q = metric.quantile;
      if (q === null) throw new Error(`the quantile "${metric.name}" came without its share`);
      return of.map((sums) => ({ kind: "quantile", sums, q, ordered: NONE_ASKED }));
    }
    default:
      return unknown(metric.summary);
  }
}

/** The score as readers see it, d + R: the arm's mean of d is 0, that of the score is the ratio. */
function ratioArm(numerator: PowerSums, denominator: PowerSums, d: PowerSums, joint: JointSums | null): Arm {
  if (d.n !== 0 && d.n !== numerator.n) throw new Error(`${d.n} scores for ${numerator.n} units`);
  // An engine gives no score to an arm whose denominators add up to 0.
  if (d.n === 0) return { kind: "ratio", numerator, denominator, score: null };
  const ratio = nearestNumber(fraction(numerator.total ?? 0n, denominator.total ?? 0n));
  const seen = (end: number | null) => (end === null ? null : end + ratio);
  return {
    kind: "ratio",
    numerator,
    denominator,
    score: { ...d, smallest: seen(d.smallest), largest: seen(d.largest) },
    joint,
  };
}

function at(sums: readonly PowerSums[], variant: number): PowerSums {
  const found = sums[variant];
  if (found === undefined) throw new Error(`no sums of variant ${variant} among ${sums.length}`);
  return found;
}

function unknown(summary: never): never {
  throw new Error(`no arms of the summary ${String(summary)}`);
}
