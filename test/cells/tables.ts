import type { PowerSums } from "../../src/cells/types.ts";
import type { CellTable, JointTable, ScoreTable } from "../../src/engine/types.ts";
import { nanoOf, sumsTogether } from "../stats/arms.ts";

/** One unit: its variant, its bucket, its value. */
export type Unit = readonly [variant: number, bucket: number, value: number];

/** Cells as an engine gives them, in any order of variant and bucket; the sums come from the tests' own power sums. */
export function cellTable(units: readonly Unit[]): CellTable {
  const groups = [...new Set(units.map(([variant, bucket]) => `${variant} ${bucket}`))].map((key) => {
    const [variant = 0, bucket = 0] = key.split(" ").map(Number);
    return { variant, bucket, values: units.filter(([v, b]) => v === variant && b === bucket).map(([, , x]) => x) };
  });
  const sums = sumsTogether(groups.map(({ values }) => values));
  return {
    pivot: sums[0]?.pivot ?? "0",
    scale: sums[0]?.scale ?? 1,
    variant: groups.map(({ variant }) => variant),
    bucket: groups.map(({ bucket }) => bucket),
    n: sums.map(({ n }) => n),
    ...highAndLow(sums),
    total: sums.map(({ total }) => total ?? 0n),
    smallest: sums.map(({ smallest }) => nanoOf(smallest ?? 0)),
    largest: sums.map(({ largest }) => nanoOf(largest ?? 0)),
  };
}

/** S_k = high 2^60 + low, with a low that need not lie under 2^60: the engine's is a sum over units. */
export function highAndLow(sums: readonly PowerSums[]) {
  const high = (k: 0 | 1 | 2 | 3) => sums.map(({ powers }) => (powers[k] >> 60n) - 1n);
  const low = (k: 0 | 1 | 2 | 3) => sums.map(({ powers }, i) => powers[k] - ((high(k)[i] ?? 0n) << 60n));
  return {
    high1: high(0),
    high2: high(1),
    high3: high(2),
    high4: high(3),
    low1: low(0),
    low2: low(1),
    low3: low(2),
    low4: low(3),
  };
}

export const noScores: ScoreTable = {
  scale: 1,
  variant: [],
  bucket: [],
  n: [],
  ...highAndLow([]),
  smallest: [],
  largest: [],
};

/** One unit with two values: its variant, its bucket, y, and x where it has one. */
export type PairUnit = readonly [variant: number, bucket: number, y: number, x: number | null];

/** y of all units, x of those that have it, and both together, with the pivots and scales of the two. */
export function pairTables(units: readonly PairUnit[]): { of: CellTable; x: CellTable; joint: JointTable } {
  const having = units.flatMap(([variant, bucket, y, x]) => (x === null ? [] : [{ variant, bucket, y, x }]));
  const of = cellTable(units.map(([variant, bucket, y]) => [variant, bucket, y] as const));
  const x = cellTable(having.map((unit) => [unit.variant, unit.bucket, unit.x] as const));
  const terms = having.map((unit) => ({
    ...unit,
    u: (unit.y - Number(of.pivot)) / of.scale,
    w: (unit.x - Number(x.pivot)) / x.scale,
  }));
  const places = [...new Set(terms.map(({ variant, bucket }) => `${variant} ${bucket}`))].map((place) => {
    const [variant = 0, bucket = 0] = place.split(" ").map(Number);
    return { variant, bucket, held: terms.filter((term) => term.variant === variant && term.bucket === bucket) };
  });
  type Term = (typeof terms)[number];
  // To 2^-60: more than a test of doubles can see.
  const sum = (of: (term: Term) => number) =>
    places.map(({ held }) => held.reduce((all, term) => all + BigInt(Math.round(of(term) * 2 ** 60)), 0n));
  const none = places.map(() => 0n);
  return {
    of,
    x,
    joint: {
      pivots: [of.pivot, x.pivot],
      scales: [of.scale, x.scale],
      variant: places.map(({ variant }) => variant),
      bucket: places.map(({ bucket }) => bucket),
      n: places.map(({ held }) => held.length),
      high10: sum(({ u }) => u),
      high01: sum(({ w }) => w),
      high20: sum(({ u }) => u * u),
      high11: sum(({ u, w }) => u * w),
      high02: sum(({ w }) => w * w),
      low10: none,
      low01: none,
      low20: none,
      low11: none,
      low02: none,
      totalY: places.map(({ held }) => held.reduce((all, { y }) => all + nanoOf(y), 0n)),
      totalX: places.map(({ held }) => held.reduce((all, term) => all + nanoOf(term.x), 0n)),
    },
  };
}

/** Cells of doubles, as of scores or of adjusted values. */
export function scoreTable(units: readonly Unit[]): ScoreTable {
  const scale = 2 ** Math.ceil(Math.log2(Math.max(1e-9, ...units.map(([, , d]) => Math.abs(d)))));
  const places = [...new Set(units.map(([variant, bucket]) => `${variant} ${bucket}`))].map((place) => {
    const [variant = 0, bucket = 0] = place.split(" ").map(Number);
    return {
      variant,
      bucket,
      held: units.filter(([v, b]) => v === variant && b === bucket).map(([, , d]) => d / scale),
    };
  });
  const sum = (k: number) =>
    places.map(({ held }) => held.reduce((all, u) => all + BigInt(Math.round(u ** k * 2 ** 60)), 0n));
  const none = places.map(() => 0n);
  return {
    scale,
    variant: places.map(({ variant }) => variant),
    bucket: places.map(({ bucket }) => bucket),
    n: places.map(({ held }) => held.length),
    high1: sum(1),
    high2: sum(2),
    high3: sum(3),
    high4: sum(4),
    low1: none,
    low2: none,
    low3: none,
    low4: none,
    smallest: places.map(({ held }) => Math.min(...held) * scale),
    largest: places.map(({ held }) => Math.max(...held) * scale),
  };
}
