import type { DecimalText } from "./types.ts";

/**
 * A number as a log writes it: `[+-]digits[.digits][e[+-]digits]` and nothing else (DESIGN 4, rule 2). The reference for
 * what the engine's statements accept.
 *
 * @returns the canonical decimal text (see `canonical`), so that equal numbers have equal text; null if it is no number
 */
export function parseNumber(text: string): DecimalText | null {
  return canonical(/^([+-]?)(\d+)(?:\.(\d+))?(?:e([+-]?\d+))?$/.exec(text));
}

/** A number as YAML 1.2 writes it in base ten; beyond `parseNumber` it takes `.5`, `5.` and a capital E. */
export function parseYamlNumber(source: string): DecimalText | null {
  return canonical(/^([+-]?)(?=\.?\d)(\d*)(?:\.(\d*))?(?:[eE]([+-]?\d+))?$/.exec(source));
}

/** A share as the plan writes it: "5%" is "0.05", exactly; null if the text is no percentage. */
export function parsePercent(text: string): DecimalText | null {
  const match = PERCENT.exec(text);
  return match === null ? null : canonical([match[0], match[1] ?? "", match[2] ?? "", match[3], "-2"]);
}
export const PERCENT = /^([+-]?)(\d+)(?:\.(\d+))? ?%$/;

/** A double as decimal text: its shortest form, with all digits written out. */
export function decimalOf(value: number): DecimalText {
  const text = parseYamlNumber(String(value));
  if (text === null) throw new Error(`no decimal: ${value}`);
  return text;
}

/** The number of digits up to which a number is written out; what is longer keeps an exponent. */
const LONGEST = 400;

/**
 * The one text of a number: digits written out, no plus sign, no needless zeros, no negative zero. A number that would
 * need more than 400 digits is its digits without trailing zeros, "e" and the exponent ("12e500").
 */
function canonical(match: readonly (string | undefined)[] | null): DecimalText | null {
  if (match === null) return null;
  const [, sign = "", whole = "", fraction = "", exponentText = "0"] = match;
  const digits = (whole + fraction).replace(/^0+/, "");
  if (digits === "") return "0";

  const significant = digits.replace(/0+$/, "");
  // BigInt: an exponent may itself have more digits than a double holds
  const exponent = BigInt(exponentText) - BigInt(fraction.length) + BigInt(digits.length - significant.length);
  const minus = sign === "-" ? "-" : "";
  const point = BigInt(significant.length) + exponent; // the place of the decimal point, counted from the first digit
  if (point > LONGEST || point < -LONGEST || significant.length > LONGEST) return `${minus}${significant}e${exponent}`;

  const place = Number(point);
  if (place <= 0) return `${minus}0.${"0".repeat(-place)}${significant}`;
  const padded = significant.padEnd(place, "0");
  return place >= padded.length ? minus + padded : `${minus}${padded.slice(0, place)}.${padded.slice(place)}`;
}
