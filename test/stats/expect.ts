import { expect } from "vitest";
import { isAbsent } from "../../src/stats/index.ts";
import type { Absent } from "../../src/stats/types.ts";

/** Agrees with a published value to half a unit of its last printed digit. */
export function expectPrinted(value: number | null, printed: string): void {
  const [digits = "", exponent = "0"] = printed.toLowerCase().split("e");
  const places = (digits.split(".")[1] ?? "").length - Number(exponent);
  const half = 0.5 * 10 ** -places;
  // The double of a printed value may lie a rounding beyond its half unit.
  const slack = Math.abs(Number(printed)) * 2 ** -52;
  expect(Math.abs((value ?? Number.NaN) - Number(printed)), `${value} against ${printed}`).toBeLessThanOrEqual(
    half + slack,
  );
}

/** Agrees with a value to a relative error; a value of 0 must be met exactly. */
export function expectWithin(value: number | null, expected: number | string, relative: number): void {
  const target = Number(expected);
  const error = Math.abs((value ?? Number.NaN) - target);
  expect(error, `${value} against ${expected}`).toBeLessThanOrEqual(Math.abs(target) * relative);
}

/** A figure that must exist. */
export function present<Figure>(figure: Figure | Absent): Figure {
  if (isAbsent(figure)) throw new Error(`absent: ${figure.absent}`);
  return figure;
}

/** Every number in a figure, however deep, is finite. */
export function expectFinite(figure: unknown): void {
  if (typeof figure === "number") expect(Number.isFinite(figure), String(figure)).toBe(true);
  else if (typeof figure === "object" && figure !== null) Object.values(figure).forEach(expectFinite);
  else expect(figure).not.toBe(undefined);
}
