import { count, type Engine, nano, type Row, real, whole, wholeOrNull } from "./engine.ts";
import { nanoText } from "./nano.ts";
import { pivotAndScale } from "./pivot.ts";
import {
  cells,
  classes,
  type Dialect,
  decimalValue,
  EACH_BUCKET,
  jointCells,
  type Measured,
  type Over,
  type Statement,
} from "./sql/index.ts";
import type { CellTable, JointTable, ScoreTable } from "./types.ts";

/** From values over units to tables of exact sums. */

export interface DecimalMeasure {
  readonly pivot: string;
  readonly scale: number;
  readonly value: Measured;
}

/** What each value is measured against, from the units of a table. */
export async function decimalMeasures(
  values: readonly Statement[],
  from: Statement,
  engine: Engine,
  dialect: Dialect,
): Promise<DecimalMeasure[]> {
  if (values.length === 0) return [];
  const rows = await engine.query(classes(values, from, dialect));
  return values.map((x, part) => {
    const { pivot, scale } = pivotAndScale(
      rows
        .filter((row) => Number(row.part) === part)
        .map((row) => ({
          powerOfTwo: wholeOrNull(row, "class") === null ? null : count(row, "class"),
          n: whole(row, "n"),
          total: nano(row, "total"),
          least: nano(row, "least"),
          most: nano(row, "most"),
        })),
    );
    return { pivot: nanoText(pivot), scale, value: decimalValue(x, nanoText(pivot), scale, dialect) };
  });
}

export async function decimalTables(
  measures: readonly DecimalMeasure[],
  engine: Engine,
  over: Over = EACH_BUCKET,
): Promise<CellTable[]> {
  const found = await someAtATime(
    measures.map((measure) => measure.value),
    (some) => engine.query(cells(some, over)),
  );
  return measures.map((measure, i) => {
    const { rows, at } = found[i] ?? { rows: [], at: 0 };
    return {
      pivot: measure.pivot,
      scale: measure.scale,
      ...powerColumns(rows, at),
      total: rows.map((row) => nano(row, `total${at}`)),
      smallest: rows.map((row) => nano(row, `least${at}`)),
      largest: rows.map((row) => nano(row, `most${at}`)),
    };
  });
}

/** Of doubles measured against 0. */
export async function doubleTables(
  values: readonly { readonly value: Measured; readonly scale: number }[],
  engine: Engine,
  over: Over = EACH_BUCKET,
): Promise<ScoreTable[]> {
  const found = await someAtATime(
    values.map(({ value }) => value),
    (some) => engine.query(cells(some, over)),
  );
  return values.map(({ scale }, i) => {
    const { rows, at } = found[i] ?? { rows: [], at: 0 };
    return {
      scale,
      ...powerColumns(rows, at),
      smallest: rows.map((row) => real(row, `least${at}`)),
      largest: rows.map((row) => real(row, `most${at}`)),
    };
  });
}

export type MeasuredPair = readonly [DecimalMeasure, DecimalMeasure];

export async function jointTables(
  pairs: readonly MeasuredPair[],
  engine: Engine,
  over: Over = EACH_BUCKET,
): Promise<JointTable[]> {
  const found = await someAtATime(
    pairs.map(([y, x]) => [y.value, x.value] as const),
    (some) => engine.query(jointCells(some, over)),
  );
  return pairs.map(([y, x], i) => {
    const { rows, at } = found[i] ?? { rows: [], at: 0 };
    const sums = (jk: string) => rows.map((row) => whole(row, `h${at}_${jk}`));
    const rests = (jk: string) => rows.map((row) => whole(row, `l${at}_${jk}`));
    return {
      pivots: [y.pivot, x.pivot],
      scales: [y.scale, x.scale],
      ...groupColumns(rows, at),
      high10: sums("10"),
      high01: sums("01"),
      high20: sums("20"),
      high11: sums("11"),
      high02: sums("02"),
      low10: rests("10"),
      low01: rests("01"),
      low20: rests("20"),
      low11: rests("11"),
      low02: rests("02"),
      totalY: rows.map((row) => nano(row, `y${at}`)),
      totalX: rows.map((row) => nano(row, `x${at}`)),
    };
  });
}

// A statement of a thousand columns takes longer to plan than to run.
const AT_ONCE = 12;

/** Rows of each value; a group in which no unit has one says nothing. */
async function someAtATime<T>(
  values: readonly T[],
  ask: (some: readonly T[]) => Promise<Row[]>,
): Promise<{ rows: Row[]; at: number }[]> {
  const found: { rows: Row[]; at: number }[] = [];
  for (let from = 0; from < values.length; from += AT_ONCE) {
    const some = values.slice(from, from + AT_ONCE);
    const rows = await ask(some);
    found.push(...some.map((_, at) => ({ rows: rows.filter((row) => count(row, `n${at}`) > 0), at })));
  }
  return found;
}

const groupColumns = (rows: readonly Row[], at: number) => ({
  variant: rows.map((row) => Number(row.variant)),
  bucket: rows.map((row) => Number(row.bucket)),
  n: rows.map((row) => count(row, `n${at}`)),
});

function powerColumns(rows: readonly Row[], at: number) {
  const sums = (kind: "h" | "l", k: number) => rows.map((row) => whole(row, `${kind}${at}_${k}`));
  return {
    ...groupColumns(rows, at),
    high1: sums("h", 1),
    high2: sums("h", 2),
    high3: sums("h", 3),
    high4: sums("h", 4),
    low1: sums("l", 1),
    low2: sums("l", 2),
    low3: sums("l", 3),
    low4: sums("l", 4),
  };
}
