import type { Columns } from "./engine.ts";

/** Sums of many values that came one under the other, cut into the columns of each. */

// Enough for nearly every plan to need one statement; a statement of a thousand values would take long to plan.
const AT_ONCE = 64;

/** The columns of each value, by grouping. */
export async function someAtATime<T, Table>(
  values: readonly T[],
  ask: (some: readonly T[]) => Promise<Columns>,
  tables: (columns: Columns) => (from: number, to: number) => Table,
): Promise<((grouping: number) => Table)[]> {
  const found: ((grouping: number) => Table)[] = [];
  for (let from = 0; from < values.length; from += AT_ONCE) {
    const some = values.slice(from, from + AT_ONCE);
    const columns = await ask(some);
    const table = tables(columns);
    const runs = runsOf(columns.counts("part"), columns.counts("grouping"));
    found.push(
      ...some.map((_, at) => (grouping: number) => {
        const [first, end] = runs.get(`${at}/${grouping}`) ?? [0, 0];
        return table(first, end);
      }),
    );
  }
  return found;
}

/** From where to where the rows of one part and grouping stand. */
function runsOf(parts: readonly number[], groupings: readonly number[]): Map<string, readonly [number, number]> {
  const runs = new Map<string, readonly [number, number]>();
  for (let first = 0, i = 1; i <= parts.length; i++) {
    if (i < parts.length && parts[i] === parts[first] && groupings[i] === groupings[first]) continue;
    runs.set(`${parts[first]}/${groupings[first]}`, [first, i]);
    first = i;
  }
  return runs;
}

export interface Groups {
  readonly variant: readonly number[];
  readonly bucket: readonly number[];
  readonly n: readonly number[];
}
export type PairColumns = Groups &
  Readonly<Record<"high11" | "low11" | "high10" | "low10" | "high20" | "low20" | "totalY", readonly bigint[]>>;

/** Each column is parsed once and cut into tables. */
function cut<T>(column: readonly T[]): (from: number, to: number) => T[] {
  return (from, to) => column.slice(from, to);
}

function groupColumns(columns: Columns) {
  const [variant, bucket, n] = [
    cut(columns.counts("variant")),
    cut(columns.counts("bucket")),
    cut(columns.counts("n")),
  ];
  return (from: number, to: number) => ({ variant: variant(from, to), bucket: bucket(from, to), n: n(from, to) });
}

function powerColumns(columns: Columns) {
  const groups = groupColumns(columns);
  const [high1, high2, high3, high4] = [
    wholes(columns, "h1"),
    wholes(columns, "h2"),
    wholes(columns, "h3"),
    wholes(columns, "h4"),
  ];
  const [low1, low2, low3, low4] = [
    wholes(columns, "l1"),
    wholes(columns, "l2"),
    wholes(columns, "l3"),
    wholes(columns, "l4"),
  ];
  return (from: number, to: number) => ({
    ...groups(from, to),
    high1: high1(from, to),
    high2: high2(from, to),
    high3: high3(from, to),
    high4: high4(from, to),
    low1: low1(from, to),
    low2: low2(from, to),
    low3: low3(from, to),
    low4: low4(from, to),
  });
}

const wholes = (columns: Columns, column: string) => cut(columns.wholes(column));

export function cellColumns(columns: Columns) {
  const powers = powerColumns(columns);
  const [total, smallest, largest] = [
    cut(columns.nanos("total")),
    cut(columns.nanos("least")),
    cut(columns.nanos("most")),
  ];
  return (from: number, to: number) => ({
    ...powers(from, to),
    total: total(from, to),
    smallest: smallest(from, to),
    largest: largest(from, to),
  });
}

export function doubleColumns(columns: Columns) {
  const powers = powerColumns(columns);
  const [smallest, largest] = [cut(columns.reals("least")), cut(columns.reals("most"))];
  return (from: number, to: number) => ({
    ...powers(from, to),
    smallest: smallest(from, to),
    largest: largest(from, to),
  });
}

export function pairColumns(columns: Columns) {
  const groups = groupColumns(columns);
  const [high11, low11] = [wholes(columns, "h11"), wholes(columns, "l11")];
  const [high10, low10] = [wholes(columns, "h10"), wholes(columns, "l10")];
  const [high20, low20] = [wholes(columns, "h20"), wholes(columns, "l20")];
  const totalY = cut(columns.nanos("y"));
  return (from: number, to: number): PairColumns => ({
    ...groups(from, to),
    high11: high11(from, to),
    low11: low11(from, to),
    high10: high10(from, to),
    low10: low10(from, to),
    high20: high20(from, to),
    low20: low20(from, to),
    totalY: totalY(from, to),
  });
}
