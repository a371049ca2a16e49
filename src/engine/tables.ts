import { count, type Engine, nano, type Row, real, whole, wholeOrNull } from "./engine.ts";
import { nanoText } from "./nano.ts";
import { type PowerClass, pivotAndScale } from "./pivot.ts";
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
  readonly x: Statement;
  readonly pivot: string;
  readonly scale: number;
  readonly value: Measured;
  /** How many values lie in each power-of-two class of |x|. */
  readonly classes: readonly PowerClass[];
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
    const ofPart = rows
      .filter((row) => Number(row.part) === part)
      .map((row) => ({
        powerOfTwo: wholeOrNull(row, "class") === null ? null : count(row, "class"),
        n: whole(row, "n"),
        total: nano(row, "total"),
        least: nano(row, "least"),
        most: nano(row, "most"),
      }));
    const { pivot, scale } = pivotAndScale(ofPart);
    return measured(x, nanoText(pivot), scale, ofPart, dialect);
  });
}

/** A value measured against a pivot and a scale that are known. */
export const measured = (
  x: Statement,
  pivot: string,
  scale: number,
  classes: readonly PowerClass[],
  dialect: Dialect,
): DecimalMeasure => ({ x, pivot, scale, value: decimalValue(x, pivot, scale, dialect), classes });

export async function decimalTables(
  measures: readonly DecimalMeasure[],
  engine: Engine,
  over: Over = EACH_BUCKET,
): Promise<CellTable[]> {
  const tables = await groupedTables(measures, engine, over);
  return tables.map(([first]) => present(first));
}

/** The same in every grouping: one list a value, first that by bucket. */
export async function groupedTables(
  measures: readonly DecimalMeasure[],
  engine: Engine,
  over: Over,
): Promise<CellTable[][]> {
  const found = await someAtATime(
    measures.map((measure) => measure.value),
    (some) => engine.query(cells(some, over)),
  );
  return measures.map(({ pivot, scale }, i) => {
    const { rows: all, at } = found[i] ?? { rows: [], at: 0 };
    return byGrouping(all, over).map((rows) => ({
      pivot,
      scale,
      ...powerColumns(rows, at),
      total: rows.map((row) => nano(row, `total${at}`)),
      smallest: rows.map((row) => nano(row, `least${at}`)),
      largest: rows.map((row) => nano(row, `most${at}`)),
    }));
  });
}

const byGrouping = (rows: readonly Row[], { others = [] }: Over): Row[][] =>
  Array.from({ length: 1 + others.length }, (_, g) => rows.filter((row) => count(row, "grouping") === g));

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

/** Two values and their cells in the same groups. A unit without y has no x either. */
export interface MeasuredPair {
  readonly y: DecimalMeasure;
  readonly x: DecimalMeasure;
  readonly ofY: CellTable;
  readonly ofX: CellTable;
}

/** The same with their cells in every grouping. */
export interface GroupedPair extends Omit<MeasuredPair, "ofY" | "ofX"> {
  readonly ofY: readonly CellTable[];
  readonly ofX: readonly CellTable[];
}

export async function jointTables(
  pairs: readonly MeasuredPair[],
  engine: Engine,
  over: Over = EACH_BUCKET,
): Promise<JointTable[]> {
  const grouped = pairs.map((pair) => ({ ...pair, ofY: [pair.ofY], ofX: [pair.ofX] }));
  const tables = await groupedJointTables(grouped, engine, over);
  return tables.map(([first]) => present(first));
}

/** What the cells of y and of x say already is taken from them: new are the products, and y over the units that have x. */
export async function groupedJointTables(
  pairs: readonly GroupedPair[],
  engine: Engine,
  over: Over,
): Promise<JointTable[][]> {
  const asked = pairs.map(({ y, x, ofY: [ofY], ofX: [ofX] }) => ({
    y: y.value,
    x: x.value,
    isPartial: sum(present(ofY).n) !== sum(present(ofX).n),
  }));
  const found = await someAtATime(asked, (some) => engine.query(jointCells(some, over)));
  return pairs.map((pair, i) => {
    const { rows, at } = found[i] ?? { rows: [], at: 0 };
    const isPartial = asked[i]?.isPartial ?? false;
    return byGrouping(rows, over).map((own, g) => {
      const [ofY, ofX] = [present(pair.ofY[g]), present(pair.ofX[g])];
      return jointTable({ ...pair, ofY, ofX }, own, at, isPartial);
    });
  });
}

function jointTable(
  { y, x, ofY, ofX }: MeasuredPair,
  rows: readonly Row[],
  at: number,
  isPartial: boolean,
): JointTable {
  const [rowOfY, rowOfX] = [finder(ofY), finder(ofX)];
  const inY = (own: string, column: readonly bigint[]) =>
    rows.map((row) => (isPartial ? whole(row, own) : part(column, rowOfY(row))));
  const inX = (column: readonly bigint[]) => rows.map((row) => part(column, rowOfX(row)));
  return {
    pivots: [y.pivot, x.pivot],
    scales: [y.scale, x.scale],
    ...groupColumns(rows, at),
    high10: inY(`h${at}_10`, ofY.high1),
    high01: inX(ofX.high1),
    high20: inY(`h${at}_20`, ofY.high2),
    high11: rows.map((row) => whole(row, `h${at}_11`)),
    high02: inX(ofX.high2),
    low10: inY(`l${at}_10`, ofY.low1),
    low01: inX(ofX.low1),
    low20: inY(`l${at}_20`, ofY.low2),
    low11: rows.map((row) => whole(row, `l${at}_11`)),
    low02: inX(ofX.low2),
    totalY: rows.map((row) => (isPartial ? nano(row, `y${at}`) : part(ofY.total, rowOfY(row)))),
    totalX: inX(ofX.total),
  };
}

/** Where a table has the group of a row. */
function finder(table: CellTable): (row: Row) => number {
  const places = new Map(table.n.map((_, i) => [`${table.variant[i]}/${table.bucket[i]}`, i]));
  return (row) => {
    const place = places.get(`${Number(row.variant)}/${Number(row.bucket)}`);
    if (place === undefined) throw new Error(`a pair in group ${row.variant}/${row.bucket}, where its value has none`);
    return place;
  };
}

function part<T>(column: readonly T[], place: number): T {
  const value = column[place];
  if (value === undefined) throw new Error(`no row ${place} in a column of ${column.length}`);
  return value;
}

function present<T>(table: T | undefined): T {
  if (table === undefined) throw new Error("a grouping without its table");
  return table;
}

const sum = (counts: readonly number[]): number => counts.reduce((all, n) => all + n, 0);

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
