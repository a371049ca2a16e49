import type { Plan } from "../plan/index.ts";
import type { Engine, Value } from "./engine.ts";
import type { MeasuredMetric } from "./measuredMetric.ts";
import { nanoText } from "./nano.ts";
import type { Score } from "./scores.ts";
import { type Dialect, double, type EndOfArm, pairsAtEnds, sql } from "./sql/index.ts";
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
  const keyed = metrics.filter(({ paired }) => paired !== null);
  const asked = keyed.flatMap((one, key) =>
    plan.variants.flatMap((_, v) =>
      SIDES.flatMap((side) => {
        const end = endOfArm(one, key, v, side, dialect);
        return end === null ? [] : [{ one, v, side, end }];
      }),
    ),
  );
  const keys = keyed.map(({ score, y }) => score?.d ?? y.x);
  const ends = asked.map(({ end }) => end);
  const [row = {}] = asked.length === 0 ? [] : await engine.query(pairsAtEnds(keys, ends));
  return metrics.map((one) =>
    plan.variants.map((_, v) => {
      const [smallest, largest] = SIDES.map((side) => {
        const at = asked.findIndex((end) => end.one === one && end.v === v && end.side === side);
        if (at >= 0) return pairOf(row[`y${at}`] ?? null, row[`x${at}`] ?? null);
        const value = extreme(one, v, side);
        return one.paired !== null || value === null ? null : { value, x: null };
      });
      return smallest == null || largest == null ? null : { smallest, largest };
    }),
  );
}

/** Null in an arm without units, or without scores. */
function endOfArm(
  one: Scored,
  key: number,
  variant: number,
  side: (typeof SIDES)[number],
  dialect: Dialect,
): EndOfArm | null {
  if (one.paired === null) return null;
  const pair = { variant, key, y: one.y.x, x: one.paired.x.x };
  if (one.score !== null) {
    const { table } = one.score;
    const scores = table[side].filter((_, i) => table.variant[i] === variant);
    if (scores.length === 0) return null;
    return { ...pair, at: double(side === "smallest" ? Math.min(...scores) : Math.max(...scores)) };
  }
  const value = extreme(one, variant, side);
  return value === null ? null : { ...pair, at: sql`CAST(${nanoText(value)} AS ${dialect.sumType})` };
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
