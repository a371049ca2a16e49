import { fraction, NANO, nearestNumber } from "../cells/index.ts";
import { normalTwoSided } from "./normal.ts";
import { reach } from "./order-statistics.ts";
import { lastAtRank, quantileRanks } from "./quantile-ranks.ts";
import { type Known, learn, type RankSearch } from "./rank-search.ts";

/** Points between the ends of a bracket that one round looks at. */
const POINTS = 31;
/** Beyond this z no double holds the tail: p is then 0. */
const FURTHEST = 40;

/** Where the end towards 0 lies at some z: ranks of the arm that falls and of the arm that rises; null outside 1..n. */
interface Place {
  readonly z: number;
  readonly falling: number | null;
  readonly rising: number | null;
}

/**
 * p of a difference of quantiles: the alpha at which its interval touches 0.
 *
 * The end towards 0 is a step in z: it stays where it is until a rank changes. p = P(|Z| >= z) with the last z at which
 * the interval excludes 0, so an interval at alpha excludes 0 exactly when alpha is at least p. The bracket of z is cut
 * in 32 until each arm takes one step in it at most: log32 of n rounds, 4 for a billion units.
 * @param estimate variant minus control in 10^-9
 * @param known the values at the quantiles' own ranks at least
 * @returns 1 for an estimate of 0, and where the arms are too small for any interval to exclude 0
 *
 * Source: an interval's p-value function, Cox and Hinkley 1974, Theoretical Statistics, 7.2.
 */
export function* quantileP(
  units: { readonly control: number; readonly variant: number },
  q: string,
  estimate: bigint,
  known: Known,
): RankSearch<number> {
  if (estimate === 0n) return 1;
  const isAbove = estimate > 0n;
  const [falls, rises] = isAbove ? [units.variant, units.control] : [units.control, units.variant];
  const [ofFalling, ofRising] = isAbove ? [known.variant, known.control] : [known.control, known.variant];
  const quantiles = { falling: quantileRanks(falls, q, 0).at, rising: quantileRanks(rises, q, 0).at };
  const distance = Math.abs(nearestNumber(fraction(estimate, NANO)));

  const placeAt = (z: number): Place => ({
    z,
    falling: quantileRanks(falls, q, z).low,
    rising: quantileRanks(rises, q, z).high,
  });
  const look = (places: readonly Place[]): RankSearch<void> => {
    const [lows, highs] = [kept(places.map(({ falling }) => falling)), kept(places.map(({ rising }) => rising))];
    return learn(known, isAbove ? { control: highs, variant: lows } : { control: lows, variant: highs });
  };
  const excludes = ({ falling, rising }: Omit<Place, "z">): boolean => {
    if (falling === null || rising === null) return false;
    const away = reach(
      { at: valueAt(ofFalling, quantiles.falling), low: valueAt(ofFalling, falling) },
      { at: valueAt(ofRising, quantiles.rising), high: valueAt(ofRising, rising) },
      estimate,
    );
    return away !== null && away < distance;
  };

  let [low, high] = [placeAt(0), placeAt(FURTHEST)];
  yield* look([low, high]);
  if (!excludes(low)) return 1;
  if (excludes(high)) return 0;
  while (steps(low.falling, high.falling ?? 0) > 1 || steps(low.rising, high.rising ?? rises + 1) > 1) {
    const between = inside(low.z, high.z).map(placeAt);
    yield* look(between);
    const all = [low, ...between, high];
    // Once the interval holds 0 it does for every larger z.
    const first = all.findIndex((place) => !excludes(place));
    [low, high] = [all[first - 1] ?? low, all[first] ?? high];
  }

  // Each arm's next step, if it lies in the bracket; which of the two lets 0 in?
  const down = low.falling === high.falling ? Infinity : lastAtRank(falls, q, low.falling ?? 0);
  const up = low.rising === high.rising ? Infinity : lastAtRank(rises, q, low.rising ?? 0);
  const afterFirst = down < up ? { ...low, falling: high.falling } : { ...low, rising: high.rising };
  return normalTwoSided(excludes(afterFirst) ? Math.max(down, up) : Math.min(down, up));
}

function steps(from: number | null, to: number): number {
  return from === null ? 0 : Math.abs(from - to);
}

/** Numbers between two, evenly spread, rising. */
function inside(low: number, high: number): number[] {
  return Array.from({ length: POINTS }, (_, i) => low + ((high - low) * (i + 1)) / (POINTS + 1));
}

function kept(ranks: readonly (number | null)[]): number[] {
  return ranks.filter((rank) => rank !== null);
}

function valueAt(values: ReadonlyMap<number, bigint>, rank: number): bigint {
  const value = values.get(rank);
  if (value === undefined) throw new Error(`the value at rank ${rank} was never asked for`);
  return value;
}
