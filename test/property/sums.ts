import type { CellTable, MetricCells, ScoreTable } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { momentsOf, quotient, scoresOf } from "../oracle/moments.ts";
import { ascending, nanoOf } from "../oracle/number.ts";
import type { OracleMetric } from "../oracle/types.ts";
import { wrongSizes } from "./sizes.ts";

/**
 * The power sums of a metric's cells against the exact ones: what is wrong, one line each.
 * Values are whole numbers of 10^-9, so sum (x - pivot)^k / scale^k is a fraction of whole numbers. The engine's terms
 * round: u to a double (relative 2^-53), each further power by one product more, to (2 k - 1) 2^-53 in all; t - high is a
 * double of up to 1, which rounds by 2^-54 where t is small and negative (2^-114 of a sum); and low is cut at 2^-121.
 * Nothing wider is allowed.
 */
export function wrongSums(plan: Plan, oracle: OracleMetric, cells: MetricCells): string[] {
  const arms = plan.variants.map((_, at) => oracle.values.filter(({ variant }) => variant === at));
  const wrong = [
    ...wrongPart(
      cells.of,
      arms.map((arm) => arm.map(({ of }) => of)),
    ).map((line) => `of: ${line}`),
    ...(cells.ratio === null
      ? []
      : wrongPart(
          cells.ratio.per,
          arms.map((arm) => arm.map(({ per }) => per ?? 0n)),
        ).map((line) => `per: ${line}`)),
    ...(cells.ratio === null ? [] : wrongScores(cells.ratio.score, arms).map((line) => `score: ${line}`)),
    ...wrongSizes(plan, oracle, cells),
    ...(cells.covariate === null ? [] : wrongCovariate(cells.covariate, arms)),
  ];
  return wrong.map((line) => `${oracle.metric}, ${line}`);
}

const ONE = 10n ** 9n;
const UNIT = 2n ** 120n;
/** 2^-114 and 2^-120, in units of 2^-120. */
const ROUNDED_LOW = 65n;
const POWERS = [1, 2, 3, 4] as const;

function wrongPart(table: CellTable, arms: readonly (readonly bigint[])[]): string[] {
  const pivot = nanoOf(table.pivot);
  const exponent = Math.log2(table.scale);
  if (!Number.isInteger(exponent)) return [`the scale ${table.scale} is not a power of two`];
  const distances = arms.map((arm) => arm.map((x) => x - pivot));
  const largest = greatest(distances.flat().map(size));
  const [top, bottom] = exponent >= 0 ? [ONE << BigInt(exponent), 1n] : [ONE, 1n << BigInt(-exponent)];
  const scaleWrong = largest === 0n ? table.scale !== 1 : !isSmallestPower(largest * bottom, top);
  return [
    ...(scaleWrong
      ? [
          `the scale ${table.scale} is not the smallest power of two for a distance of ${largest} from the pivot ${table.pivot}`,
        ]
      : []),
    ...distances.flatMap((arm, variant) =>
      POWERS.flatMap((k) => {
        const exact = arm.reduce((sum, d) => sum + (d * bottom) ** BigInt(k), 0n);
        const absolute = arm.reduce((sum, d) => sum + size(d * bottom) ** BigInt(k), 0n);
        const divisor = top ** BigInt(k);
        const allowed =
          ((absolute * UNIT) / divisor / 2n ** 53n) * BigInt(2 * k) + ROUNDED_LOW * BigInt(arm.length) + 2n;
        const off = size(sumOf(table, variant, k) - (exact * UNIT) / divisor);
        return off <= allowed ? [] : [`S${k} of variant ${variant} is off by ${off} of ${allowed} allowed, in 2^-120`];
      }),
    ),
    ...distances.flatMap((arm, variant) => wrongMoments(table, variant, arms[variant] ?? [], arm.map(size))),
  ];
}

const JOINT = [
  { jk: "10", j: 1n, k: 0n },
  { jk: "01", j: 0n, k: 1n },
  { jk: "20", j: 2n, k: 0n },
  { jk: "11", j: 1n, k: 1n },
  { jk: "02", j: 0n, k: 2n },
] as const;

/** The covariate's own sums, and the joint ones: a product of two is rounded three times. */
function wrongCovariate(
  { x, joint }: NonNullable<MetricCells["covariate"]>,
  arms: readonly (readonly { readonly of: bigint; readonly x: bigint | null }[])[],
): string[] {
  const having = arms.map((arm) => arm.flatMap((unit) => (unit.x === null ? [] : [{ y: unit.of, x: unit.x }])));
  const [fromY, fromX] = [nanoOf(joint.pivots[0]), nanoOf(joint.pivots[1])];
  const [byY, byX] = [scaleOf(joint.scales[0]), scaleOf(joint.scales[1])];
  return [
    ...wrongPart(
      x,
      having.map((arm) => arm.map((unit) => unit.x)),
    ).map((line) => `covariate: ${line}`),
    ...having.flatMap((arm, variant) =>
      JOINT.flatMap(({ jk, j, k }) => {
        const terms = arm.map((unit) => ((unit.y - fromY) * byY.bottom) ** j * ((unit.x - fromX) * byX.bottom) ** k);
        const divisor = byY.top ** j * byX.top ** k;
        const exact = terms.reduce((sum, term) => sum + term, 0n);
        const absolute = terms.reduce((sum, term) => sum + size(term), 0n);
        const allowed = ((absolute * UNIT) / divisor / 2n ** 53n) * 4n + ROUNDED_LOW * BigInt(arm.length) + 2n;
        const found = joint.variant.reduce(
          (sum, at, row) =>
            at === variant ? sum + (joint[`high${jk}`][row] ?? 0n) * 2n ** 60n + (joint[`low${jk}`][row] ?? 0n) : sum,
          0n,
        );
        const off = size(found - (exact * UNIT) / divisor);
        return off <= allowed ? [] : [`joint S${jk} of variant ${variant} is off by ${off} of ${allowed} allowed`];
      }),
    ),
  ];
}

/** 10^9 times a power of two, as top over bottom. */
function scaleOf(scale: number): { readonly top: bigint; readonly bottom: bigint } {
  const exponent = Math.log2(scale);
  return exponent >= 0 ? { top: ONE << BigInt(exponent), bottom: 1n } : { top: ONE, bottom: 1n << BigInt(-exponent) };
}

/** scale / 2 < distance <= scale, but for the last bit of a double. */
function isSmallestPower(distance: bigint, scale: bigint): boolean {
  return distance <= scale + scale / 2n ** 52n && 2n * distance > scale - scale / 2n ** 52n;
}

/** Mean and variance from S_1 and S_2 against those by definition. */
function wrongMoments(
  table: CellTable,
  variant: number,
  values: readonly bigint[],
  distances: readonly bigint[],
): string[] {
  const exact = momentsOf(values, ONE);
  if (exact === null || exact.variance === null) return [];
  const n = values.length;
  const s1 = sumOf(table, variant, 1);
  const s2 = sumOf(table, variant, 2);
  const mean = quotient(s1, BigInt(n) * UNIT) * table.scale + Number(table.pivot);
  const variance =
    quotient(BigInt(n) * s2 * UNIT - s1 * s1, UNIT * UNIT * BigInt(n) * BigInt(n - 1)) * table.scale ** 2;
  const reach = Number(greatest(distances)) / 1e9;
  const meanAllowed = (reach + Math.abs(Number(table.pivot))) * 2 ** -49 + table.scale * 2 ** -112;
  const varianceAllowed = reach ** 2 * 2 ** -48 + 4 * table.scale ** 2 * 2 ** -112;
  return [
    ...(Math.abs(mean - exact.mean) <= meanAllowed
      ? []
      : [`mean of variant ${variant} is ${mean}, exact ${exact.mean}`]),
    ...(Math.abs(variance - exact.variance) <= varianceAllowed
      ? []
      : [`variance of variant ${variant} is ${variance}, exact ${exact.variance}`]),
  ];
}

/**
 * Scores d = (a - R b) / mean(b): doubles on the engine's side, so each d may be off by a few units of the last place of
 * the two terms that it is the difference of.
 */
function wrongScores(
  table: ScoreTable,
  arms: readonly (readonly { readonly of: bigint; readonly per: bigint | null }[])[],
): string[] {
  return arms.flatMap((arm, variant) => {
    const scores = scoresOf(arm);
    if (scores === null) return [];
    const a = arm.reduce((sum, { of }) => sum + of, 0n);
    const b = arm.reduce((sum, { per }) => sum + (per ?? 0n), 0n);
    const ratio = quotient(a, b);
    const meanPer = quotient(b, BigInt(arm.length));
    const exact = arm.map(({ of, per }) => quotient(BigInt(arm.length) * (of * b - a * (per ?? 0n)), scores.one));
    const errors = arm.map(
      ({ of, per }) => ((Math.abs(Number(of)) + Math.abs(ratio * Number(per ?? 0n))) / Math.abs(meanPer)) * 2 ** -50,
    );
    const sums = POWERS.flatMap((k) => {
      const expected = exact.reduce((sum, d) => sum + (d / table.scale) ** k, 0);
      const allowed = exact.reduce((sum, d, at) => {
        const off = (errors[at] ?? 0) / table.scale + 2 ** -53;
        return (
          sum +
          (Math.abs(d / table.scale) + off) ** k -
          Math.abs(d / table.scale) ** k +
          k * 2 ** -50 * Math.abs(d / table.scale) ** k
        );
      }, 2 ** -100);
      const off = Math.abs(quotient(sumOf(table, variant, k), UNIT) - expected);
      return off <= 2 * allowed ? [] : [`S${k} of variant ${variant} is off by ${off} of ${2 * allowed} allowed`];
    });
    const tolerance = 4 * Math.max(0, ...errors);
    const ends = [
      ...endOf("smallest", table.smallest, table, variant, Math.min(...exact), tolerance),
      ...endOf("largest", table.largest, table, variant, Math.max(...exact), tolerance),
    ];
    return exact.length === 0 ? [] : [...sums, ...ends];
  });
}

function endOf(
  end: "smallest" | "largest",
  column: readonly number[],
  table: ScoreTable,
  variant: number,
  exact: number,
  tolerance: number,
): string[] {
  const values = column.filter((_, at) => table.variant[at] === variant && (table.n[at] ?? 0) > 0);
  const found = end === "smallest" ? Math.min(...values) : Math.max(...values);
  return Math.abs(found - exact) <= tolerance ? [] : [`the ${end} of variant ${variant} is ${found}, exact ${exact}`];
}

/** S_k of one variant in units of 2^-120. */
function sumOf(table: CellTable | ScoreTable, variant: number, k: 1 | 2 | 3 | 4): bigint {
  const high = table[`high${k}`];
  const low = table[`low${k}`];
  return table.variant.reduce(
    (sum, at, row) => (at === variant ? sum + (high[row] ?? 0n) * 2n ** 60n + (low[row] ?? 0n) : sum),
    0n,
  );
}

const greatest = (values: readonly bigint[]): bigint => [...values].sort(ascending).at(-1) ?? 0n;

const size = (value: bigint): bigint => (value < 0n ? -value : value);
