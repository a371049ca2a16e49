import { greater, lesser } from "./groups.ts";
import type { CellTable, JointTable, ScoreTable } from "./types.ts";

/** Units without a row stand for zeros: measured against 0 they add nothing to a sum, and count in n and in the ends. */

/** The cells with every unit in every group: those that had no row there count as zeros. */
export function withZeros(table: CellTable, units: readonly number[], groups: number): CellTable {
  const { places, n, row } = filled(table, units, groups);
  const whole = (column: readonly bigint[]) => places.map((place) => row(column, place) ?? 0n);
  const end = (column: readonly bigint[], pick: (a: bigint, b: bigint) => bigint) =>
    places.map((place, i) => {
      const own = row(column, place);
      return own === null ? 0n : (n[i] ?? 0) > (row(table.n, place) ?? 0) ? pick(own, 0n) : own;
    });
  return {
    pivot: table.pivot,
    scale: table.scale,
    variant: places.map(({ variant }) => variant),
    bucket: places.map(({ group }) => group),
    n,
    high1: whole(table.high1),
    high2: whole(table.high2),
    high3: whole(table.high3),
    high4: whole(table.high4),
    low1: whole(table.low1),
    low2: whole(table.low2),
    low3: whole(table.low3),
    low4: whole(table.low4),
    total: whole(table.total),
    smallest: end(table.smallest, lesser),
    largest: end(table.largest, greater),
  };
}

export function pairsWithZeros(table: JointTable, units: readonly number[], groups: number): JointTable {
  const { places, n, row } = filled(table, units, groups);
  const whole = (column: readonly bigint[]) => places.map((place) => row(column, place) ?? 0n);
  return {
    pivots: table.pivots,
    scales: table.scales,
    variant: places.map(({ variant }) => variant),
    bucket: places.map(({ group }) => group),
    n,
    high10: whole(table.high10),
    high01: whole(table.high01),
    high20: whole(table.high20),
    high11: whole(table.high11),
    high02: whole(table.high02),
    low10: whole(table.low10),
    low01: whole(table.low01),
    low20: whole(table.low20),
    low11: whole(table.low11),
    low02: whole(table.low02),
    totalY: whole(table.totalY),
    totalX: whole(table.totalX),
  };
}

/** The same of doubles; an arm without any score has none, for then it has no ratio on some day. */
export function scoresWithZeros(table: ScoreTable, units: readonly number[]): ScoreTable {
  const n = table.variant.map((variant) => units[variant] ?? 0);
  const isShort = (i: number) => (n[i] ?? 0) > (table.n[i] ?? 0);
  return {
    ...table,
    n,
    smallest: table.smallest.map((end, i) => (isShort(i) ? Math.min(end, 0) : end)),
    largest: table.largest.map((end, i) => (isShort(i) ? Math.max(end, 0) : end)),
  };
}

interface Place {
  readonly variant: number;
  readonly group: number;
}

/** Every variant that has units in every group, how many they are, and what a column holds there. */
function filled(table: CellTable | JointTable, units: readonly number[], groups: number) {
  const found = new Map(table.n.map((_, i) => [`${table.variant[i]}/${table.bucket[i]}`, i]));
  const places = units.flatMap((n, variant) =>
    n === 0 ? [] : Array.from({ length: groups }, (_, group): Place => ({ variant, group })),
  );
  const row = <T>(column: readonly T[], { variant, group }: Place): T | null => {
    const place = found.get(`${variant}/${group}`);
    return place === undefined ? null : (column[place] ?? null);
  };
  return { places, row, n: places.map(({ variant }) => units[variant] ?? 0) };
}
