import { count, fixed } from "./number.ts";

/** Proportions as people count them: `of` units ("100", "1,000"), and each share as that many of them. */
export interface Rates {
  readonly of: string;
  readonly texts: readonly string[];
}

/**
 * "13.2 of 100 visitors, was 12.0": shares that are compared, on one base, with places enough to tell them apart.
 * The base is 100, or the power of ten at which the largest share is at least 1.
 */
export function rates(shares: readonly number[]): Rates {
  const largest = Math.max(...shares);
  const base = largest === 0 ? 100 : Math.min(1e6, Math.max(100, 10 ** Math.ceil(-Math.log10(largest))));
  const spread = (largest - Math.min(...shares)) * base;
  const decimals = spread === 0 ? 1 : Math.min(6, Math.max(1, -Math.floor(Math.log10(spread))));
  return { of: count(base), texts: shares.map((share) => fixed(share * base, decimals)) };
}
