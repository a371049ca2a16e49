import { normalUpperTail } from "./normal.ts";
import { normalQuantile } from "./normal-quantile.ts";
import type { Absent } from "./types.ts";

/**
 * What a contrast is to show, and how well it did with the units there were. Never made from the observed effect.
 */
export interface Question {
  /** All analysed units of all arms. */
  readonly units: number;
  /** The critical value of the interval that decides. */
  readonly critical: number;
  /** SE of the difference at these units, above 0, in the metric's unit; a ratio's or an adjusted one's as well. */
  readonly standardError: number;
  /**
   * How far the true effect is taken to lie on the right side of the limit that the interval must clear, above 0, in the
   * metric's unit: the worthwhile effect against 0; the expected one less the worthwhile, against that (`beyondWorthwhile`);
   * the margin, of a guardrail without effect. A relative amount is times the control's mean.
   */
  readonly distance: number;
}

/**
 * The smallest true effect that the contrast finds with this power: (c + z(power)) SE.
 *
 * An interval at c clears 0 on the effect's side with probability power; by chance on the other side is not counted.
 * @param critical c, the critical value that counts
 * @param power in (0, 1)
 * @returns the standard error's unit
 *
 * Source: Chow, Shao and Wang 2008, Sample Size Calculations in Clinical Research, 2nd ed., 3.2.1.
 */
export function detectable(critical: number, power: number, standardError: number): number {
  return (critical + normalQuantile(power)) * standardError;
}

/**
 * Units of all arms, shared out as now, at which the question has this power: n (detectable / distance)^2.
 *
 * SE falls with the root of the units while their spread stays. Not rounded; a reader gets it rounded up.
 */
export function unitsFor({ units, critical, standardError, distance }: Question, power: number): number {
  return units * (detectable(critical, power, standardError) / distance) ** 2;
}

/** Power of a question at so many units of all arms: Phi(distance / SE' - c), SE' = SE sqrt(n / units). */
export function powerWith(question: Question, units: number): number {
  const standardError = question.standardError * Math.sqrt(question.units / units);
  return normalUpperTail(question.critical - question.distance / standardError);
}

/**
 * The distance to show where the interval must clear the worthwhile effect itself (`adopt-when: shown-worthwhile`).
 *
 * A true effect of just the worthwhile one clears it in alpha / 2 of tests, however large: no number of units helps.
 * @param expected the effect that the plan expects, in the unit of the worthwhile one; null where it gives none
 */
export function beyondWorthwhile(worthwhile: number, expected: number | null): number | Absent {
  return expected !== null && expected > worthwhile ? expected - worthwhile : { absent: "no-expected-effect" };
}

/** A size for several questions, and what it means for each and for all together. */
export interface SizeForAll {
  /** Units of all arms: the largest that one of the questions needs. Not rounded. */
  readonly units: number;
  /** Power of each question at that size, in their order. */
  readonly powers: readonly number[];
  /** All are answered together at least this often: max(0, 1 - sum of misses), however they depend on each other. */
  readonly together: number;
}

/**
 * The size that gives each question its power. All together have less: the bound is Bonferroni's.
 * @returns null without a question
 *
 * Source: Boole's inequality; Chow, Shao and Wang 2008.
 */
export function sizeForAll(questions: readonly Question[], power: number): SizeForAll | null {
  if (questions.length === 0) return null;
  const units = Math.max(...questions.map((question) => unitsFor(question, power)));
  const powers = questions.map((question) => powerWith(question, units));
  return { units, powers, together: Math.max(0, 1 - powers.reduce((misses, found) => misses + (1 - found), 0)) };
}
