/** An exact quotient of whole numbers; the denominator is above 0. */
export interface Fraction {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

/** The fraction of two whole numbers, with the sign moved to the numerator. */
export function fraction(numerator: bigint, denominator: bigint): Fraction {
  if (denominator === 0n) throw new Error(`a fraction of ${numerator} over 0`);
  return denominator < 0n ? { numerator: -numerator, denominator: -denominator } : { numerator, denominator };
}

/** A double as the fraction that it is: a whole number over a power of two. */
export function exactly(value: number): Fraction {
  if (!Number.isFinite(value)) throw new Error(`${value} is no fraction`);
  let numerator = value;
  let power = 0n;
  while (!Number.isInteger(numerator)) {
    numerator *= 2;
    power += 1n;
  }
  return { numerator: BigInt(numerator), denominator: 1n << power };
}

/** Bits of the quotient kept before the one rounding to 53; more than 54, so that the last only says "and more". */
const BITS = 66;

/**
 * The double nearest to a fraction, ties to even: rounded once, however long the whole numbers are.
 *
 * The integer quotient keeps 66 bits or more and its last bit is set when anything was cut off; a bigint becomes a
 * double by one correct rounding (ECMAScript, Number(bigint)), and the power of two taken out again is exact. Only
 * results under 2^-1022 round twice.
 */
export function nearestNumber({ numerator, denominator }: Fraction): number {
  if (numerator === 0n) return 0;
  const size = numerator < 0n ? -numerator : numerator;
  const shift = BITS + bits(denominator) - bits(size);
  const scaled = shift > 0 ? size << BigInt(shift) : size;
  const by = shift > 0 ? denominator : denominator << BigInt(-shift);
  const quotient = scaled / by;
  const rounded = Number(scaled % by === 0n ? quotient : quotient | 1n);
  // In two steps: 2^-shift alone may lie outside the range of a double where the result does not.
  const half = Math.trunc(shift / 2);
  const value = rounded * 2 ** -half * 2 ** (half - shift);
  return numerator < 0n ? -value : value;
}

function bits(value: bigint): number {
  return value.toString(16).length * 4;
}
