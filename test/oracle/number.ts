/**
 * Numbers as DESIGN 4 reads them, without a float: `[+-]digits[.digits][e[+-]digits]`, nothing else.
 * A decimal is kept as sign, digits without zeros at either end, and the power of ten of its first digit.
 */
export interface Decimal {
  readonly sign: -1 | 0 | 1;
  /** "" for zero. */
  readonly digits: string;
  /** The value is sign * d.ddd * 10^lead. */
  readonly lead: number;
}

const NUMBER = /^([+-]?)([0-9]+)(?:\.([0-9]+))?(?:e([+-]?[0-9]+))?$/;

/** Null where the text is not a number. */
export function readDecimal(text: string): Decimal | null {
  const found = NUMBER.exec(text);
  if (found === null) return null;
  const [, sign = "", whole = "", fraction = "", exponent = "0"] = found;
  const all = whole + fraction;
  const digits = all.replace(/^0+/, "");
  if (digits === "") return { sign: 0, digits: "", lead: 0 };
  const zeros = all.length - digits.length;
  return {
    sign: sign === "-" ? -1 : 1,
    digits: digits.replace(/0+$/, ""),
    lead: whole.length - 1 - zeros + Number(exponent),
  };
}

/** In plain digits, the shortest: "0.05", "-1200". */
export function decimalText({ sign, digits, lead }: Decimal): string {
  if (sign === 0) return "0";
  const whole = lead < 0 ? "0" : digits.slice(0, lead + 1).padEnd(lead + 1, "0");
  const fraction = lead < 0 ? "0".repeat(-lead - 1) + digits : digits.slice(lead + 1);
  return `${sign < 0 ? "-" : ""}${whole}${fraction === "" ? "" : `.${fraction}`}`;
}

/** Exact: no digit of either side is rounded. */
export function compareDecimals(a: Decimal, b: Decimal): number {
  if (a.sign !== b.sign) return a.sign - b.sign;
  return a.sign * compareSizes(a, b);
}

function compareSizes(a: Decimal, b: Decimal): number {
  if (a.lead !== b.lead) return a.lead < b.lead ? -1 : 1;
  if (a.digits === b.digits) return 0;
  return a.digits < b.digits ? -1 : 1;
}

const NANO_LIMIT = 10n ** 27n;

/** The value in 10^-9, more places rounded half away from zero; "out-of-range" where that is 10^18 or beyond. */
export function toNano(value: Decimal): bigint | "out-of-range" {
  if (value.lead >= 18) return "out-of-range";
  const nano = rounded(value);
  return nano >= NANO_LIMIT || nano <= -NANO_LIMIT ? "out-of-range" : nano;
}

function rounded(value: Decimal): bigint {
  if (value.sign === 0 || value.lead < -10) return 0n;
  const shift = value.lead - (value.digits.length - 1) + 9;
  const size = shift >= 0 ? BigInt(value.digits) * 10n ** BigInt(shift) : roundedQuotient(BigInt(value.digits), -shift);
  return value.sign < 0 ? -size : size;
}

/** size / 10^places, halves up; size is not negative, so up is away from zero. */
function roundedQuotient(size: bigint, places: number): bigint {
  const divisor = 10n ** BigInt(places);
  return (2n * size + divisor) / (2n * divisor);
}

/** Of a text that must be a decimal, of any size: from a plan, or a sum that an engine gives. */
export function nanoOf(text: string): bigint {
  const value = readDecimal(text);
  if (value === null) throw new Error(`not a number: ${text}`);
  return rounded(value);
}

/** 1500000000n -> "1.5". */
export function nanoText(nano: bigint): string {
  const size = (nano < 0n ? -nano : nano).toString().padStart(10, "0");
  const fraction = size.slice(-9).replace(/0+$/, "");
  return `${nano < 0n ? "-" : ""}${size.slice(0, -9)}${fraction === "" ? "" : `.${fraction}`}`;
}

export function ascending(a: bigint, b: bigint): number {
  return a < b ? -1 : a > b ? 1 : 0;
}
