/** What a band that holds at all times at once is made for. */
export interface BandFor {
  /** In (0, 1): the chance that the band misses the truth at some time or other. */
  readonly alpha: number;
  /** N*, at least 1: the number of units at which the band is narrowest for its alpha. */
  readonly planned: number;
}

/**
 * How many standard errors of the moment the half-width of a time-uniform band takes when n units are in: an asymptotic
 * confidence sequence, which holds its confidence over all n together, so that it may be read at any time.
 *
 *   sqrt(2 (n r^2 + 1) / (n r^2) log(sqrt(n r^2 + 1) / alpha)),   r^2 = (-2 log alpha + log(-2 log alpha) + 1) / N*
 * Nominal only where the normal approximation is good at every n looked at.
 * @param units n of both arms, at least 1
 *
 * Source: Waudby-Smith, Arbour, Sinha, Kennedy and Ramdas 2024, Annals of Statistics 52, 2613-2640, theorem 2.2
 * (arXiv 2103.06476); r^2 as its appendix approximates the best one.
 */
export function bandCritical(units: number, { alpha, planned }: BandFor): number {
  const last = -2 * Math.log(alpha);
  const mixed = (units * (last + Math.log(last) + 1)) / planned;
  return Math.sqrt(((2 * (mixed + 1)) / mixed) * (Math.log1p(mixed) / 2 - Math.log(alpha)));
}
