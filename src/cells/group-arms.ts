import type { CellTable, GroupCells, JointTable } from "../engine/types.ts";
import type { Metric } from "../plan/types.ts";
import { fraction, nearestNumber } from "./fraction.ts";
import { ratioOfPairs, secondOf } from "./pair-ratio.ts";
import { joined, NANO, noUnits } from "./sums.ts";
import type { Arm, CovariateArm, JointSums, PowerSums } from "./types.ts";

/** The sums of some units of every variant, in plan order: a day's, a level's, or all up to a day. */
export interface GroupSums {
  /** The day or the level's code. */
  readonly group: number;
  readonly arms: readonly ArmSums[];
}
export interface ArmSums {
  readonly value: PowerSums;
  /** Of a ratio's two parts, or of a value and its covariate. */
  readonly joint: JointSums | null;
}

/**
 * One metric's cells as sums of each group, in rising order of the group.
 * @param variants how many the plan has; one without units in a group has sums of n 0 there
 */
export function groupSums({ of, joint }: GroupCells, variants: number): GroupSums[] {
  const groups = [...new Set(of.bucket)].sort((a, b) => a - b);
  const [values, joints] = [rowsOf(of), joint === null ? null : rowsOf(joint)];
  return groups.map((group) => ({
    group,
    arms: Array.from({ length: variants }, (_, variant) => ({
      value: valueAt(of, values(variant, group)),
      joint: joint === null || joints === null ? null : jointAt(joint, joints(variant, group)),
    })),
  }));
}

/** Of each group with all before it, together. */
export function accumulated(groups: readonly GroupSums[]): GroupSums[] {
  const found: GroupSums[] = [];
  for (const { group, arms } of groups) {
    const before = found.at(-1)?.arms;
    const together = arms.map((arm, v) => added(before?.[v] ?? null, arm));
    found.push({ group, arms: together });
  }
  return found;
}

/** The arms of a metric in one group: of a ratio by its own R, unadjusted where the plan adjusts. */
export function groupArms(metric: Metric, { arms }: GroupSums): Arm[] {
  return arms.map(({ value, joint }): Arm => {
    switch (metric.summary) {
      case "mean":
      case "proportion":
        return { kind: metric.summary, sums: value };
      case "ratio-of-totals":
        if (joint === null) throw new Error(`the ratio "${metric.name}" came without the sums of its pairs`);
        return ratioOfPairs(value, joint);
      case "quantile":
        throw new Error(`the quantile "${metric.name}" has no sums by group`);
      default:
        return unknown(metric.summary);
    }
  });
}

/** The same with what the plan adjusts for. */
export function groupCovariates({ arms }: GroupSums): CovariateArm[] {
  return arms.map(({ value, joint }) => {
    if (joint === null) throw new Error("an adjusted metric came without the sums of its pairs");
    return { value, covariate: secondOf(joint), joint };
  });
}

function rowsOf(table: CellTable | JointTable): (variant: number, group: number) => number | null {
  const places = new Map(table.n.map((_, row) => [`${table.variant[row]}/${table.bucket[row]}`, row]));
  return (variant, group) => places.get(`${variant}/${group}`) ?? null;
}

function valueAt(table: CellTable, row: number | null): PowerSums {
  const { pivot, scale } = table;
  if (row === null) return noUnits(pivot, scale, 0n);
  const power = (k: 1 | 2 | 3 | 4) => joined(at(table[`high${k}`], row), at(table[`low${k}`], row));
  const decimal = (nano: bigint) => nearestNumber(fraction(nano, NANO));
  return {
    n: at(table.n, row),
    pivot,
    scale,
    powers: [power(1), power(2), power(3), power(4)],
    total: at(table.total, row),
    smallest: decimal(at(table.smallest, row)),
    largest: decimal(at(table.largest, row)),
  };
}

function jointAt(table: JointTable, row: number | null): JointSums {
  const { pivots, scales } = table;
  const none = { n: 0, s10: 0n, s01: 0n, s20: 0n, s11: 0n, s02: 0n, totals: [0n, 0n] as const };
  if (row === null) return { pivots, scales, ...none };
  const sum = (jk: "10" | "01" | "20" | "11" | "02") => joined(at(table[`high${jk}`], row), at(table[`low${jk}`], row));
  return {
    pivots,
    scales,
    n: at(table.n, row),
    s10: sum("10"),
    s01: sum("01"),
    s20: sum("20"),
    s11: sum("11"),
    s02: sum("02"),
    totals: [at(table.totalY, row), at(table.totalX, row)],
  };
}

function added(before: ArmSums | null, arm: ArmSums): ArmSums {
  if (before === null) return arm;
  return {
    value: addedValues(before.value, arm.value),
    joint: before.joint === null || arm.joint === null ? null : addedJoints(before.joint, arm.joint),
  };
}

function addedValues(a: PowerSums, b: PowerSums): PowerSums {
  const [a1, a2, a3, a4] = a.powers;
  const [b1, b2, b3, b4] = b.powers;
  const ends = (pick: (...values: number[]) => number, of: "smallest" | "largest") => {
    const known = [a[of], b[of]].filter((end) => end !== null);
    return known.length === 0 ? null : pick(...known);
  };
  return {
    ...a,
    n: a.n + b.n,
    powers: [a1 + b1, a2 + b2, a3 + b3, a4 + b4],
    total: (a.total ?? 0n) + (b.total ?? 0n),
    smallest: ends(Math.min, "smallest"),
    largest: ends(Math.max, "largest"),
  };
}

function addedJoints(a: JointSums, b: JointSums): JointSums {
  return {
    ...a,
    n: a.n + b.n,
    s10: a.s10 + b.s10,
    s01: a.s01 + b.s01,
    s20: a.s20 + b.s20,
    s11: a.s11 + b.s11,
    s02: a.s02 + b.s02,
    totals: [a.totals[0] + b.totals[0], a.totals[1] + b.totals[1]],
  };
}

function at<T>(column: readonly T[], row: number): T {
  const value = column[row];
  if (value === undefined) throw new Error(`no row ${row} in a column of ${column.length}`);
  return value;
}

function unknown(summary: never): never {
  throw new Error(`no arms of the summary ${String(summary)}`);
}
