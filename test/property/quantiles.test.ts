import { cpSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import type { Plan } from "../../src/plan/types.ts";
import { armValues, intervalsAtOnce } from "../oracle/metrics.ts";
import { oracle } from "../oracle/oracle.ts";
import { planFromYaml } from "../oracle/plan.ts";
import { contrastOfQuantiles, type OracleQuantileContrast, zFor } from "../oracle/quantile.ts";
import { randomCase, rawFiles, rawLists, writeCase } from "../oracle/random/case.ts";
import { diceOf } from "../oracle/random/dice.ts";
import { drawForm } from "../oracle/random/write.ts";
import type { OracleMetric } from "../oracle/types.ts";
import { runReport } from "./run.ts";
import { inFolder, twoAtATime } from "./temporary.ts";

// Logs with a quantile: those with many units, so that an arm has ranks for both ends, and a few of the others.
const isLarge = (seed: number) => randomCase(seed).sources.reduce((sum, { rows }) => sum + rows.length, 0) > 80;
const hasQuantile = (seed: number) =>
  planFromYaml(randomCase(seed).plan(["", ""])).metrics.some(({ quantile }) => quantile !== null);
const seedsFrom = (first: number, length: number) => Array.from({ length }, (_, at) => first + at).filter(hasQuantile);
const SEEDS = [...seedsFrom(3_000, 900).filter(isLarge), ...seedsFrom(4_000, 60)];

interface Effect {
  readonly metric: string;
  readonly variant: string;
  readonly control: string;
  readonly difference: {
    readonly estimate: number | null;
    readonly standardError: number | null;
    readonly low: number | null;
    readonly high: number | null;
    readonly z: number | null;
    readonly p: number | null;
    readonly pAdjusted: number | null;
    readonly method: string;
  };
  readonly relative: { readonly estimate: number; readonly low: number | null; readonly high: number | null } | null;
}

describe("the quantiles of the report", () => {
  it("have the intervals, the ratio and the p by definition", { timeout: 600_000 }, async () => {
    const seen = { whole: 0, ratio: 0, p: 0 };
    const wrong = await twoAtATime(SEEDS, (seed) =>
      inFolder(async (folder) => {
        const drawn = randomCase(seed);
        const { path, text } = writeCase(folder, drawn, drawForm(diceOf(seed)));
        const plan = planFromYaml(text);
        const { metrics } = oracle(plan, rawFiles(drawn), rawLists(drawn));
        const effects = JSON.parse((await runReport(path)).effects) as Effect[];
        return effects.flatMap((effect) => {
          const expected = expectedOf(plan, metrics, effect);
          if (expected === undefined) return [];
          if (expected !== null && expected.low !== null && expected.high !== null) {
            seen.whole++;
            if (expected.relative !== null) seen.ratio++;
            if (expected.p !== null && expected.p < 1) seen.p++;
          }
          return wrongEffect(plan, expected, effect).map((line) => `seed ${seed}, ${effect.metric}: ${line}`);
        });
      }),
    );
    expect(wrong.flat()).toEqual([]);
    // Else the agreement says little.
    expect(seen.whole).toBeGreaterThan(20);
    expect(seen.ratio).toBeGreaterThan(5);
    expect(seen.p).toBeGreaterThan(5);
  });
});

describe("the quantiles of the case by hand", () => {
  // test/engine/cases/quantiles-of-whole-numbers. Longest page: Q 10 with 5 to 14, and 20 with 17 to 32. D = 10, low = 10 -
  // sqrt(3^2 + 4^2) = 5, high = 10 + sqrt(12^2 + 5^2) = 23. Ranks move at z = 1/2, 1, 3/2, ... At 5/2 it is still 17 and 14;
  // beyond, 12 and 16: 8^2 + 6^2 = 10^2 touches 0. So p = P(|Z| >= 5/2) = 0.01241933065 (R 4.2.2: 2 * pnorm(-2.5)).
  // Ratio (Donner and Zou 2012, eq. 9): (200 - sqrt(40000 - 17 14 23 6)) / (14 6), (200 + sqrt(40000 - 32 5 8 15)) / (5 15).
  it("have interval, ratio and p as worked out", async () => {
    const found = await inFolder(async (folder) => {
      cpSync(new URL("../engine/cases/quantiles-of-whole-numbers", import.meta.url), folder, { recursive: true });
      return JSON.parse((await runReport(join(folder, "plan.yaml"))).effects) as Effect[];
    });
    const [longest, pages] = found;
    expect(longest?.difference).toMatchObject({ estimate: 10, low: 5, high: 23, method: "quantile" });
    expect(longest?.difference.p).toBeCloseTo(0.01241933065, 11);
    expect(longest?.relative?.estimate).toBe(1);
    expect(longest?.relative?.low).toBeCloseTo((200 - Math.sqrt(7156)) / 84 - 1, 11);
    expect(longest?.relative?.high).toBeCloseTo((200 + Math.sqrt(20800)) / 75 - 1, 11);
    // One end of each arm lies at a rank that it does not have, so both ends of the difference are open.
    expect(pages?.difference).toMatchObject({ estimate: 1, low: null, high: null });
    // The control's 16th is 1 and its 17th 2, which touches 0: up to z h = 16 - 15.3, h^2 = 1.53, it does not.
    expect(pages?.difference.p).toBeCloseTo(0.571450572705, 11); // R 4.2.2: 2 * pnorm(-0.7 / sqrt(1.53))
  });
});

/** Undefined where the effect is of no quantile, null where an arm has no value. */
function expectedOf(
  plan: Plan,
  metrics: readonly OracleMetric[],
  effect: Effect,
): OracleQuantileContrast | null | undefined {
  const metric = plan.metrics.find(({ name }) => name === effect.metric);
  const found = metrics.find((candidate) => candidate.metric === effect.metric);
  if (metric === undefined || found === undefined || metric.quantile === null) return undefined;
  const values = (name: string) =>
    armValues(
      found.values,
      plan.variants.findIndex((variant) => variant.name === name),
    );
  const z = zFor(intervalsAtOnce(plan, metric));
  return contrastOfQuantiles(values(effect.control), values(effect.variant), metric.quantile, z);
}

function wrongEffect(plan: Plan, expected: OracleQuantileContrast | null, { metric, ...found }: Effect): string[] {
  const { difference, relative } = found;
  const role = plan.metrics.find(({ name }) => name === metric)?.role;
  const variants = plan.variants.length - 1;
  const p = expected?.p ?? null;
  return [
    ...(difference.method === "quantile" ? [] : [`the method is ${difference.method}`]),
    ...near("standardError", difference.standardError, null),
    ...near("z", difference.z, null),
    ...near("estimate", difference.estimate, expected?.estimate ?? null),
    ...near("low", difference.low, expected?.low ?? null, expected?.estimate),
    ...near("high", difference.high, expected?.high ?? null, expected?.estimate),
    ...near("p", difference.p, p),
    ...(role === "secondary"
      ? []
      : near("pAdjusted", difference.pAdjusted, p === null ? null : Math.min(1, p * variants))),
    ...(expected?.relative == null
      ? near("relative", relative?.estimate ?? null, null)
      : (["estimate", "low", "high"] as const).flatMap((part) =>
          near(`relative ${part}`, relative?.[part] ?? null, expected.relative?.[part] ?? null, 1),
        )),
  ];
}

/** To ten digits, of the larger of the figure and what it was taken from. */
function near(what: string, found: number | null, expected: number | null, beside = 0): string[] {
  if (found === null || expected === null) {
    return found === expected ? [] : [`${what} is ${found}, expected ${expected}`];
  }
  const allowed = 1e-10 * Math.max(Math.abs(expected), Math.abs(beside));
  return Math.abs(found - expected) <= allowed ? [] : [`${what} is ${found}, expected ${expected}`];
}
