import { type Paths, pathsBelow, tailOf, tailWith } from "./look-paths.ts";
import { normalCritical, normalTwoSided } from "./normal.ts";
import { normalQuantile } from "./normal-quantile.ts";
import { root } from "./root.ts";
import { type Spending, spentASide } from "./spending.ts";

/** Looks at one test up to this one. */
export interface Looks {
  /** Shares of the planned size, rising, at least 0.01 apart, above 0; this look's is the last. */
  readonly shares: readonly number[];
  readonly spending: Spending;
  /** The last of all planned looks spends whatever is left, whatever its share. */
  readonly isLast: boolean;
}

/**
 * The boundaries +-c_1, …, +-c_k of looks at one test: without a difference, the chance to have reached the upper one by
 * look i is what the spending function allows by then, and the lower one likewise.
 *
 *   P(|Z_j| < c_j for j < i, Z_i >= c_i) = f(t_i) - f(t_(i-1))
 * c_k is the critical value of this look's repeated confidence interval D -+ c_k SE.
 * @param alpha in (0, 1), two-sided, for all looks together
 * @returns one a look; at most 38, beyond which the tail is no number
 *
 * Source: Lan and DeMets 1983, Biometrika 70, 659-663; Jennison and Turnbull 1989, JRSS B 51, 305-361; both in Jennison
 * and Turnbull 2000, ch. 7 and 9.
 */
export function lookBoundaries(looks: Looks, alpha: number): number[] {
  return boundariesWithPaths(looks, alpha).map(({ boundary }) => boundary);
}

interface Stage {
  readonly t: number;
  readonly boundary: number;
  readonly before: Paths | null;
}

function boundariesWithPaths({ shares, spending, isLast }: Looks, alpha: number): Stage[] {
  const stages: Stage[] = [];
  let before: Paths | null = null;
  let spent = 0;
  for (const [k, t] of shares.entries()) {
    const isEnd = isLast && k === shares.length - 1;
    const allowed = alphaSpent({ shares: [t], spending, isLast: isEnd }, alpha) / 2;
    const boundary = boundaryOf(before, t, allowed - spent);
    stages.push({ t, boundary, before });
    const next = shares[k + 1];
    if (next !== undefined) before = pathsBelow(before, t, boundary, next);
    spent = allowed;
  }
  return stages;
}

/** What of alpha, two-sided, may have been spent by this look. */
export function alphaSpent({ shares, spending, isLast }: Looks, alpha: number): number {
  return isLast ? alpha : 2 * spentASide(spending, alpha, Math.min(shares.at(-1) ?? 0, 1));
}

/** The critical value of this look. */
export function lookCritical(looks: Looks, alpha: number): number {
  const critical = lookBoundaries(looks, alpha).at(-1);
  if (critical === undefined) throw new Error("no look to take a critical value of");
  return critical;
}

/**
 * p of a contrast at this look, adjusted for the looks: the alpha at which its repeated confidence interval touches 0.
 * @param p two-sided, pointwise
 *
 * Source: Jennison and Turnbull 1989 (repeated p-values).
 */
export function pOfLooks(looks: Looks, p: number): number {
  if (p <= 0) return 0;
  if (p >= LARGEST_P) return 1;
  const z = normalCritical(p);
  const over = (logAlpha: number) => lookCritical(looks, Math.exp(logAlpha)) - z;
  const [low, high] = [Math.log(p), Math.log(LARGEST_P)];
  if (over(low) <= 0) return p;
  return over(high) >= 0 ? 1 : Math.exp(root(over, low, high));
}

/**
 * How many standard errors, those of the whole size, a true effect must measure for one of the looks to show it with this
 * power: what z(1 - alpha/2) + z(power) is for a single look. Only the boundary on the effect's side counts.
 * @param power in (0, 1)
 *
 * Source: Jennison and Turnbull 2000, 2.2 and 7.2: the maximum size over that of a single look is the square of the ratio.
 */
export function driftOfLooks(looks: Looks, alpha: number, power: number): number {
  const stages = boundariesWithPaths(looks, alpha);
  const last = stages.at(-1)?.boundary ?? 0;
  const found = (drift: number) =>
    stages.reduce((sum, { before, t, boundary }) => sum + tailWith(drift, before, t, boundary), 0);
  const end = stages.at(-1)?.t ?? 1;
  // The last look alone has the power at the upper end; all looks together have it earlier.
  return root((drift) => found(drift) - power, 0, (last + Math.max(normalQuantile(power), 0) + 1) / Math.sqrt(end));
}

/** From here on p is 1: no test is planned at such an alpha. */
const LARGEST_P = 0.99;

/** P(Z > 38) is the last that a double holds with some digits. */
const FARTHEST = 38;

function boundaryOf(before: Paths | null, t: number, spend: number): number {
  if (spend <= normalTwoSided(FARTHEST) / 2) return FARTHEST;
  // Without boundaries before, the tail were larger: so the boundary is no farther than this.
  const farthest = normalCritical(2 * spend);
  if (before === null) return farthest;
  const over = (c: number) => Math.log(tailOf(before, t, c) / spend);
  if (over(farthest) >= 0) return farthest;
  return over(0) <= 0 ? 0 : root(over, 0, farthest);
}
