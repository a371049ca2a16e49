/** A unit's y and x in 10^-9; x null where it is missing. */
export interface Pair {
  readonly of: bigint;
  readonly x: bigint | null;
}

/** The values y - theta (x - X) of both arms as whole numbers of 1 / one. */
export interface AdjustedValues {
  /** theta, exact. */
  readonly theta: readonly [numerator: bigint, denominator: bigint];
  readonly control: readonly bigint[];
  readonly variant: readonly bigint[];
  readonly one: bigint;
}

/**
 * METHODS 1, "adjusted", by definition and in whole numbers: X = T / H, T the sum of the H values of x in both arms; with
 * w = H x - T, 0 for a missing x, cov_i / n_i = (n sum w y - sum w sum y) / (n^2 (n - 1)) and var_i likewise.
 * @returns null where an arm has under two units, or x does not vary in either
 */
export function adjustedOf(control: readonly Pair[], variant: readonly Pair[]): AdjustedValues | null {
  if (control.length < 2 || variant.length < 2) return null;
  const xs = [...control, ...variant].flatMap(({ x }) => (x === null ? [] : [x]));
  const [total, having] = [sum(xs), BigInt(xs.length)];
  const centred = (pairs: readonly Pair[]) =>
    pairs.map(({ of, x }) => ({ y: of, w: x === null ? 0n : having * x - total }));
  const [c, t] = [centred(control), centred(variant)];
  const [byC, byT] = [divisor(c), divisor(t)];
  const up = product(c, ({ y }) => y) * byT + product(t, ({ y }) => y) * byC;
  const down = product(c, ({ w }) => w) * byT + product(t, ({ w }) => w) * byC;
  if (down === 0n) return null;
  const values = (pairs: readonly Centred[]) => pairs.map(({ y, w }) => y * down - up * w);
  return { theta: [up * having, down], control: values(c), variant: values(t), one: down * 10n ** 9n };
}

interface Centred {
  readonly y: bigint;
  readonly w: bigint;
}

/** n sum w v - sum w sum v */
function product(pairs: readonly Centred[], of: (pair: Centred) => bigint): bigint {
  const n = BigInt(pairs.length);
  return n * sum(pairs.map((pair) => pair.w * of(pair))) - sum(pairs.map(({ w }) => w)) * sum(pairs.map(of));
}

/** n^2 (n - 1) */
function divisor(pairs: readonly Centred[]): bigint {
  const n = BigInt(pairs.length);
  return n * n * (n - 1n);
}

const sum = (values: readonly bigint[]): bigint => values.reduce((all, value) => all + value, 0n);
