/**
 * The ends of an interval for rho = level_t / level_c - 1, where level_t - (1 + rho) level_c is not rejected:
 *
 *   (D - rho c)^2 <= wt^2 + (1 + rho)^2 wc^2,   D = t - c,   wt and wc the half-widths of the arms' own intervals
 * that is A rho^2 - 2 B rho + C <= 0 with A = c^2 - wc^2, B = D c + wc^2, C = D^2 - wt^2 - wc^2. Written for rho and
 * not for the ratio, so that the sign of an end is the sign of C, that is, whether the difference's interval excludes 0.
 * B^2 - A C = wt^2 A + wc^2 t^2: no difference of large numbers, and the root that would cancel is C over the other.
 */
export interface RatioTerms {
  /** Levels; the control's is above 0. */
  readonly control: number;
  readonly variant: number;
  /** D, not recomputed from the rounded levels. */
  readonly difference: number;
  /** Half-widths on the side that counts for this end. */
  readonly halfControl: number;
  readonly halfVariant: number;
  /** sqrt(wt^2 + wc^2), the very number that bounds the difference: so both exclude 0 together, to the last bit. */
  readonly half: number;
}

/** The lower end. Exists whatever the sign of A, as long as halfVariant <= |variant| or A > 0. */
export function lowerRatioLimit(terms: RatioTerms): number {
  const { a, b, c, root } = quadratic(terms);
  return b >= 0 ? c / (b + root) : (b - root) / a;
}

/** The upper end. Needs A > 0, that is halfControl < control. */
export function upperRatioLimit(terms: RatioTerms): number {
  const { a, b, c, root } = quadratic(terms);
  return b >= 0 ? (b + root) / a : c / (b - root);
}

function quadratic({ control, variant, difference, halfControl, halfVariant, half }: RatioTerms) {
  const a = (control - halfControl) * (control + halfControl);
  const b = difference * control + halfControl ** 2;
  const c = (Math.abs(difference) - half) * (Math.abs(difference) + half);
  // Below 0 by rounding at most: for A under 0 it is wt^2 c^2 + wc^2 (t^2 - wt^2), and wt <= |t| is asked for.
  const square = halfVariant ** 2 * a + (halfControl * variant) ** 2;
  return { a, b, c, root: Math.sqrt(Math.max(0, square)) };
}
