import type { CellTable, JointTable, ScoreTable } from "../../src/engine/types.ts";
import { ascending, nanoOf } from "../oracle/number.ts";

/** A unit of an arm under some choice, in 10^-9; x null where there is none. */
export interface Value {
  readonly variant: number;
  readonly y: bigint;
  readonly x: bigint | null;
}

const UNIT = 2n ** 120n;
const DEGREES = ["1", "2", "3", "4"] as const;
const PAIRS = [
  { jk: "10", j: 1, k: 0 },
  { jk: "01", j: 0, k: 1 },
  { jk: "20", j: 2, k: 0 },
  { jk: "11", j: 1, k: 1 },
  { jk: "02", j: 0, k: 2 },
] as const;

/**
 * What is wrong with the sums of a choice, one line each. Terms round as in sums.ts; `held` are values that other choices
 * hold units down to: what is taken from a sum leaves the rounding of what was there.
 */
export function wrongCells(table: CellTable, values: readonly Value[], held: readonly bigint[]): string[] {
  return arms(values, table.variant).flatMap(({ variant, units }) => {
    const at = table.variant.indexOf(variant);
    if (at < 0) return units.length === 0 ? [] : [`variant ${variant} has no cell, but ${units.length} units`];
    const ys = units.map(({ y }) => y);
    const from = nanoOf(table.pivot);
    const reach = greatest([...ys, ...held].map((y) => size(y - from)));
    return [
      ...same(`n of variant ${variant}`, BigInt(table.n[at] ?? 0), BigInt(ys.length)),
      ...same(`total of variant ${variant}`, table.total[at], sum(ys)),
      ...within(`smallest of variant ${variant}`, (table.smallest[at] ?? 0n) <= least(ys)),
      ...within(`largest of variant ${variant}`, (table.largest[at] ?? 0n) >= greatest(ys)),
      ...DEGREES.flatMap((degree) => {
        const k = Number(degree);
        const found = ((table[`high${degree}`][at] ?? 0n) << 60n) + (table[`low${degree}`][at] ?? 0n);
        const terms = ys.map((y) => scaled((y - from) ** BigInt(k), table.scale, k));
        return near(`S${k} of variant ${variant}`, found, sum(terms), ys.length, k * 2, [
          ...terms,
          scaled(reach ** BigInt(k), table.scale, k),
        ]);
      }),
    ];
  });
}

export function wrongPairs(table: JointTable, values: readonly Value[], held: readonly bigint[]): string[] {
  const paired = values.filter(({ x }) => x !== null);
  return arms(paired, table.variant).flatMap(({ variant, units }) => {
    const at = table.variant.indexOf(variant);
    if (at < 0) return units.length === 0 ? [] : [`variant ${variant} has no pairs, but ${units.length} units`];
    const [fromY, fromX] = table.pivots.map(nanoOf) as [bigint, bigint];
    const [scaleY, scaleX] = table.scales;
    const xs = units.map(({ x }) => x ?? 0n);
    const reach = greatest([...units.map(({ y }) => y), ...held].map((y) => size(y - fromY)));
    return [
      ...same(`n of pairs of variant ${variant}`, BigInt(table.n[at] ?? 0), BigInt(units.length)),
      ...same(`total of y of variant ${variant}`, table.totalY[at], sum(units.map(({ y }) => y))),
      ...same(`total of x of variant ${variant}`, table.totalX[at], sum(xs)),
      ...PAIRS.flatMap(({ jk, j, k }) => {
        const found = ((table[`high${jk}`][at] ?? 0n) << 60n) + (table[`low${jk}`][at] ?? 0n);
        const term = (y: bigint, x: bigint) =>
          scaled(scaled((y - fromY) ** BigInt(j) * (x - fromX) ** BigInt(k), scaleY, j), scaleX, k, 1n);
        const terms = units.map(({ y, x }) => term(y, x ?? 0n));
        const widest = xs.map((x) => term(fromY + reach, x));
        return near(`S${jk} of variant ${variant}`, found, sum(terms), units.length, 8, [...terms, ...widest]);
      }),
    ];
  });
}

/** log(1 + x) as doubles: each off by a few units of its last place. */
export function wrongLogs(table: ScoreTable, values: readonly Value[]): string[] {
  return arms(values, table.variant).flatMap(({ variant, units }) => {
    const at = table.variant.indexOf(variant);
    if (at < 0) return units.length === 0 ? [] : [`variant ${variant} has no logarithms, but ${units.length} units`];
    const us = units.map(({ y }) => Math.log(1 + Number(y) / 1e9) / table.scale);
    const ends = [table.smallest[at] ?? Number.NaN, table.largest[at] ?? Number.NaN];
    const exact = [Math.min(...us) * table.scale, Math.max(...us) * table.scale];
    return [
      ...same(`n of logarithms of variant ${variant}`, BigInt(table.n[at] ?? 0), BigInt(us.length)),
      ...within(
        `ends of the logarithms of variant ${variant}`,
        ends.every((end, i) => Math.abs(end - (exact[i] ?? 0)) <= 1e-14 * Math.max(1, Math.abs(exact[i] ?? 0))),
      ),
      ...DEGREES.flatMap((degree) => {
        const k = Number(degree);
        const found =
          Number(((table[`high${degree}`][at] ?? 0n) << 60n) + (table[`low${degree}`][at] ?? 0n)) / 2 ** 120;
        const expected = us.reduce((all, u) => all + u ** k, 0);
        const allowed = us.reduce((all, u) => all + Math.abs(u) ** k, 0) * k * 2 ** -46 + 2 ** -50;
        return within(`S${k} of the logarithms of variant ${variant}`, Math.abs(found - expected) <= allowed);
      }),
    ];
  });
}

const arms = (values: readonly Value[], variants: readonly number[]) =>
  [...new Set([...values.map(({ variant }) => variant), ...variants])].map((variant) => ({
    variant,
    units: values.filter((value) => value.variant === variant),
  }));

/** A whole number of (10^-9)^k over scale^k, in units of 2^-120; `one` 1 where the units are there already. */
function scaled(value: bigint, scale: number, k: number, one = UNIT): bigint {
  const power = BigInt(Math.round(Math.log2(scale)) * k);
  const top = power < 0n ? value * one * 2n ** -power : value * one;
  return top / (10n ** BigInt(9 * k) * (power < 0n ? 1n : 2n ** power));
}

function near(
  what: string,
  found: bigint,
  expected: bigint,
  n: number,
  roundings: number,
  terms: readonly bigint[],
): string[] {
  const allowed = (sum(terms.map(size)) * BigInt(roundings)) / 2n ** 53n + 130n * BigInt(n + 2);
  const off = size(found - expected);
  return off <= allowed ? [] : [`${what} is off by ${off} of ${allowed} allowed, in 2^-120`];
}

const same = (what: string, found: bigint | undefined, expected: bigint): string[] =>
  found === expected ? [] : [`${what} is ${found}, expected ${expected}`];
const within = (what: string, holds: boolean): string[] => (holds ? [] : [`${what} is wrong`]);
const sum = (values: readonly bigint[]): bigint => values.reduce((all, value) => all + value, 0n);
const size = (value: bigint): bigint => (value < 0n ? -value : value);
const least = (values: readonly bigint[]): bigint => [...values].sort(ascending)[0] ?? 0n;
const greatest = (values: readonly bigint[]): bigint => [...values].sort(ascending).at(-1) ?? 0n;
