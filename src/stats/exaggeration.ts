import { normalUpperTail } from "./normal.ts";

/** What a result that excludes 0 would tell if the true effect were a given one. */
export interface Exaggeration {
  /** Share of tests whose interval excludes 0, on either side. */
  readonly power: number;
  /** Of these, the share with the wrong sign. */
  readonly wrongSign: number;
  /** Of these, the mean size of the estimate over the true effect; above 1. */
  readonly factor: number;
}

/**
 * How much a significant result overstates, if the true effect were this one: design analysis, not of the observed effect.
 *
 *   estimate ~ N(effect, SE^2), d = |effect| / SE, Q the upper tail:   power = Q(c - d) + Q(c + d)
 *   wrong sign = Q(c + d) / power    factor = (phi(c - d) + phi(c + d) + d (Q(c - d) - Q(c + d))) / (d power)
 * The means of the two truncated normal distributions in closed form; nothing is simulated.
 * @param effect the true effect to suppose, such as the worthwhile one; not 0, in the standard error's unit
 * @param critical c, the critical value of the interval that decides, above 0
 *
 * Source: Gelman and Carlin 2014, Perspectives on Psychological Science 9, 641-651; closed form: Lu, Qiu and Deng 2019,
 * British Journal of Mathematical and Statistical Psychology 72, 1-17.
 */
export function exaggeration(effect: number, standardError: number, critical: number): Exaggeration {
  const d = Math.abs(effect) / standardError;
  const [right, wrong] = [normalUpperTail(critical - d), normalUpperTail(critical + d)];
  const power = right + wrong;
  const sizes = density(critical - d) + density(critical + d) + d * (right - wrong);
  return { power, wrongSign: wrong / power, factor: sizes / (d * power) };
}

function density(x: number): number {
  return Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
}
