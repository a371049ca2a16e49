import { nanoNumber } from "./nano.ts";
import type { CellTable, JointTable } from "./types.ts";

/** Exact arithmetic on the sums of some units: what differs between two choices is a few units, added or taken away. */
export interface Group {
  readonly variant: number;
  readonly bucket: number;
  readonly n: number;
  /** S_1..S_4 of a value, S_10, S_01, S_20, S_11, S_02 of a pair; in units of 2^-120. */
  readonly sums: readonly bigint[];
  /** Exact sums of the value, of a pair's y and x, in 10^-9. */
  readonly totals: readonly bigint[];
  /** What no unit lies outside of, in 10^-9; null where that is not known, as of a pair. */
  readonly ends: readonly [bigint, bigint] | null;
}

/** The degrees of a pair's sums in y and in x. */
export const PAIR_DEGREES = [
  [1, 0],
  [0, 1],
  [2, 0],
  [1, 1],
  [0, 2],
] as const;

const LOW_BITS = 60n;
const ONE_BITS = 120n;
const LOW_MASK = (1n << LOW_BITS) - 1n;

export function groupsOfCells(table: CellTable): Group[] {
  return table.n.map((n, i) => ({
    variant: at(table.variant, i),
    bucket: at(table.bucket, i),
    n,
    sums: [
      joined(table.high1, table.low1, i),
      joined(table.high2, table.low2, i),
      joined(table.high3, table.low3, i),
      joined(table.high4, table.low4, i),
    ],
    totals: [at(table.total, i)],
    ends: [at(table.smallest, i), at(table.largest, i)],
  }));
}

export function groupsOfPairs(table: JointTable): Group[] {
  return table.n.map((n, i) => ({
    variant: at(table.variant, i),
    bucket: at(table.bucket, i),
    n,
    sums: [
      joined(table.high10, table.low10, i),
      joined(table.high01, table.low01, i),
      joined(table.high20, table.low20, i),
      joined(table.high11, table.low11, i),
      joined(table.high02, table.low02, i),
    ],
    totals: [at(table.totalY, i), at(table.totalX, i)],
    ends: null,
  }));
}

/** A group without units says nothing, and has no row. */
export function cellsOfGroups(pivot: string, scale: number, groups: readonly Group[]): CellTable {
  const rows = groups.filter(({ n }) => n > 0);
  const high = (k: number) => rows.map(({ sums }) => at(sums, k - 1) >> LOW_BITS);
  const low = (k: number) => rows.map(({ sums }) => at(sums, k - 1) & LOW_MASK);
  return {
    pivot,
    scale,
    variant: rows.map(({ variant }) => variant),
    bucket: rows.map(({ bucket }) => bucket),
    n: rows.map(({ n }) => n),
    high1: high(1),
    high2: high(2),
    high3: high(3),
    high4: high(4),
    low1: low(1),
    low2: low(2),
    low3: low(3),
    low4: low(4),
    total: rows.map(({ totals }) => at(totals, 0)),
    smallest: rows.map(({ ends }) => ends?.[0] ?? 0n),
    largest: rows.map(({ ends }) => ends?.[1] ?? 0n),
  };
}

export function pairsOfGroups(
  pivots: readonly [string, string],
  scales: readonly [number, number],
  groups: readonly Group[],
): JointTable {
  const rows = groups.filter(({ n }) => n > 0);
  const high = (jk: number) => rows.map(({ sums }) => at(sums, jk) >> LOW_BITS);
  const low = (jk: number) => rows.map(({ sums }) => at(sums, jk) & LOW_MASK);
  return {
    pivots,
    scales,
    variant: rows.map(({ variant }) => variant),
    bucket: rows.map(({ bucket }) => bucket),
    n: rows.map(({ n }) => n),
    high10: high(0),
    high01: high(1),
    high20: high(2),
    high11: high(3),
    high02: high(4),
    low10: low(0),
    low01: low(1),
    low20: low(2),
    low11: low(3),
    low02: low(4),
    totalY: rows.map(({ totals }) => at(totals, 0)),
    totalX: rows.map(({ totals }) => at(totals, 1)),
  };
}

/** Some rows of a table as one group, without a group for each; a single row stays in its bucket. */
export function groupOfRows(
  { variant, rows }: { readonly variant: number; readonly rows: readonly number[] },
  { bucket, n }: Pick<CellTable, "bucket" | "n">,
  sums: readonly (readonly [high: readonly bigint[], low: readonly bigint[]])[],
  totals: readonly (readonly bigint[])[],
  ends: readonly [smallest: readonly bigint[], largest: readonly bigint[]] | null,
): Group {
  const over = (column: readonly bigint[]) => rows.reduce((sum, row) => sum + at(column, row), 0n);
  const end = (column: readonly bigint[], pick: (a: bigint, b: bigint) => bigint) =>
    rows.reduce((found, row) => pick(found, at(column, row)), at(column, rows[0] ?? 0));
  return {
    variant,
    bucket: rows.length === 1 ? at(bucket, rows[0] ?? 0) : 0,
    n: rows.reduce((sum, row) => sum + at(n, row), 0),
    sums: sums.map(([high, low]) => (over(high) << LOW_BITS) + over(low)),
    totals: totals.map(over),
    ends: ends === null ? null : [end(ends[0], lesser), end(ends[1], greater)],
  };
}

/** Groups of one variant as one; null where there is none. */
export function together(groups: readonly Group[]): Group | null {
  const [first, ...rest] = groups;
  return first === undefined ? null : rest.reduce((sum, group) => combined(sum, group, 1n), first);
}

/** What is left of a group without some of its units. They may have held the ends, which then lie outside what is left. */
export const without = (group: Group, gone: Group | null): Group =>
  gone === null ? group : { ...combined(group, gone, -1n), ends: group.ends };

function combined(a: Group, b: Group, sign: 1n | -1n): Group {
  return {
    variant: a.variant,
    bucket: 0,
    n: a.n + Number(sign) * b.n,
    sums: a.sums.map((sum, i) => sum + sign * at(b.sums, i)),
    totals: a.totals.map((total, i) => total + sign * at(b.totals, i)),
    ends: a.ends === null || b.ends === null ? null : [lesser(a.ends[0], b.ends[0]), greater(a.ends[1], b.ends[1])],
  };
}

/** The same sums over scales 2^bits as large, one `bits` a part of the value: rounded to 2^-120, once a sum. */
export function overScales(group: Group, degrees: readonly (readonly number[])[], bits: readonly number[]): Group {
  const sums = group.sums.map((sum, i) => {
    const by = BigInt(bits.reduce((shift, b, part) => shift + b * (degrees[i]?.[part] ?? 0), 0));
    return by === 0n ? sum : (sum + (1n << (by - 1n))) >> by;
  });
  return { ...group, sums };
}

export const CELL_DEGREES = [[1], [2], [3], [4]] as const;

/** Terms u^k, k = 1..4, of one value as the engine computes them: doubles, then two integers, joined. */
export function termsOf(x: bigint, pivot: bigint, scale: number): [bigint, bigint, bigint, bigint] {
  const u = nanoNumber(x - pivot) / scale;
  return [exactly(u), exactly(u * u), exactly(u * u * u), exactly(u * u * u * u)];
}

/** The terms of one pair (y, x): S_10, S_01, S_20, S_11, S_02 of it alone, as the engine computes them. */
export function pairTerms(
  [y, x]: readonly [bigint, bigint],
  pivots: readonly [bigint, bigint],
  scales: readonly [number, number],
): [bigint, bigint, bigint, bigint, bigint] {
  const [u, w] = [nanoNumber(y - pivots[0]) / scales[0], nanoNumber(x - pivots[1]) / scales[1]];
  return [exactly(u), exactly(w), exactly(u * u), exactly(u * w), exactly(w * w)];
}

/** n units that all have one value. */
export function alike(variant: number, n: number, x: bigint, pivot: bigint, scale: number): Group {
  return {
    variant,
    bucket: 0,
    n,
    sums: termsOf(x, pivot, scale).map((term) => BigInt(n) * term),
    totals: [BigInt(n) * x],
    ends: [x, x],
  };
}

/** The pairs of some units, had they all one and the same y. */
export function alikeInY(pairs: Group, y: bigint, pivot: bigint, scale: number): Group {
  const n = BigInt(pairs.n);
  const [u, square] = termsOf(y, pivot, scale);
  const ofX = at(pairs.sums, 1);
  return {
    ...pairs,
    sums: [n * u, ofX, n * square, rounded(u * ofX, ONE_BITS), at(pairs.sums, 4)],
    totals: [n * y, at(pairs.totals, 1)],
  };
}

/** t = u^k 2^60 in two integers, as a statement of the engine has it (DESIGN 5). */
function exactly(power: number): bigint {
  const t = power * 2 ** 60;
  const high = Math.floor(t);
  return (BigInt(high) << LOW_BITS) + BigInt(Math.floor((t - high) * 2 ** 60 + 0.5));
}

const rounded = (value: bigint, bits: bigint): bigint => (value + (1n << (bits - 1n))) >> bits;
const joined = (high: readonly bigint[], low: readonly bigint[], i: number) => (at(high, i) << LOW_BITS) + at(low, i);
export const lesser = (a: bigint, b: bigint) => (a < b ? a : b);
export const greater = (a: bigint, b: bigint) => (a > b ? a : b);

function at<T>(column: readonly T[], i: number): T {
  const value = column[i];
  if (value === undefined) throw new Error(`no row ${i} in a column of ${column.length}`);
  return value;
}
