/** The true minus sign, as wide as the plus. */
export const MINUS = "\u2212";

const SIGNIFICANT = 4;

/**
 * A number with `decimals` places, thousands set apart by commas. What rounds to zero has no sign.
 * Beyond 10^15 and, for 9 places or more, below 10^-8, it is written as a power of ten.
 */
export function fixed(value: number, decimals: number): string {
  if (!Number.isFinite(value)) throw new Error(`a figure that does not exist reached the reader: ${value}`);
  const size = Math.abs(value);
  if (size >= 1e15 || (size !== 0 && decimals > 8 && size < 1e-8)) return powerOfTen(value);
  const [whole = "", places] = size.toFixed(Math.min(decimals, 20)).split(".");
  const text = places === undefined ? grouped(whole) : `${grouped(whole)}.${places}`;
  return value < 0 && /[1-9]/.test(text) ? MINUS + text : text;
}

/** A figure with about four significant digits; whole numbers and what is above 1,000 keep every digit before the point. */
export function number(value: number): string {
  return Number.isInteger(value) ? fixed(value, 0) : fixed(value, decimalsOf(value));
}

/**
 * Figures that are read side by side: all with as many places as the smallest of them needs for four digits, and more
 * where two that differ would read alike.
 */
export function alike(values: readonly number[]): string[] {
  if (values.every(Number.isInteger)) return values.map((value) => fixed(value, 0));
  const sizes = values.filter((value) => value !== 0).map(decimalsOf);
  // a figure a thousand times smaller than its neighbour does not lend it seven places
  const first = Math.min(Math.max(...sizes), Math.min(...sizes) + 3);
  const texts = (decimals: number) => values.map((value) => fixed(value, decimals));
  let decimals = first;
  while (decimals < first + 6 && new Set(texts(decimals)).size < new Set(values).size) decimals++;
  return texts(decimals);
}

/** A whole number of rows or units. */
export function count(n: number): string {
  return fixed(n, 0);
}

/** With its sign: "+7.50", "−1.20"; zero has none. */
export function signed(value: number, decimals = decimalsOf(value)): string {
  return withSign(value, fixed(value, decimals));
}

/** Puts the plus before the text of a number above zero, unless the text shows nothing but zeros. */
export function withSign(value: number, text: string): string {
  return value > 0 && /[1-9]/.test(text) ? `+${text}` : text;
}

/** A number as the plan states it: every digit, none added ("5", "7.5", "0.002"). */
export function plain(value: number): string {
  const text = Number(value.toPrecision(12));
  const places = /e-(\d+)$/.exec(String(text));
  if (places !== null) return fixed(text, Math.min(20, Number(places[1]) + digitsAfterPoint(String(text))));
  return fixed(text, digitsAfterPoint(String(text)));
}

function digitsAfterPoint(text: string): number {
  return /\.(\d+)/.exec(text)?.[1]?.length ?? 0;
}

function decimalsOf(value: number): number {
  if (value === 0) return 0;
  return Math.max(0, SIGNIFICANT - 1 - Math.floor(Math.log10(Math.abs(value))));
}

/** Digits before the point, thousands set apart. */
export function grouped(whole: string): string {
  return whole.replace(/\B(?=(\d{3})+$)/g, ",");
}

function powerOfTen(value: number): string {
  const [digits = "", exponent = ""] = Math.abs(value)
    .toExponential(SIGNIFICANT - 1)
    .split("e");
  const power = exponent.replace("+", "").replace("-", MINUS);
  return `${value < 0 ? MINUS : ""}${digits} \u00d7 10^${power}`;
}
