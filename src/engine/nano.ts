/** Exact decimals with 9 places as whole numbers of 10^-9. */

const ONE = 1_000_000_000n;

/** Decimal text, without trailing zeros: 1500000000n is "1.5". */
export function nanoText(nano: bigint): string {
  const size = nano < 0n ? -nano : nano;
  const places = (size % ONE).toString().padStart(9, "0").replace(/0+$/, "");
  return `${nano < 0n ? "-" : ""}${size / ONE}${places === "" ? "" : `.${places}`}`;
}

/** Decimal text of up to 9 places as a whole number of 10^-9. */
export function nanoOf(text: string): bigint {
  const match = /^(-?)(\d+)(?:\.(\d{1,9}))?$/.exec(text);
  if (match === null) throw new Error(`${text} is no decimal of up to 9 places`);
  const [, sign, whole = "", places = ""] = match;
  const size = BigInt(whole) * ONE + BigInt(places.padEnd(9, "0"));
  return sign === "-" ? -size : size;
}

/** The nearest double: the text is read, for dividing the integer by 10^9 would round twice. */
export const nanoNumber = (nano: bigint): number => Number(nanoText(nano));

/** Quotient rounded to a whole number, half away from zero. */
export function divideRounded(value: bigint, by: bigint): bigint {
  const negative = value < 0n !== by < 0n;
  const v = value < 0n ? -value : value;
  const d = by < 0n ? -by : by;
  const rounded = (2n * v + d) / (2n * d);
  return negative ? -rounded : rounded;
}

/** The nearest double to value / by, 0 < by, ties to even; for quotients that are no smaller than a normal double. */
export function quotient(value: bigint, by: bigint): number {
  if (value === 0n) return 0;
  const size = value < 0n ? -value : value;
  const shift = BITS - bits(size) + bits(by);
  const scaled = shift >= 0 ? size << BigInt(shift) : size;
  const divisor = shift >= 0 ? by : by << BigInt(-shift);
  // Far more bits than a double has, and a last one that is never 0 when the rest is not: rounded once, as the quotient is.
  const leading = scaled / divisor;
  const rounded = Number(scaled % divisor === 0n ? leading : leading | 1n) * 2 ** -shift;
  return value < 0n ? -rounded : rounded;
}
const BITS = 80;
const bits = (size: bigint): number => size.toString(2).length;
