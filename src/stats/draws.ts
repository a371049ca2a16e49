import type { DrawTable } from "./bucket-cells.ts";

/**
 * Sums of the rows picked, into `sums`: the inner loop of all resampling, so six columns at a time in local variables, or
 * three where a row has no more.
 * @param sums room for `table.width` numbers
 */
export function sumRows({ cells, width }: DrawTable, picks: Uint32Array, sums: Float64Array): void {
  if (width % 6 === 0) sumSixes(cells, width, picks, sums);
  else sumThrees(cells, width, picks, sums);
}

function sumSixes(cells: Float64Array, width: number, picks: Uint32Array, sums: Float64Array): void {
  for (let first = 0; first < width; first += 6) {
    let [a, b, c, d, e, f] = [0, 0, 0, 0, 0, 0];
    for (let i = 0; i < picks.length; i++) {
      const at = (picks[i] as number) * width + first;
      a += cells[at] as number;
      b += cells[at + 1] as number;
      c += cells[at + 2] as number;
      d += cells[at + 3] as number;
      e += cells[at + 4] as number;
      f += cells[at + 5] as number;
    }
    sums[first] = a;
    sums[first + 1] = b;
    sums[first + 2] = c;
    sums[first + 3] = d;
    sums[first + 4] = e;
    sums[first + 5] = f;
  }
}

function sumThrees(cells: Float64Array, width: number, picks: Uint32Array, sums: Float64Array): void {
  for (let first = 0; first < width; first += 3) {
    let [a, b, c] = [0, 0, 0];
    for (let i = 0; i < picks.length; i++) {
      const at = (picks[i] as number) * width + first;
      a += cells[at] as number;
      b += cells[at + 1] as number;
      c += cells[at + 2] as number;
    }
    sums[first] = a;
    sums[first + 1] = b;
    sums[first + 2] = c;
  }
}

/** Rows drawn with replacement; `fill` gives 32-bit words. */
export function drawRows(picks: Uint32Array, rows: number, fill: (into: Uint32Array) => void): void {
  const scale = rows / 2 ** 32;
  fill(picks);
  for (let i = 0; i < picks.length; i++) picks[i] = (picks[i] as number) * scale;
}

/**
 * The first rows become a random choice of all, as many as there are words, the rest stay behind them (Fisher and Yates 1938).
 * @param words as drawn by `fill`, 32 bits each
 */
export function dealRows(order: Uint32Array, words: Uint32Array, fill: (into: Uint32Array) => void): void {
  fill(words);
  for (let i = 0; i < words.length; i++) {
    const other = (i + ((words[i] as number) / 2 ** 32) * (order.length - i)) >>> 0;
    const held = order[i] as number;
    order[i] = order[other] as number;
    order[other] = held;
  }
}

/** A variance under this share of the raw mean square is rounding, and a draw with it has no T. */
const ROUNDING = 2 ** -40;

/** T of some sums; NaN where it is undefined: under two units in an arm, no spread, a denominator that is not above 0. */
export type Studentised = (sums: Float64Array) => number;

/**
 * T = (estimate - truth of the draws) / its own standard error, from the sums of a draw.
 *
 *   mean      d_i = sum d / n, v_i = (sum d^2 - n d_i^2) / (n (n - 1)); T = (d_t - d_c) / sqrt(v_t + v_c)
 *   ratio     d_i = sum d / sum x, v_i = sum (d - d_i x)^2 n / ((n - 1) (sum x)^2): R is computed anew
 *   adjusted  theta anew by METHODS 1; d_i = mean y - theta mean x, v_i = var(y - theta x) / n
 * @param whole the sums over all rows: what the draws stand about
 * @param offset for `adjusted`, the difference of the arms' means of x that centring by arms took away, else 0
 */
export function studentised(kind: DrawTable["kind"], whole: Float64Array, offset: number): Studentised {
  switch (kind) {
    case "mean":
      return (sums) => overError(meanOf(sums, 0), meanOf(sums, 3), 0);
    case "ratio":
      return (sums) => overError(ratioOf(sums, 0, whole), ratioOf(sums, 6, whole), 0);
    case "adjusted": {
      const truth = thetaOf(whole);
      return (sums) => {
        const theta = thetaOf(sums);
        return overError(adjustedOf(sums, 0, theta), adjustedOf(sums, 6, theta), (theta - truth) * offset);
      };
    }
    default:
      return unknown(kind);
  }
}

interface Drawn {
  readonly level: number;
  readonly variance: number;
}

const UNDEFINED: Drawn = { level: Number.NaN, variance: Number.NaN };

function overError(control: Drawn, variant: Drawn, shift: number): number {
  const total = control.variance + variant.variance;
  return total > 0 ? (variant.level - control.level - shift) / Math.sqrt(total) : Number.NaN;
}

function meanOf(sums: Float64Array, from: number): Drawn {
  const [n, s1, s2] = [sums[from] as number, sums[from + 1] as number, sums[from + 2] as number];
  if (n < 2) return UNDEFINED;
  return { level: s1 / n, variance: cleaned(s2 - (s1 * s1) / n, s2) / (n * (n - 1)) };
}

function ratioOf(sums: Float64Array, from: number, whole: Float64Array): Drawn {
  const [n, d, x] = [sums[from] as number, sums[from + 1] as number, sums[from + 2] as number];
  const [dd, dx, xx] = [sums[from + 3] as number, sums[from + 4] as number, sums[from + 5] as number];
  // A denominator of the other sign than the whole arm's, or none: the ratio of the draw means nothing.
  if (n < 2 || !(x * (whole[from + 2] as number) > 0)) return UNDEFINED;
  const level = d / x;
  return { level, variance: (cleaned(dd - 2 * level * dx + level * level * xx, dd) * n) / ((n - 1) * x * x) };
}

function thetaOf(sums: Float64Array): number {
  const part = (from: number) => {
    const [n, y, x] = [sums[from] as number, sums[from + 1] as number, sums[from + 2] as number];
    const [yx, xx] = [sums[from + 4] as number, sums[from + 5] as number];
    return [(yx - (y * x) / n) / ((n - 1) * n), (xx - (x * x) / n) / ((n - 1) * n)] as const;
  };
  const [[covControl, varControl], [covVariant, varVariant]] = [part(0), part(6)];
  return (covControl + covVariant) / (varControl + varVariant);
}

function adjustedOf(sums: Float64Array, from: number, theta: number): Drawn {
  const [n, y, x] = [sums[from] as number, sums[from + 1] as number, sums[from + 2] as number];
  const [yy, yx, xx] = [sums[from + 3] as number, sums[from + 4] as number, sums[from + 5] as number];
  if (n < 2) return UNDEFINED;
  const s1 = y - theta * x;
  const s2 = yy - 2 * theta * yx + theta * theta * xx;
  return { level: s1 / n, variance: cleaned(s2 - (s1 * s1) / n, yy) / (n * (n - 1)) };
}

function cleaned(squares: number, raw: number): number {
  return squares > ROUNDING * raw ? squares : 0;
}

function unknown(kind: never): never {
  throw new Error(`no draws of ${String(kind)}`);
}
