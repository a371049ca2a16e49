import { normalCritical, normalTwoSided } from "./normal.ts";

/** How planned looks share out alpha: little early on, or about evenly. */
export type Spending = "obrien-fleming" | "pocock";

/**
 * What each side of a two-sided test may have spent of its alpha / 2 at a share t of the planned size, all looks together.
 *
 *   O'Brien-Fleming type   2 - 2 Phi(z(1 - alpha/4) / sqrt(t))
 *   Pocock type            (alpha/2) log(1 + (e - 1) t)
 * Both are alpha / 2 at t = 1.
 * @param t in (0, 1]
 *
 * Source: Lan and DeMets 1983, Biometrika 70, 659-663; the two types as there, at the level alpha / 2 of one side.
 */
export function spentASide(spending: Spending, alpha: number, t: number): number {
  if (spending === "pocock") return (alpha / 2) * Math.log1p(Math.expm1(1) * t);
  return normalTwoSided(normalCritical(alpha / 2) / Math.sqrt(t));
}
