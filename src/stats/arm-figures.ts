import { fraction, NANO, nearestNumber } from "../cells/index.ts";
import type { Arm, PowerSums } from "../cells/types.ts";
import { isAbsent } from "./absent.ts";
import { level } from "./level.ts";
import { type Moments, moments } from "./moments.ts";
import { scoreNoise } from "./ratio-of-totals.ts";
import { shareMoments } from "./share.ts";
import type { ArmFigures } from "./types.ts";

const NOTHING: Moments = { mean: null, variance: null, skewness: null, kurtosis: null };

/**
 * An arm as the report shows it. A ratio's mean is the ratio, its spread and ends those of the score, its total the
 * numerator's; a quantile's mean is the quantile, without spread and total (DESIGN 7); an adjusted arm is that of its
 * adjusted values, without total. What does not exist is null: everything but units and total without units, the spread of
 * one unit or of units that are all alike.
 */
export function armFigures(arm: Arm): ArmFigures {
  const found = level(arm);
  const spread = shape(arm);
  const sums = arm.kind === "ratio" ? arm.numerator : arm.sums;
  const ends: Pick<PowerSums, "smallest" | "largest"> | null = arm.kind === "ratio" ? arm.score : arm.sums;
  return {
    units: sums.n,
    mean: isAbsent(found) ? null : found.value,
    sd: spread.variance === null ? null : Math.sqrt(spread.variance),
    skewness: spread.skewness,
    kurtosis: spread.kurtosis,
    total: arm.kind === "quantile" || sums.total === null ? null : nearestNumber(fraction(sums.total, NANO)),
    smallest: ends?.smallest ?? null,
    largest: ends?.largest ?? null,
  };
}

function shape(arm: Arm): Moments {
  switch (arm.kind) {
    case "mean":
      return moments(arm.sums);
    case "proportion":
      return shareMoments(arm.sums);
    case "ratio":
      return arm.score === null ? NOTHING : moments(arm.score, scoreNoise(arm));
    case "quantile":
      return NOTHING;
    case "adjusted":
      return moments(arm.sums, arm.noise);
    default:
      return unknown(arm);
  }
}

function unknown(arm: never): never {
  throw new Error(`no figures of the arm ${String(arm)}`);
}
