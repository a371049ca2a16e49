import type { Plan } from "../plan/index.ts";
import type { Engine, Value } from "./engine.ts";
import type { MeasuredMetric } from "./measuredMetric.ts";
import { nanoText } from "./nano.ts";
import type { Score } from "./scores.ts";
import { type Dialect, double, pairsAtEnds, type Statement, sql } from "./sql/index.ts";
import type { UnitEnds } from "./types.ts";

type Scored = MeasuredMetric & { readonly score: Score | null };

const SIDES = ["smallest", "largest"] as const;

/** The units at the ends of each arm. The cells know the ends; the units are asked only for what is paired with them. */
export async function endsOfArms(
  plan: Plan,
  metrics: readonly Scored[],
  engine: Engine,
  dialect: Dialect,
): Promise<(UnitEnds | null)[][]> {
  const asked = metrics.flatMap((one, m) => {
    const { paired, score, y } = one;
    if (paired === null) return [];
    const ends = plan.variants.flatMap((_, variant) =>
      SIDES.flatMap((side, end) => {
        const at = endOfArm(one, variant, side, dialect);
        return at === null ? [] : [{ variant, end, at }];
      }),
    );
    return ends.length === 0 ? [] : [{ m, pair: { key: score?.d ?? y.x, y: y.x, x: paired.x.x, ends } }];
  });
  const rows = asked.length === 0 ? [] : await engine.query(pairsAtEnds(asked.map(({ pair }) => pair)));
  const found = new Map(rows.map((row) => [`${row.part}/${row.variant}/${row.end_of}`, row]));
  return metrics.map((one, m) => {
    const part = asked.findIndex((pair) => pair.m === m);
    return plan.variants.map((_, v) => {
      const [smallest, largest] = SIDES.map((side, end) => {
        const row = found.get(`${part}/${v}/${end}`);
        if (row !== undefined) return pairOf(row.y ?? null, row.x ?? null);
        const value = extreme(one, v, side);
        return one.paired !== null || value === null ? null : { value, x: null };
      });
      return smallest == null || largest == null ? null : { smallest, largest };
    });
  });
}

/** Null in an arm without units, or without scores. */
function endOfArm(one: Scored, variant: number, side: (typeof SIDES)[number], dialect: Dialect): Statement | null {
  if (one.score !== null) {
    const { table } = one.score;
    const scores = table[side].filter((_, i) => table.variant[i] === variant);
    if (scores.length === 0) return null;
    return double(side === "smallest" ? Math.min(...scores) : Math.max(...scores));
  }
  const value = extreme(one, variant, side);
  return value === null ? null : sql`CAST(${nanoText(value)} AS ${dialect.sumType})`;
}

function extreme({ of }: MeasuredMetric, variant: number, side: (typeof SIDES)[number]): bigint | null {
  const values = of[side].filter((_, i) => of.variant[i] === variant);
  const further = (a: bigint, b: bigint) => (side === "smallest" ? b < a : b > a);
  return values.reduce<bigint | null>((end, value) => (end === null || further(end, value) ? value : end), null);
}

function pairOf(y: Value, x: Value): UnitEnds["smallest"] | null {
  const nano = (value: Value) => (typeof value === "object" && value !== null ? value.nano : null);
  const value = nano(y);
  return value === null ? null : { value, x: nano(x) };
}
