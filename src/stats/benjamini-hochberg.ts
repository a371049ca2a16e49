import { inFamily } from "./family.ts";

/**
 * Benjamini and Hochberg's adjusted p of a family of tests, in the order given: under q exactly where their procedure
 * rejects at q, so that of the rejected about a share q at most is expected to be false (independent tests, or positively
 * dependent ones).
 *
 *   p(1) <= ... <= p(m):   adjusted(i) = min over j >= i of (m / j) p(j)
 * @param ps two-sided p in [0, 1]; null where a test has none: it stays null and does not count in m
 *
 * Source: Benjamini and Hochberg 1995, JRSS B 57, 289-300; as adjusted p: Yekutieli and Benjamini 1999, Journal of
 * Statistical Planning and Inference 82, 171-196.
 */
export function benjaminiHochberg(ps: readonly number[]): number[];
export function benjaminiHochberg(ps: readonly (number | null)[]): (number | null)[];
export function benjaminiHochberg(ps: readonly (number | null)[]): (number | null)[] {
  return inFamily(ps, (rising) => {
    let smallest = 1;
    return rising
      .map((p, i) => ({ p, place: i + 1 }))
      .reverse()
      .map(({ p, place }) => {
        smallest = Math.min(smallest, (rising.length / place) * p);
        return smallest;
      })
      .reverse();
  });
}
