import type { Plan } from "../plan/index.ts";
import { type Engine, nano } from "./engine.ts";
import type { MetricValue } from "./metrics.ts";
import { unpivoted } from "./scores.ts";
import { atRankOfArm, type Dialect, double, type Statement, sql } from "./sql/index.ts";
import type { ScoreTable } from "./types.ts";

/** An adjusted contrast's values d = (y - pivot) - theta (x - X) of two arms; a missing x is X. */
export interface AdjustedRequest {
  readonly metric: number;
  readonly control: number;
  readonly variant: number;
  readonly theta: number;
  /** X, the mean of x over both arms. */
  readonly meanOfX: number;
  /** Exact decimal text: what y is measured against. */
  readonly pivot: string;
}

/** What can still be asked of the units once the first sums are known. */
export interface Session {
  /** Cells of d, one table a request, of its two arms only. */
  adjusted(requests: readonly AdjustedRequest[]): Promise<ScoreTable[]>;
  /** The rank-th smallest value of an arm, from 1, after the cap, in 10^-9 of the metric's unit. */
  atRank(metric: number, variant: number, rank: bigint): Promise<bigint>;
}

export function openSession(plan: Plan, values: readonly MetricValue[], engine: Engine, dialect: Dialect): Session {
  const sizes = new Map<string, Promise<bigint>>();
  return {
    adjusted: (requests) =>
      unpivoted(
        requests.map((request) => adjustedValue(request, values, dialect)),
        engine,
      ),
    atRank: async (metric, variant, rank) => {
      const value = values[metric]?.value;
      if (value === undefined || plan.variants[variant] === undefined)
        throw new Error(`no arm ${variant} of metric ${metric}`);
      const key = `${metric} ${variant} ${rank}`;
      const found = sizes.get(key) ?? valueAt(value, variant, rank, engine);
      sizes.set(key, found);
      return found;
    },
  };
}

async function valueAt(value: Statement, variant: number, rank: bigint, engine: Engine): Promise<bigint> {
  const [row] = await engine.query(atRankOfArm(value, variant, rank));
  if (row === undefined) throw new Error(`no value at rank ${rank}`);
  return nano(row, "x");
}

function adjustedValue(request: AdjustedRequest, values: readonly MetricValue[], dialect: Dialect): Statement {
  const own = values[request.metric];
  if (own?.covariate == null) throw new Error(`metric ${request.metric} has no covariate`);
  const y = dialect.toDouble(sql`(${own.value} - CAST(${request.pivot} AS ${dialect.sumType}))`);
  const x = sql`coalesce((${dialect.toDouble(own.covariate)}) - ${double(request.meanOfX)}, CAST(0 AS DOUBLE))`;
  return sql`CASE WHEN variant IN (${request.control}, ${request.variant})
    THEN (${y}) - ${double(request.theta)} * ${x} END`;
}
