import { inFamily } from "./family.ts";

/**
 * Holm's adjusted p of a family of tests, in the order given: under alpha exactly where Holm's steps reject at alpha, so
 * that the chance of any false rejection in the family is at most alpha, however the tests depend on each other.
 *
 *   p(1) <= ... <= p(m):   adjusted(i) = min(1, max over j <= i of (m - j + 1) p(j))
 * @param ps two-sided p in [0, 1]; null where a test has none: it stays null and does not count in m
 *
 * Source: Holm 1979, Scandinavian Journal of Statistics 6, 65-70; as adjusted p: Wright 1992, Biometrics 48, 1005-1013.
 */
export function holm(ps: readonly number[]): number[];
export function holm(ps: readonly (number | null)[]): (number | null)[];
export function holm(ps: readonly (number | null)[]): (number | null)[] {
  return inFamily(ps, (rising) => {
    let largest = 0;
    return rising.map((p, i) => {
      largest = Math.max(largest, (rising.length - i) * p);
      return Math.min(1, largest);
    });
  });
}
