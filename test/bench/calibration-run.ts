import { isAbsent } from "../../src/stats/absent.ts";
import { armsAlike } from "../../src/stats/arms-alike.ts";
import { bootstrapT } from "../../src/stats/bootstrap-t.ts";
import { seedOf } from "../../src/stats/generator.ts";
import { normalCritical } from "../../src/stats/normal.ts";
import { randomisation } from "../../src/stats/randomisation.ts";
import { isNotDrawn } from "../../src/stats/resampling.ts";
import { skewCorrected } from "../../src/stats/skew-corrected.ts";
import { tCritical } from "../../src/stats/student-t.ts";
import { tails } from "../../src/stats/tails.ts";
import { type SimulatedArm, simulatedArm } from "./arms.ts";
import type { Case } from "./calibration-cases.ts";
import type { Distribution } from "./samplers.ts";

const ALPHA = 0.05;
const Z = normalCritical(ALPHA);
const BUCKETS = 1024;
const DRAWS = 1000;

/** Experiments in which an interval lies wholly below the truth, and wholly above it. */
export interface Misses {
  below: number;
  above: number;
}

export interface Tally {
  runs: number;
  /** Runs in which the bootstrap-t interval was drawn and shown. */
  bootstrapped: number;
  readonly plain: Misses;
  readonly welch: Misses;
  readonly corrected: Misses;
  readonly bootstrap: Misses;
  /** Sums over the runs of the tails that the arms' own moments predict for the plain interval. */
  readonly predicted: Misses;
}

export function emptyTally(): Tally {
  const none = () => ({ below: 0, above: 0 });
  return {
    runs: 0,
    bootstrapped: 0,
    plain: none(),
    welch: none(),
    corrected: none(),
    bootstrap: none(),
    predicted: none(),
  };
}

/**
 * Some experiments of one case.
 * @param numbers what the units are drawn from: the case and the chunk, so that the table repeats however work is shared
 * @param bootstrapped of these runs
 */
export function simulate(of: Case, numbers: readonly number[], runs: number, bootstrapped: number): Tally {
  const tally = emptyTally();
  const units = [of.control, of.variant].map((data, arm) => data.sampler(seedOf("calibration", [[...numbers, arm]])));
  const [control, variant] = units as [ReturnType<Distribution["sampler"]>, ReturnType<Distribution["sampler"]>];
  const truth = of.variant.mean - of.control.mean;
  for (let run = 0; run < runs; run++) {
    const c = simulatedArm(control(of.units[0]), BUCKETS);
    const t = simulatedArm(variant(of.units[1]), BUCKETS);
    tally.runs++;
    countIntervals(tally, c, t, truth);
    if (run < bootstrapped) countBootstrap(tally, c, t, truth, [...numbers, run]);
  }
  return tally;
}

function countIntervals(tally: Tally, c: SimulatedArm, t: SimulatedArm, truth: number): void {
  const [estimate, variance] = [t.mean - c.mean, t.variance + c.variance];
  const standardError = Math.sqrt(variance);
  count(tally.plain, estimate - Z * standardError, estimate + Z * standardError, truth);

  const df = variance ** 2 / (t.variance ** 2 / (t.n - 1) + c.variance ** 2 / (c.n - 1));
  const ofT = variance > 0 ? tCritical(ALPHA, df) : Z;
  count(tally.welch, estimate - ofT * standardError, estimate + ofT * standardError, truth);

  const corrected = skewCorrected(
    c,
    t,
    estimate,
    Z,
    armsAlike({ kind: "mean", control: c.buckets, variant: t.buckets }),
  );
  if (isAbsent(corrected)) count(tally.corrected, estimate, estimate, truth);
  else count(tally.corrected, corrected.low, corrected.high, truth);

  const predicted = tails(c, t, Z);
  if (isAbsent(predicted)) return;
  tally.predicted.below += predicted.reported.lowerTail;
  tally.predicted.above += predicted.reported.upperTail;
}

function countBootstrap(tally: Tally, c: SimulatedArm, t: SimulatedArm, truth: number, numbers: number[]): void {
  const [estimate, standardError] = [t.mean - c.mean, Math.sqrt(t.variance + c.variance)];
  const cells = { kind: "mean", control: c.buckets, variant: t.buckets } as const;
  const seed = seedOf("bootstrap", [numbers]);
  const found = bootstrapT(cells, { estimate, standardError }, ALPHA, DRAWS, seed, null, false);
  if (isNotDrawn(found)) return;
  tally.bootstrapped++;
  count(tally.bootstrap, found.low, found.high, truth);
}

function count(misses: Misses, low: number, high: number, truth: number): void {
  if (high < truth) misses.below++;
  if (low > truth) misses.above++;
}

/** p-values of the randomisation test in experiments without any difference. */
export function randomisationPs(
  data: Distribution,
  units: Case["units"],
  runs: number,
  numbers: readonly number[],
): number[] {
  const [control, variant] = [0, 1].map((arm) => data.sampler(seedOf("calibration", [[...numbers, arm]])));
  return Array.from({ length: runs }, (_, run) => {
    const c = simulatedArm(control?.(units[0]) ?? new Float64Array(), BUCKETS);
    const t = simulatedArm(variant?.(units[1]) ?? new Float64Array(), BUCKETS);
    const cells = { kind: "mean", control: c.buckets, variant: t.buckets } as const;
    const found = randomisation(cells, DRAWS - 1, seedOf("randomisation", [[...numbers, run]]), null);
    if (isNotDrawn(found)) throw new Error(`not drawn: ${found.notDrawn}`);
    return found.p;
  });
}
