/**
 * Where a continuous function crosses 0, to two units in the last place of a double.
 *
 * Inverse quadratic interpolation where it is safe, halving elsewhere: never outside the bracket.
 * @param f of opposite signs at `low` and `high`, or 0 at one of them
 *
 * Source: Chandrupatla 1997, Advances in Engineering Software 28, 145-149.
 */
export function root(f: (x: number) => number, low: number, high: number): number {
  let [a, b] = [low, high];
  let [fa, fb] = [f(a), f(b)];
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (Math.sign(fa) === Math.sign(fb)) throw new Error(`no crossing between ${low} (${fa}) and ${high} (${fb})`);
  let share = 0.5;
  for (;;) {
    const x = a + share * (b - a);
    const fx = f(x);
    const isOnSideOfA = Math.sign(fx) === Math.sign(fa);
    const [c, fc] = isOnSideOfA ? [a, fa] : [b, fb];
    if (!isOnSideOfA) [b, fb] = [a, fa];
    [a, fa] = [x, fx];

    const best = Math.abs(fa) < Math.abs(fb) ? a : b;
    const least = (2 * Number.EPSILON * Math.abs(best) + Number.MIN_VALUE) / Math.abs(b - a);
    if (fx === 0 || least > 0.5) return best;
    const [xi, phi] = [(a - b) / (c - b), (fa - fb) / (fc - fb)];
    const isSafe = phi ** 2 < xi && (1 - phi) ** 2 < 1 - xi;
    share = isSafe
      ? (fa / (fb - fa)) * (fc / (fb - fc)) + (((c - a) / (b - a)) * (fa / (fc - fa)) * fb) / (fc - fb)
      : 0.5;
    share = Math.min(1 - least, Math.max(least, share));
  }
}
