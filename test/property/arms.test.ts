import { describe, expect, it } from "vitest";
import type { Metric, Plan } from "../../src/plan/types.ts";
import { quantile } from "../oracle/metrics.ts";
import { momentsOf, quotient, scoresOf } from "../oracle/moments.ts";
import { ascending } from "../oracle/number.ts";
import { oracle } from "../oracle/oracle.ts";
import { planFromYaml } from "../oracle/plan.ts";
import { randomCase, rawFiles, rawLists, writeCase } from "../oracle/random/case.ts";
import { diceOf } from "../oracle/random/dice.ts";
import { drawForm } from "../oracle/random/write.ts";
import type { OracleMetric } from "../oracle/types.ts";
import { runReport } from "./run.ts";
import { inFolder, twoAtATime } from "./temporary.ts";

const SEEDS = Array.from({ length: 100 }, (_, at) => 1_000 + at);
const ONE = 10n ** 9n;

interface Arm {
  readonly units: number;
  readonly mean: number | null;
  readonly sd: number | null;
  readonly skewness: number | null;
  readonly kurtosis: number | null;
  readonly total: number | null;
  readonly smallest: number | null;
  readonly largest: number | null;
}

describe("the arms of the report", () => {
  it("hold the moments by definition, to the digits that the cells can keep", { timeout: 300_000 }, async () => {
    const wrong = await twoAtATime(SEEDS, (seed) =>
      inFolder(async (folder) => {
        const drawn = randomCase(seed);
        const { path, text } = writeCase(folder, drawn, drawForm(diceOf(seed)));
        const plan = planFromYaml(text);
        const expected = oracle(plan, rawFiles(drawn), rawLists(drawn));
        const effects = JSON.parse((await runReport(path)).effects) as Effect[];
        return effects.flatMap((effect) =>
          wrongArms(plan, expected.metrics, effect).map((line) => `seed ${seed}, ${effect.metric}: ${line}`),
        );
      }),
    );
    expect(wrong.flat()).toEqual([]);
  });
});

interface Effect {
  readonly metric: string;
  readonly variant: string;
  readonly control: string;
  readonly arms: { readonly control: Arm; readonly variant: Arm };
}

function wrongArms(plan: Plan, metrics: readonly OracleMetric[], effect: Effect): string[] {
  const metric = plan.metrics.find(({ name }) => name === effect.metric);
  const values = metrics.find((found) => found.metric === effect.metric);
  if (metric === undefined || values === undefined) return ["is not in the plan"];
  return (["control", "variant"] as const).flatMap((side) => {
    const at = plan.variants.findIndex(({ name }) => name === effect[side]);
    return wrongArm(metric, values, at, effect.arms[side]).map((line) => `${side} ${line}`);
  });
}

/**
 * Cells are kept relative to a scale that all arms share, S_k to about 2^-113 of its k-th power: of an arm that is narrow
 * beside the widest value of all, the standardised moments keep fewer digits, or none (then null).
 */
function wrongArm(metric: Metric, oracleMetric: OracleMetric, variant: number, arm: Arm): string[] {
  const all = oracleMetric.values;
  const pairs = all.filter((value) => value.variant === variant);
  if (arm.units !== pairs.length) return [`has ${arm.units} units, exact ${pairs.length}`];
  if (pairs.length === 0) return [];
  const ofs = pairs.map(({ of }) => of);
  const total = quotient(
    ofs.reduce((sum, x) => sum + x, 0n),
    ONE,
  );
  if (metric.quantile !== null) return wrongQuantile(metric.quantile, ofs, arm);
  const scores = metric.per === null ? { values: ofs, one: ONE } : scoresOf(pairs);
  if (scores === null) return near("mean", arm.mean, null, 0);
  const moments = momentsOf(scores.values, scores.one);
  if (moments === null) return [];
  const xs = scores.values.map((x) => quotient(x, scores.one));
  const widest = widestOf(metric, oracleMetric, xs);
  const sd = moments.variance === null ? null : Math.sqrt(moments.variance);
  const narrow = sd === null || sd === 0 ? 0 : widest / sd;
  // Nine places of widest / sd: from there on a moment may be null, and a variance that is 0 is.
  const mayBeNull = sd === null || sd === 0 || narrow > 1e9;
  return [
    ...near("mean", arm.mean, moments.mean, 1e-11 * Math.abs(moments.mean) + 1e-14 * widest),
    ...near("total", arm.total, total, 1e-11 * Math.abs(total)),
    ...near("smallest", arm.smallest, Math.min(...xs), 1e-11 * widest),
    ...near("largest", arm.largest, Math.max(...xs), 1e-11 * widest),
    ...near("sd", arm.sd, sd, (sd ?? 0) * 1e-11 + widest * 1e-12, mayBeNull),
    ...near("skewness", arm.skewness, moments.g1, 1e-10 + 1e-14 * narrow ** 3, mayBeNull),
    ...near("kurtosis", arm.kurtosis, moments.g2, 1e-10 + 1e-14 * narrow ** 4, mayBeNull),
  ];
}

/** A quantile's mean is the quantile; it has no spread and no total. */
function wrongQuantile(q: string, values: readonly bigint[], arm: Arm): string[] {
  const sorted = [...values].sort(ascending).map((x) => quotient(x, ONE));
  // The report has twelve digits.
  const same = (what: string, found: number | null, exact: number) => near(what, found, exact, 1e-11 * Math.abs(exact));
  return [
    ...same("mean", arm.mean, quotient(quantile(values, q), ONE)),
    ...same("smallest", arm.smallest, sorted[0] ?? 0),
    ...same("largest", arm.largest, sorted.at(-1) ?? 0),
    ...(["total", "sd", "skewness", "kurtosis"] as const).flatMap((what) => near(what, arm[what], null, 0)),
  ];
}

/** The largest size among what went into the cells: all arms' values, or the two terms of a score. */
function widestOf(metric: Metric, { values }: OracleMetric, xs: readonly number[]): number {
  const sizes = metric.per === null ? values.map(({ of }) => Math.abs(Number(of)) / 1e9) : xs.map(Math.abs);
  return Math.max(...sizes, ...xs.map(Math.abs));
}

function near(
  what: string,
  found: number | null,
  exact: number | null,
  tolerance: number,
  mayBeNull = false,
): string[] {
  // A central moment smaller than its rounding bound is null (DESIGN 5): so is the skewness of a symmetric arm.
  if (found === null)
    return exact === null || mayBeNull || Math.abs(exact) <= tolerance ? [] : [`${what} is null, exact ${exact}`];
  if (exact === null) return [`${what} is ${found}, but there is none`];
  return Math.abs(found - exact) <= tolerance ? [] : [`${what} is ${found}, exact ${exact}`];
}
