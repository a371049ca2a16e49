import { alike, pairTerms } from "../engine/groups.ts";
import type { CellTable, JointTable, MetricCells, OtherCells, ScoreTable, UnitEnds } from "../engine/types.ts";
import type { Metric } from "../plan/types.ts";
import { fraction, nearestNumber } from "./fraction.ts";
import { jointSums } from "./joint.ts";
import { pivotsOf, ratioOfPairs, secondOf } from "./pair-ratio.ts";
import { partSums, scoreSums } from "./roll-up.ts";
import { NANO, nanoOf } from "./sums.ts";
import type { Arm, CovariateArm, JointSums, PowerSums } from "./types.ts";

/** The arms of a metric under another choice, in plan order; with what they are adjusted for where the plan adjusts. */
export interface ChoiceArms {
  readonly choice: OtherCells | "without-largest";
  readonly arms: readonly Arm[];
  readonly covariates: readonly CovariateArm[] | null;
}

interface Sums {
  readonly value: PowerSums;
  readonly joint: JointSums | null;
}

/** The choices of other units and other caps that the engine gives cells for. */
export function choiceArms(metric: Metric, { choices }: Pick<MetricCells, "choices">, variants: number): ChoiceArms[] {
  return choices.flatMap((found) =>
    found.choice === "log"
      ? []
      : [{ choice: found.choice, ...armsOf(metric, sumsOf(found.of, found.joint, variants)) }],
  );
}

/**
 * The arms with the unit left out of each that lies farthest from the arm's mean, of a ratio the one whose score does: its
 * exact terms are taken from the sums.
 * @returns null where there is no such unit to tell: of a proportion, a quantile, and where an arm has under three units
 */
export function armsWithoutLargest(metric: Metric, cells: MetricCells, variants: number): ChoiceArms | null {
  if (metric.summary === "proportion" || metric.summary === "quantile") return null;
  const joint = cells.ratio?.joint ?? cells.covariate?.joint ?? null;
  const all = sumsOf(cells.of, joint, variants);
  const scores = cells.ratio === null ? null : scoreSums(cells.ratio.score, variants);
  const left = all.flatMap((sums, v) => {
    const ends = cells.ends[v] ?? null;
    return ends === null || sums.value.n < 3 ? [] : [without(sums, farthest(ends, sums.value, scores?.[v] ?? null))];
  });
  return left.length < all.length ? null : { choice: "without-largest", ...armsOf(metric, left) };
}

/** log(1 + x): its own mean, from doubles, each a few units of its last place off. */
export function loggedArms(table: ScoreTable, variants: number): Arm[] {
  return scoreSums(table, variants).map((sums) => ({
    kind: "adjusted",
    summary: "mean",
    mean: meanOf(sums),
    sums,
    noise: 4 * 2 ** -53 * Math.max(1, sums.largest ?? 0),
  }));
}

function sumsOf(of: CellTable, joint: JointTable | null, variants: number): Sums[] {
  const joints = joint === null ? null : jointSums(joint, variants);
  return partSums(of, variants).map((value, v) => ({ value: tightened(value), joint: joints?.[v] ?? null }));
}

/**
 * The ends of a choice's cells are bounds, for the unit that held one may have gone. Where all that are left have one value
 * the sums say so, and the ends are it.
 */
function tightened(value: PowerSums): PowerSums {
  const n = BigInt(value.n);
  if (value.total === null || n === 0n || value.total % n !== 0n) return value;
  const { sums } = alike(0, value.n, value.total / n, nanoOf(value.pivot), value.scale);
  if (value.powers.some((power, k) => power !== sums[k])) return value;
  const only = nearestNumber(fraction(value.total, n * NANO));
  return { ...value, smallest: only, largest: only };
}

function armsOf(metric: Metric, sums: readonly Sums[]): Pick<ChoiceArms, "arms" | "covariates"> {
  switch (metric.summary) {
    case "mean":
    case "proportion": {
      const kind = metric.summary;
      const covariates = sums.flatMap(({ value, joint }) =>
        joint === null ? [] : [{ value, covariate: secondOf(joint), joint }],
      );
      return {
        arms: sums.map(({ value }) => ({ kind, sums: value })),
        covariates: covariates.length === 0 ? null : covariates,
      };
    }
    case "ratio-of-totals":
      return { arms: sums.map(({ value, joint }) => ratioOfPairs(value, present(joint))), covariates: null };
    case "quantile":
      throw new Error(`the quantile "${metric.name}" has no other choices`);
    default:
      return unknown(metric.summary);
  }
}

/** Which end lies farther from the mean; of a ratio's arm farther from 0 by its score d. */
function farthest(ends: UnitEnds, { n, total }: PowerSums, scores: PowerSums | null): UnitEnds["smallest"] {
  if (scores !== null && scores.n > 0)
    return (scores.largest ?? 0) >= -(scores.smallest ?? 0) ? ends.largest : ends.smallest;
  const below = (total ?? 0n) - BigInt(n) * ends.smallest.value;
  const above = BigInt(n) * ends.largest.value - (total ?? 0n);
  return above >= below ? ends.largest : ends.smallest;
}

function without({ value, joint }: Sums, unit: UnitEnds["smallest"]): Sums {
  const { sums } = alike(0, 1, unit.value, nanoOf(value.pivot), value.scale);
  const [p1, p2, p3, p4] = value.powers;
  const [q1 = 0n, q2 = 0n, q3 = 0n, q4 = 0n] = sums;
  return {
    value: tightened({
      ...value,
      n: value.n - 1,
      powers: [p1 - q1, p2 - q2, p3 - q3, p4 - q4],
      total: (value.total ?? 0n) - unit.value,
    }),
    joint: joint === null || unit.x === null ? joint : withoutPair(joint, unit.value, unit.x),
  };
}

function withoutPair(joint: JointSums, y: bigint, x: bigint): JointSums {
  const [s10, s01, s20, s11, s02] = pairTerms([y, x], pivotsOf(joint), joint.scales);
  return {
    ...joint,
    n: joint.n - 1,
    s10: joint.s10 - s10,
    s01: joint.s01 - s01,
    s20: joint.s20 - s20,
    s11: joint.s11 - s11,
    s02: joint.s02 - s02,
    totals: [joint.totals[0] - y, joint.totals[1] - x],
  };
}

function meanOf({ n, scale, powers }: PowerSums) {
  if (n === 0) return fraction(0n, 1n);
  const [up, down] = scale >= 1 ? [BigInt(scale), 1n] : [1n, BigInt(1 / scale)];
  return fraction(powers[0] * up, (BigInt(n) << 120n) * down);
}

function present(joint: JointSums | null): JointSums {
  if (joint === null) throw new Error("a ratio came without the sums of its pairs");
  return joint;
}

function unknown(summary: never): never {
  throw new Error(`no arms of the summary ${String(summary)}`);
}
