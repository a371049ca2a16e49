/**
 * Moments by definition, in two passes over whole numbers: no float until the last division.
 * For x in units of `one` (10^9 for values in 10^-9).
 */
export interface Moments {
  readonly n: number;
  readonly mean: number;
  /** Unbiased; null below two values. */
  readonly variance: number | null;
  /** m3 / m2^1.5 and m4 / m2^2 - 3; null where the values do not differ. */
  readonly g1: number | null;
  readonly g2: number | null;
}

export function momentsOf(values: readonly bigint[], one: bigint): Moments | null {
  if (values.length === 0) return null;
  const n = BigInt(values.length);
  const total = values.reduce((sum, value) => sum + value, 0n);
  // n (x - mean) is whole: central sums of it are exact.
  const [m2 = 0n, m3 = 0n, m4 = 0n] = [2n, 3n, 4n].map((k) =>
    values.reduce((sum, value) => sum + (n * value - total) ** k, 0n),
  );
  const spread = m2 > 0n;
  const standard = Math.sqrt(quotient(m2, n * n * n));
  return {
    n: values.length,
    mean: quotient(total, n * one),
    variance: values.length < 2 ? null : quotient(m2, n * n * (n - 1n) * one * one),
    g1: spread ? quotient(m3, n ** 4n) / standard ** 3 : null,
    g2: spread ? quotient(m4 * n, m2 * m2) - 3 : null,
  };
}

/** The double nearest a / b, but for the last bit. */
export function quotient(a: bigint, b: bigint): number {
  if (b < 0n) return quotient(-a, -b);
  if (a < 0n) return -quotient(-a, b);
  if (a === 0n) return 0;
  const shift = 70 - (bits(a) - bits(b));
  const whole = shift >= 0 ? (a << BigInt(shift)) / b : a / (b << BigInt(-shift));
  return scaled(Number(whole), -shift);
}

const bits = (value: bigint): number => value.toString(2).length;

/** x 2^power, in steps that do not overflow on the way. */
function scaled(x: number, power: number): number {
  const half = Math.trunc(power / 2);
  return x * 2 ** half * 2 ** (power - half);
}

/**
 * A ratio's score d + R, d = (a - R b) / mean(b), R = A / B: with common denominator B^2 it is
 * n (a B - A b) + A B over B^2. Null where the denominators sum to 0.
 */
export function scoresOf(
  pairs: readonly { readonly of: bigint; readonly per: bigint | null }[],
): { values: bigint[]; one: bigint } | null {
  const a = pairs.reduce((sum, pair) => sum + pair.of, 0n);
  const b = pairs.reduce((sum, pair) => sum + (pair.per ?? 0n), 0n);
  if (b === 0n) return null;
  const n = BigInt(pairs.length);
  return { values: pairs.map((pair) => n * (pair.of * b - a * (pair.per ?? 0n)) + a * b), one: b * b };
}
