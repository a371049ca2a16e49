/** Tables this much likelier than the one seen still count as equally likely: R's fisher.test takes the same. */
const AS_LIKELY = 1 + 1e-7;

/**
 * Fisher's exact test of a 2 x 2 table, two-sided: the probability, given the margins, of all tables that are as likely
 * as the one seen or less.
 *
 *   row 1: a, b    row 2: c, d    P(a) ~ C(a + b, a) C(c + d, c)
 * Each probability comes from its neighbour by the ratio of two products of whole numbers, outwards from the likeliest
 * table, so that no difference of large logarithms costs digits.
 * @param a,b,c,d whole numbers from 0
 * @returns p; 1 when a margin is 0
 *
 * Source: Fisher 1935, JRSS 98, 39-82; the two-sided rule: Freeman and Halton 1951, Biometrika 38, 141-149.
 */
export function fisher(a: number, b: number, c: number, d: number): number {
  const row = a + b;
  const column = a + c;
  const total = row + c + d;
  const least = Math.max(0, row + column - total);
  const most = Math.min(row, column);

  /** P(x + 1) / P(x). */
  const ratio = (x: number) => ((row - x) * (column - x)) / ((x + 1) * (total - row - column + x + 1));
  const mode = Math.min(most, Math.max(least, Math.floor(((row + 1) * (column + 1)) / (total + 2))));

  // Relative to the likeliest table. Both sides fall without end: a side ends where a double holds nothing more.
  const upper = [1];
  for (let x = mode, p = 1; x < most && p > 0; x++) {
    p *= ratio(x);
    upper.push(p);
  }
  const lower: number[] = [];
  for (let x = mode - 1, p = 1; x >= least && p > 0; x--) {
    p /= ratio(x);
    lower.push(p);
  }

  const seen = (a >= mode ? upper[a - mode] : lower[mode - 1 - a]) ?? 0;
  const ascending = [...upper, ...lower].sort((p, q) => p - q);
  let asLikely = 0;
  let all = 0;
  for (const p of ascending) {
    all += p;
    if (p <= seen * AS_LIKELY) asLikely += p;
  }
  return asLikely / all;
}
