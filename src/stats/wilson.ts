import type { Counts } from "./share.ts";

/** The score interval of a share, and how far its ends lie from the share. */
export interface Wilson {
  readonly share: number;
  readonly low: number;
  readonly high: number;
  /** share - low and high - share, each computed as such: they keep their digits where the ends nearly meet the share. */
  readonly below: number;
  readonly above: number;
}

/**
 * Wilson's score interval of a share, without continuity correction: all P with |p - P| <= z sqrt(P (1 - P) / n).
 *
 *   (2 n p + z^2 -+ z s) / (2 (n + z^2)),   s = sqrt(z^2 + 4 n p (1 - p))
 * Each end in the form whose terms all have one sign:
 *   low = 2 n p^2 / (2 n p + z^2 + z s)    p - low = 2 z p (1 - p) / (s + z (1 - 2 p)) for p <= 1/2
 *   p - low = z (s + z (2 p - 1)) / (2 (n + z^2)) for p > 1/2; high - p is p - low of the share 1 - p
 * @param z above 0; n at least 1
 *
 * Source: Wilson 1927, JASA 22, 209-212; Newcombe 1998, Statistics in Medicine 17, 857-872, method 3.
 */
export function wilson({ successes, n }: Counts, z: number): Wilson {
  const p = successes / n;
  const q = (n - successes) / n;
  const s = Math.sqrt(z * z + (4 * (successes * (n - successes))) / n);
  const above = belowShare(q, p, n, z, s);
  return {
    share: p,
    low: (2 * successes * p) / (2 * successes + z * z + z * s),
    high: p + above,
    below: belowShare(p, q, n, z, s),
    above,
  };
}

function belowShare(p: number, q: number, n: number, z: number, s: number): number {
  return p <= q ? (2 * z * (p * q)) / (s + z * (q - p)) : (z * (s + z * (p - q))) / (2 * (n + z * z));
}
