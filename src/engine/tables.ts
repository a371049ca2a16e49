import { cellColumns, doubleColumns, type Groups, type PairColumns, pairColumns, someAtATime } from "./columns.ts";
import { count, type Engine, nano, whole, wholeOrNull } from "./engine.ts";
import { nanoText } from "./nano.ts";
import { type PowerClass, pivotAndScale } from "./pivot.ts";
import {
  cells,
  classes,
  type Dialect,
  decimalValue,
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

/** A value and the rows and groups over which it is summed. */
export interface SummedMeasure {
  readonly measure: DecimalMeasure;
  readonly over: Over;
}

export async function decimalTables(summed: readonly SummedMeasure[], engine: Engine): Promise<CellTable[]> {
  const tables = await groupedTables(summed, engine);
  return tables.map(([first]) => present(first));
}

/** The same in every grouping: one list a value, first that by bucket. */
export async function groupedTables(summed: readonly SummedMeasure[], engine: Engine): Promise<CellTable[][]> {
  const asked = summed.map(({ measure, over }) => ({ value: measure.value, over }));
  const found = await someAtATime(asked, (some) => engine.columns(cells(some)), cellColumns);
  return summed.map(({ measure: { pivot, scale }, over }, i) =>
    groupingsOf(over).map((g) => ({ pivot, scale, ...present(found[i])(g) })),
  );
}

/** Of doubles measured against 0. */
export async function doubleTables(
  summed: readonly { readonly value: Measured; readonly scale: number; readonly over: Over }[],
  engine: Engine,
): Promise<ScoreTable[]> {
  const found = await someAtATime(summed, (some) => engine.columns(cells(some)), doubleColumns);
  return summed.map(({ scale }, i) => ({ scale, ...present(found[i])(0) }));
}

const groupingsOf = ({ others = [] }: Over): number[] => [0, ...others.map((_, g) => g + 1)];

/** Two values and their cells in the same groups. A unit without y has no x either. */
export interface MeasuredPair {
  readonly y: DecimalMeasure;
  readonly x: DecimalMeasure;
  readonly over: Over;
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
  dialect: Dialect,
): Promise<JointTable[]> {
  const grouped = pairs.map((pair) => ({ ...pair, ofY: [pair.ofY], ofX: [pair.ofX] }));
  const tables = await groupedJointTables(grouped, engine, dialect);
  return tables.map(([first]) => present(first));
}

/** What the cells of y and of x say already is taken from them: new are the products, and y over the units that have x. */
export async function groupedJointTables(
  pairs: readonly GroupedPair[],
  engine: Engine,
  dialect: Dialect,
): Promise<JointTable[][]> {
  const asked = pairs.map(({ y, x, over, ofY: [ofY], ofX: [ofX] }) => ({
    pair: { y: y.value, x: x.value, isPartial: sum(present(ofY).n) !== sum(present(ofX).n) },
    over,
  }));
  const found = await someAtATime(asked, (some) => engine.columns(jointCells(some, dialect)), pairColumns);
  return pairs.map((pair, i) =>
    groupingsOf(pair.over).map((g) => {
      const [ofY, ofX] = [present(pair.ofY[g]), present(pair.ofX[g])];
      return jointTable({ ...pair, ofY, ofX }, present(found[i])(g), asked[i]?.pair.isPartial ?? false);
    }),
  );
}

function jointTable({ y, x, ofY, ofX }: MeasuredPair, own: PairColumns, isPartial: boolean): JointTable {
  const [rowsOfY, rowsOfX] = [rowsOf(ofY, own), rowsOf(ofX, own)];
  const inY = (whole: readonly bigint[], column: readonly bigint[]) =>
    isPartial ? whole : rowsOfY.map((row) => part(column, row));
  const inX = (column: readonly bigint[]) => rowsOfX.map((row) => part(column, row));
  return {
    pivots: [y.pivot, x.pivot],
    scales: [y.scale, x.scale],
    variant: own.variant,
    bucket: own.bucket,
    n: own.n,
    high10: inY(own.high10, ofY.high1),
    high01: inX(ofX.high1),
    high20: inY(own.high20, ofY.high2),
    high11: own.high11,
    high02: inX(ofX.high2),
    low10: inY(own.low10, ofY.low1),
    low01: inX(ofX.low1),
    low20: inY(own.low20, ofY.low2),
    low11: own.low11,
    low02: inX(ofX.low2),
    totalY: inY(own.totalY, ofY.total),
    totalX: inX(ofX.total),
  };
}

/** Where a table has each of some groups; both stand in order of variant and bucket. */
function rowsOf(table: CellTable, groups: Groups): number[] {
  let row = 0;
  return groups.variant.map((variant, i) => {
    const bucket = groups.bucket[i];
    while (row < table.n.length && !(table.variant[row] === variant && table.bucket[row] === bucket)) row += 1;
    if (row === table.n.length) throw new Error(`a pair in group ${variant}/${bucket}, where its value has none`);
    return row;
  });
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
