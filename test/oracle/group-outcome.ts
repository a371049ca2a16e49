import type { CellTable, GroupCells, JointTable, MetricGroups } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { ascending, nanoText } from "./number.ts";
import type { OracleMetric, OraclePlace, OracleSince } from "./types.ts";

/** The exact figures of a group of units: of a pair the totals of both. */
export interface GroupOutcome {
  readonly n: number;
  readonly total: string;
  readonly smallest: string;
  readonly largest: string;
  readonly pair: { readonly n: number; readonly y: string; readonly x: string } | null;
}
type Groups = Readonly<Record<string, GroupOutcome>>;

/** One metric by other groups than buckets, "variant/group". */
export interface GroupsOutcome {
  readonly byDay: Groups | null;
  readonly byLevel: readonly Groups[];
  readonly since: { readonly days: number; readonly groups: Groups; readonly slope: Groups | null } | null;
}

/** A value of the oracle's in its group. */
interface Placed {
  readonly variant: number;
  readonly group: number;
  readonly y: bigint;
  /** Null where the metric has no pair, or this unit none. */
  readonly x: bigint | null;
}

export function groupsOfOracle(
  plan: Plan,
  metric: OracleMetric,
  places: ReadonlyMap<string, OraclePlace>,
): GroupsOutcome {
  const planned = plan.metrics.find(({ name }) => name === metric.metric);
  if (planned === undefined) throw new Error(`no metric ${metric.metric}`);
  const hasPair = planned.per !== null || planned.adjustFor !== null;
  const isTold = planned.quantile === null;
  const by = (groupOf: (place: OraclePlace) => number) =>
    groupsOf(
      metric.values.map((value) => {
        const place = places.get(value.unit);
        if (place === undefined) throw new Error(`the unit ${value.unit} stands nowhere`);
        return { variant: value.variant, group: groupOf(place), y: value.of, x: value.per ?? value.x };
      }),
      hasPair,
    );
  const hasTime = plan.log.every(({ columns }) => columns.time !== null);
  return {
    byDay: isTold && hasTime ? by(({ day }) => day ?? 0) : null,
    byLevel: isTold ? plan.subgroups.map((_, s) => by(({ levels }) => levels[s] ?? -1)) : [],
    since: metric.since === null ? null : sinceOutcome(metric.since, planned.per !== null),
  };
}

function sinceOutcome({ days, units }: OracleSince, isRatio: boolean): GroupsOutcome["since"] {
  const perDay = units.flatMap(({ variant, of, per }) =>
    of.map((y, group) => ({ variant, group, y, x: per?.[group] ?? null })),
  );
  const slopes = units.map(({ variant, of }) => ({
    variant,
    group: 0,
    y: of.reduce((sum, y, day) => sum + BigInt(2 * day - (days - 1)) * y, 0n),
    x: null,
  }));
  return { days, groups: groupsOf(perDay, isRatio), slope: isRatio ? null : groupsOf(slopes, false) };
}

function groupsOf(values: readonly Placed[], hasPair: boolean): Groups {
  const keys = [...new Set(values.map(({ variant, group }) => `${variant}/${group}`))].sort();
  return Object.fromEntries(
    keys.map((key) => {
      const own = values.filter(({ variant, group }) => `${variant}/${group}` === key);
      const ys = own.map(({ y }) => y).sort(ascending);
      const pairs = own.flatMap(({ y, x }) => (x === null ? [] : [{ y, x }]));
      const sum = (numbers: readonly bigint[]) => nanoText(numbers.reduce((all, one) => all + one, 0n));
      const pair = { n: pairs.length, y: sum(pairs.map(({ y }) => y)), x: sum(pairs.map(({ x }) => x)) };
      return [
        key,
        {
          n: own.length,
          total: sum(ys),
          smallest: nanoText(ys[0] ?? 0n),
          largest: nanoText(ys.at(-1) ?? 0n),
          pair: hasPair && pairs.length > 0 ? pair : null,
        },
      ];
    }),
  );
}

export function groupsOfEngine({ byDay, byLevel, sinceEnrolment: since }: MetricGroups): GroupsOutcome {
  return {
    byDay: byDay === null ? null : groupsOfCells(byDay),
    byLevel: byLevel.map(groupsOfCells),
    since:
      since === null
        ? null
        : {
            days: since.days,
            groups: groupsOfCells(since.groups),
            slope: since.slope === null ? null : groupsOfCells({ of: since.slope, joint: null }),
          },
  };
}

function groupsOfCells({ of, joint }: GroupCells): Groups {
  const found = of.n.map((n, row) => {
    const key = keyOf(of, row);
    const place = joint === null ? -1 : joint.n.findIndex((_, at) => keyOf(joint, at) === key);
    const pair =
      joint === null || place < 0
        ? null
        : { n: joint.n[place] ?? 0, y: nanoText(joint.totalY[place] ?? 0n), x: nanoText(joint.totalX[place] ?? 0n) };
    const text = (column: readonly bigint[]) => nanoText(column[row] ?? 0n);
    return [key, { n, total: text(of.total), smallest: text(of.smallest), largest: text(of.largest), pair }] as const;
  });
  return Object.fromEntries(found.sort(([a], [b]) => (a < b ? -1 : 1)));
}

const keyOf = (table: CellTable | JointTable, row: number): string => `${table.variant[row]}/${table.bucket[row]}`;
