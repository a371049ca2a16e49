import type {
  CellTable,
  GroupCells,
  JointTable,
  MetricCells,
  MetricGroups,
  ScoreTable,
} from "../../src/engine/types.ts";
import type { OracleMetric, OracleSince } from "../oracle/types.ts";

/**
 * What is wrong with a metric's power sums by other groups, one line each: days and levels divide the units that buckets
 * divide, so their sums must add up to the very same whole numbers; those by day since enrolment are held against doubles
 * computed unit by unit, to 12 digits of the size that was added.
 */
export function wrongGroups(metric: OracleMetric, cells: MetricCells, groups: MetricGroups): string[] {
  const joint = cells.ratio?.joint ?? cells.covariate?.joint ?? null;
  const divided = [...(groups.byDay === null ? [] : [groups.byDay]), ...groups.byLevel];
  const wrong = [
    ...divided.flatMap((group, g) => unequalSums(`grouping ${g}`, cells.of, joint, group)),
    ...(metric.since === null || groups.sinceEnrolment === null ? [] : wrongSince(metric.since, groups.sinceEnrolment)),
  ];
  return wrong.map((line) => `${metric.metric}, ${line}`);
}

const POWERS = ["1", "2", "3", "4"] as const;
const PAIRS = ["10", "01", "20", "11", "02"] as const;

function unequalSums(what: string, of: CellTable, joint: JointTable | null, group: GroupCells): string[] {
  const values = POWERS.flatMap((k) => unequal(`${what}, S${k}`, sumsOf(of, k), sumsOf(group.of, k)));
  if (joint === null || group.joint === null) {
    return joint === group.joint ? values : [...values, `${what}: pairs on one side only`];
  }
  const pairs = group.joint;
  return [...values, ...PAIRS.flatMap((jk) => unequal(`${what}, S${jk}`, pairsOf(joint, jk), pairsOf(pairs, jk)))];
}

type Sums = ReadonlyMap<number, bigint>;

function unequal(what: string, buckets: Sums, groups: Sums): string[] {
  return [...new Set([...buckets.keys(), ...groups.keys()])].flatMap((variant) => {
    const [a, b] = [buckets.get(variant), groups.get(variant)];
    return a === b ? [] : [`${what} of variant ${variant} is ${b}, by bucket ${a}`];
  });
}

const sumsOf = (table: CellTable | ScoreTable, k: (typeof POWERS)[number]): Sums =>
  byVariant(table.variant, (row) => joined(table[`high${k}`], table[`low${k}`], row));

const pairsOf = (table: JointTable, jk: (typeof PAIRS)[number]): Sums =>
  byVariant(table.variant, (row) => joined(table[`high${jk}`], table[`low${jk}`], row));

function byVariant(variants: readonly number[], sumOf: (row: number) => bigint): Sums {
  const sums = new Map<number, bigint>();
  for (const [row, variant] of variants.entries()) sums.set(variant, (sums.get(variant) ?? 0n) + sumOf(row));
  return sums;
}

const joined = (high: readonly bigint[], low: readonly bigint[], row: number): bigint =>
  ((high[row] ?? 0n) << 60n) + (low[row] ?? 0n);

function wrongSince(
  { days, units }: OracleSince,
  { groups, slope, scores }: NonNullable<MetricGroups["sinceEnrolment"]>,
): string[] {
  const weight = (day: number) => 2 * day - (days - 1);
  const number = (nano: bigint) => Number(nano) / 1e9;
  const arms = [...new Set(units.map(({ variant }) => variant))];
  const inArm = (variant: number) => units.filter((unit) => unit.variant === variant);
  return arms.flatMap((variant) => {
    const own = inArm(variant);
    const slopes = own.map(({ of }) => of.reduce((sum, y, day) => sum + weight(day) * number(y), 0));
    const ofScores = scoreSlopes(own, days);
    return [
      ...Array.from({ length: days }, (_, day) => day).flatMap((day) =>
        wrongPowers(
          `day ${day}`,
          groups.of,
          variant,
          day,
          own.map(({ of }) => number(of[day] ?? 0n)),
        ),
      ),
      ...(slope === null ? [] : wrongPowers("slope", slope, variant, 0, slopes)),
      ...(scores === null || ofScores === null ? [] : wrongPowers("scores", scores, variant, 0, ofScores)),
      ...(slope === null && (ofScores === null) !== (scores === null || !scores.variant.includes(variant))
        ? [`scores of variant ${variant}: on one side only`]
        : []),
    ];
  });
}

/** Each unit's slope of (a - R b) / mean(b), R and mean(b) of the arm on the day; null without a ratio on some day. */
function scoreSlopes(own: OracleSince["units"], days: number): number[] | null {
  const ratios = Array.from({ length: days }, (_, day) => {
    const total = (pick: (unit: OracleSince["units"][number]) => bigint | undefined) =>
      own.reduce((sum, unit) => sum + (pick(unit) ?? 0n), 0n);
    const [a, b] = [total(({ of }) => of[day]), total(({ per }) => per?.[day])];
    return b === 0n ? null : { ratio: Number(a) / Number(b), meanOfB: Number(b) / 1e9 / own.length };
  });
  if (ratios.some((day) => day === null)) return null;
  return own.map(({ of, per }) =>
    ratios.reduce((sum, found, day) => {
      if (found === null) return sum;
      const d = (Number(of[day] ?? 0n) / 1e9 - (found.ratio * Number(per?.[day] ?? 0n)) / 1e9) / found.meanOfB;
      return sum + (2 * day - (days - 1)) * d;
    }, 0),
  );
}

function wrongPowers(
  what: string,
  table: CellTable | ScoreTable,
  variant: number,
  group: number,
  values: readonly number[],
): string[] {
  const row = table.variant.findIndex((own, i) => own === variant && table.bucket[i] === group);
  if (row < 0) return [`${what} of variant ${variant} has no row`];
  const reach = Math.max(...values.map(Math.abs), table.scale * 2 ** -40);
  return POWERS.flatMap((k) => {
    const power = Number(k);
    const expected = values.reduce((sum, value) => sum + (value / table.scale) ** power, 0);
    const found = Number(joined(table[`high${k}`], table[`low${k}`], row)) / 2 ** 120;
    const allowed = 1e-11 * values.length * Math.max((reach / table.scale) ** power, 1e-9);
    return Math.abs(found - expected) <= allowed
      ? []
      : [`${what}, S${k} of variant ${variant} is ${found}, unit by unit ${expected}`];
  });
}
