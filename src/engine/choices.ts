import type { Metric, Plan } from "../plan/index.ts";
import { capAtQuantile } from "./caps.ts";
import { type Engine, whole } from "./engine.ts";
import { unpivoted } from "./scores.ts";
import { capped, type Dialect, EACH_ARM, EACH_STANDING, type Over, type Statement, sql } from "./sql/index.ts";
import { type DecimalMeasure, decimalMeasures, decimalTables, jointTables } from "./tables.ts";
import type { CellTable, ChoiceCells, ChoiceId, JointTable } from "./types.ts";

/** A metric's values over `candidates`: y before and after the cap, and what it is paired with. */
export interface MetricValues {
  readonly metric: Metric;
  readonly plain: Statement;
  readonly value: Statement;
  /** A ratio's denominator or a covariate. */
  readonly paired: Statement | null;
}

/**
 * The metrics under other reasonable choices (METHODS 6), as far as they need other units or other values: all of them in
 * a few statements over the candidates, not a run a choice. Quantiles have none here.
 */
export async function choiceCells(
  plan: Plan,
  metrics: readonly MetricValues[],
  engine: Engine,
  dialect: Dialect,
): Promise<ChoiceCells[][]> {
  const standing = await tablesOver(
    metrics.map(({ value, paired }) => ({ value, paired })),
    sql`candidates`,
    EACH_STANDING,
    engine,
    dialect,
  );
  const cappedOtherwise = await Promise.all(metrics.map((metric) => otherCaps(metric, engine)));
  const flat = cappedOtherwise.flatMap((caps, m) => caps.map((cap) => ({ m, ...cap })));
  const other = await tablesOver(
    flat.map(({ m, cap }) => ({
      value: capped(metrics[m]?.plain ?? sql`NULL`, cap, dialect),
      paired: metrics[m]?.paired ?? null,
    })),
    sql`units`,
    EACH_ARM,
    engine,
    dialect,
  );
  const logs = await loggedCells(metrics, engine);
  return metrics.map(({ metric }, m) => {
    if (metric.summary === "quantile") return [];
    const units = standings(plan).map(({ choice, has }) => {
      const { of, joint } = standing[m] ?? { of: emptyCells, joint: null };
      return { choice, of: kept(of, has), joint: joint === null ? null : kept(joint, has), logged: null };
    });
    const caps = flat.flatMap(({ m: own, choice }, i) => {
      const table = other[i];
      return own === m && table !== undefined ? [{ choice, of: table.of, joint: table.joint, logged: null }] : [];
    });
    return [...caps, ...(logs[m] ?? []), ...units];
  });
}

/** Choices of units, by the bits of their standing (EACH_STANDING). */
function standings(plan: Plan): { choice: ChoiceId; has: (bits: number) => boolean }[] {
  const hasTime = plan.log.every((source) => source.columns.time !== null);
  const all = [
    { choice: "other-way-in-two-variants" as const, has: (bits: number) => (bits & 2) !== 0, applies: true },
    {
      choice: "any-follow-up" as const,
      has: (bits: number) => (bits & 4) !== 0,
      applies: plan.followUp?.incomplete === "exclude",
    },
    { choice: "without-first-day" as const, has: (bits: number) => (bits & 9) === 1, applies: hasTime },
  ];
  return all.filter(({ applies }) => applies);
}

const OTHER_QUANTILES = [
  ["cap-0.99", "0.99"],
  ["cap-0.999", "0.999"],
] as const;

/** Caps that the plan does not set: none, and the two usual quantiles. */
async function otherCaps(
  { metric, plain }: MetricValues,
  engine: Engine,
): Promise<{ choice: ChoiceId; cap: string | null }[]> {
  if (metric.summary !== "mean" && metric.summary !== "ratio-of-totals") return [];
  const own = metric.cap?.kind === "quantile" ? metric.cap.q.replace(/0+$/, "") : null;
  const none = metric.cap === null ? [] : [{ choice: "no-cap" as const, cap: null }];
  const caps = await Promise.all(
    OTHER_QUANTILES.filter(([, q]) => q !== own).map(async ([choice, q]) => {
      const cap = await capAtQuantile(q, plain, engine);
      return cap === null ? [] : [{ choice, cap }];
    }),
  );
  return [...none, ...caps.flat()];
}

/** log(1 + x) of means without a value under 0. */
async function loggedCells(metrics: readonly MetricValues[], engine: Engine): Promise<ChoiceCells[][]> {
  const isFit = await Promise.all(
    metrics.map(async ({ metric, plain }) => {
      if (metric.summary !== "mean") return false;
      const [row = {}] = await engine.query(sql`SELECT count(*) AS n FROM units WHERE ${plain} < 0`);
      return whole(row, "n") === 0n;
    }),
  );
  const fit = metrics.map((_, m) => m).filter((m) => isFit[m]);
  const tables = await unpivoted(
    fit.map((m) => sql`ln(1 + CAST(${metrics[m]?.value ?? sql`NULL`} AS DOUBLE))`),
    engine,
  );
  return metrics.map((_, m) => {
    const table = tables[fit.indexOf(m)];
    return table === undefined ? [] : [{ choice: "log", of: emptyCells, joint: null, logged: table }];
  });
}

interface Tables {
  readonly of: CellTable;
  readonly joint: JointTable | null;
}

async function tablesOver(
  values: readonly { readonly value: Statement; readonly paired: Statement | null }[],
  from: Statement,
  over: Over,
  engine: Engine,
  dialect: Dialect,
): Promise<Tables[]> {
  const paired = values.flatMap(({ paired }) => (paired === null ? [] : [paired]));
  const measures = await decimalMeasures([...values.map(({ value }) => value), ...paired], from, engine, dialect);
  const of = await decimalTables(measures.slice(0, values.length), engine, over);
  const partner = partners(values, measures);
  const pairs = values.flatMap((_, i) => {
    const [y, x] = [measures[i], partner[i] ?? null];
    return y === undefined || x === null ? [] : [{ i, pair: [y, x] as const }];
  });
  const joint = await jointTables(
    pairs.map(({ pair }) => pair),
    engine,
    over,
  );
  return of.map((table, i) => {
    const at = pairs.findIndex((pair) => pair.i === i);
    return { of: table, joint: joint[at] ?? null };
  });
}

/** The measures of the partners stand after those of the values, in the order of the values that have one. */
function partners(
  values: readonly { readonly paired: Statement | null }[],
  measures: readonly DecimalMeasure[],
): (DecimalMeasure | null)[] {
  let next = values.length;
  return values.map(({ paired }) => (paired === null ? null : (measures[next++] ?? null)));
}

/** The rows of a table whose standing is asked for. */
function kept<T extends CellTable | JointTable>(table: T, has: (bits: number) => boolean): T {
  const at = table.bucket.map((bits, i) => (has(bits) ? i : -1)).filter((i) => i >= 0);
  const columns = Object.entries(table).map(([name, column]) => {
    const isColumn = Array.isArray(column) && name !== "pivots" && name !== "scales";
    return [name, isColumn ? at.map((i) => column[i]) : column];
  });
  return Object.fromEntries(columns) as T;
}

const emptyCells: CellTable = {
  pivot: "0",
  scale: 1,
  variant: [],
  bucket: [],
  n: [],
  high1: [],
  high2: [],
  high3: [],
  high4: [],
  low1: [],
  low2: [],
  low3: [],
  low4: [],
  total: [],
  smallest: [],
  largest: [],
};
