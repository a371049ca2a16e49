import { type Expansion, expansionOf, type ShapedArm, tailsOf, withPooledShape } from "./expansion.ts";
import { normalUpperTail } from "./normal.ts";
import type { Absent } from "./types.ts";

/** How far a tail may be off its nominal chance, as a share of that (METHODS 3; ours). */
export const CAUTION_SHARE = 1 / 5;
const STRONG_SHARE = 1 / 2;

/** The chance of an interval that misses, on each side. */
export interface TailPair {
  /** P(T < -z): the whole interval then lies below the truth. */
  readonly lowerTail: number;
  /** P(T > z): the whole interval then lies above the truth. */
  readonly upperTail: number;
}

export type TailLevel = "near" | "caution" | "strong";

export interface Tails {
  /** Of each side, 1 - Phi(z). */
  readonly nominal: number;
  /** a, of the pair that is reported. */
  readonly skew: number;
  /** Both arms with their pooled shape. */
  readonly pooled: TailPair;
  /** Each arm with its own shape. */
  readonly own: TailPair;
  /** The worse of the two, the one of which a tail is further off. */
  readonly reported: TailPair;
  /** Off by more than a fifth of the nominal tail: caution; by more than half: strong. */
  readonly level: TailLevel;
  /** `own` and `pooled` differ by more than a fifth of the nominal tail. */
  readonly shapesDiffer: boolean;
  readonly expansions: { readonly pooled: Expansion; readonly own: Expansion };
}

/**
 * How often the normal interval of these two arms misses on each side, by the second-order Edgeworth expansion with the
 * arms' own moments.
 *
 * Sample moments of heavy-tailed data still grow with the sample, so that the true tails can be further off.
 * @param z the critical value of the interval
 * @returns `zero-variance` where neither arm varies
 *
 * Source: as `departures`; limits METHODS 3.
 */
export function tails(control: ShapedArm, variant: ShapedArm, z: number): Tails | Absent {
  if (!(control.variance + variant.variance > 0)) return { absent: "zero-variance" };
  const nominal = normalUpperTail(z);
  const expansions = {
    pooled: expansionOf(...withPooledShape(control, variant)),
    own: expansionOf(control, variant),
  };
  const pooled = tailsOf(z, expansions.pooled);
  const own = tailsOf(z, expansions.own);
  const isOwnWorse = gap(own, nominal) > gap(pooled, nominal);
  const reported = isOwnWorse ? own : pooled;
  const off = gap(reported, nominal) / nominal;
  const apart = Math.max(Math.abs(own.lowerTail - pooled.lowerTail), Math.abs(own.upperTail - pooled.upperTail));
  return {
    nominal,
    skew: (isOwnWorse ? expansions.own : expansions.pooled).skew,
    pooled,
    own,
    reported,
    level: off > STRONG_SHARE ? "strong" : off > CAUTION_SHARE ? "caution" : "near",
    shapesDiffer: apart > CAUTION_SHARE * nominal,
    expansions,
  };
}

function gap({ lowerTail, upperTail }: TailPair, nominal: number): number {
  return Math.max(Math.abs(lowerTail - nominal), Math.abs(upperTail - nominal));
}
