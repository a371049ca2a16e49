import { readFile, writeFile } from "node:fs/promises";
import path from "node:path";
import { describe, expect, it } from "vitest";
import { adjustedPairs, type Pair } from "../../src/decision/index.ts";
import { withReduction } from "../../src/engine/index.ts";
import { loadPlan } from "../../src/plan/index.ts";
import type { Plan } from "../../src/plan/types.ts";
import { armFigures, isAbsent } from "../../src/stats/index.ts";
import type { ArmFigures } from "../../src/stats/types.ts";
import { adjustedOf } from "../oracle/adjusted.ts";
import { momentsOf, quotient } from "../oracle/moments.ts";
import { oracle } from "../oracle/oracle.ts";
import { planFromYaml } from "../oracle/plan.ts";
import { randomCase, rawFiles, rawLists, writeCase } from "../oracle/random/case.ts";
import { diceOf } from "../oracle/random/dice.ts";
import { drawForm } from "../oracle/random/write.ts";
import { readLog } from "../oracle/read.ts";
import type { OracleMetric, UnitValue } from "../oracle/types.ts";
import { randomJourneys } from "./randomJourneys.ts";
import { runReport } from "./run.ts";
import { inFolder, twoAtATime } from "./temporary.ts";

const SEEDS = Array.from({ length: Number(process.env.SEEDS ?? 60) }, (_, at) => 3_000 + at);
const JOURNEYS = Array.from({ length: 12 }, (_, at) => at);
const MINUTES = 60_000;

describe("adjusted contrasts", () => {
  it("have the slope, means and shapes by definition on small logs, however odd", {
    timeout: 10 * MINUTES,
  }, async () => {
    const wrong = await twoAtATime(SEEDS, (seed) =>
      inFolder(async (folder) => {
        const drawn = randomCase(seed);
        const { path: at, text } = writeCase(folder, drawn, drawForm(diceOf(seed)));
        const plan = planFromYaml(text);
        if (plan.metrics.every(({ adjustFor }) => adjustFor === null)) return [];
        return wrongPairs(plan, oracle(plan, rawFiles(drawn), rawLists(drawn)).metrics, await pairsOf(at)).lines.map(
          (line) => `seed ${seed}, ${line}`,
        );
      }),
    );
    expect(wrong.flat()).toEqual([]);
  });

  it("have them on some hundred units, days before and a column, and so does the report", {
    timeout: 10 * MINUTES,
  }, async () => {
    const wrong = await twoAtATime(JOURNEYS, (seed) =>
      inFolder(async (folder) => {
        const { plan: text, csv } = randomJourneys(seed);
        const at = path.join(folder, "plan.yaml");
        await writeFile(at, text);
        await writeFile(path.join(folder, "log.csv"), csv);
        const plan = planFromYaml(text);
        const { metrics } = oracle(plan, readLog(plan, folder), new Map());
        const { lines, compared } = wrongPairs(plan, metrics, await pairsOf(at));
        // Every metric with every variant, and on the first of three variants the last two with each other.
        const others = plan.variants.length - 1;
        const short = compared === 6 * others + (others === 2 ? 1 : 0) ? [] : [`${compared} pairs compared`];
        const effects = JSON.parse((await runReport(at)).effects) as EffectJson[];
        return [...lines, ...short, ...effects.flatMap((effect) => wrongEffect(plan, metrics, effect))].map(
          (line) => `journeys ${seed}, ${line}`,
        );
      }),
    );
    expect(wrong.flat()).toEqual([]);
  });
});

function wrongPairs(plan: Plan, metrics: readonly OracleMetric[], pairs: readonly Pair[]) {
  const found = pairs.map((pair) => ({ pair, ...wrongPair(plan, metrics, pair) }));
  return {
    compared: found.filter(({ both }) => both).length,
    lines: found.flatMap(({ pair, lines }) =>
      lines.map((line) => `metric ${pair.metric}, ${pair.control}/${pair.variant}: ${line}`),
    ),
  };
}

/** The difference of the report from the values by definition, its interval by z, or Welch's t for small means. */
function wrongEffect(plan: Plan, metrics: readonly OracleMetric[], effect: EffectJson): string[] {
  const values = metrics.find(({ metric }) => metric === effect.metric)?.values ?? [];
  const arm = (name: string) => values.filter(({ variant }) => plan.variants[variant]?.name === name);
  const [c, t] = [arm(effect.control), arm(effect.variant)];
  const exact = adjustedOf(c, t);
  if (exact === null || effect.adjusted === null) return [`${effect.metric}: not adjusted`];
  const { difference, relative, theta, varianceReduction } = effect.adjusted;
  const [mc, mt] = [momentsOf(exact.control, exact.one), momentsOf(exact.variant, exact.one)];
  const [pc, pt] = [c, t].map((units) =>
    momentsOf(
      units.map(({ of }) => of),
      ONE,
    ),
  );
  if (!mc?.variance || !mt?.variance || !pc?.variance || !pt?.variance) return [`${effect.metric}: no spread`];
  const [vc, vt] = [mc.variance / mc.n, mt.variance / mt.n];
  const isSmall = effect.summary === "mean" && Math.min(mc.n, mt.n) < 200;
  const estimate = mt.mean - mc.mean;
  const se = Math.sqrt(vc + vt);
  const isOneOf = plan.variants.length === 2 || effect.role === "secondary";
  const half = 1.959963984540054 * se;
  return [
    ...near("theta", theta, quotient(exact.theta[0], exact.theta[1]), 1e-9 * Math.abs(theta)),
    ...near("estimate", difference.estimate, estimate, 1e-9 * (Math.abs(mc.mean) + Math.abs(mt.mean))),
    ...near("standard error", difference.standardError, se, 1e-9 * se),
    ...near("variance saved", varianceReduction, 1 - se ** 2 / (pc.variance / pc.n + pt.variance / pt.n), 1e-9),
    ...near("relative", relative?.estimate ?? null, mt.mean / mc.mean - 1, 1e-9),
    ...(difference.method === (isSmall ? "welch" : "normal") ? [] : [`the method is ${difference.method}`]),
    ...(isOneOf && !isSmall ? near("low", difference.low, estimate - half, 1e-8 * (se + Math.abs(estimate))) : []),
  ].map((line) => `${effect.metric}, ${effect.variant}: ${line}`);
}

interface EffectJson {
  readonly metric: string;
  readonly role: string;
  readonly summary: string;
  readonly variant: string;
  readonly control: string;
  readonly adjusted: {
    readonly difference: {
      readonly estimate: number | null;
      readonly standardError: number | null;
      readonly low: number | null;
      readonly method: string;
    };
    readonly relative: { readonly estimate: number } | null;
    readonly theta: number;
    readonly varianceReduction: number;
  } | null;
}

const ONE = 10n ** 9n;

async function pairsOf(planPath: string): Promise<Pair[]> {
  const loaded = loadPlan(await readFile(planPath, "utf8"));
  if (!("plan" in loaded)) throw new Error("a random plan has problems");
  const found = await withReduction(
    loaded.plan,
    loaded.source,
    path.dirname(planPath),
    {},
    async (plan, reduction, session) => ({
      pairs: await adjustedPairs(plan, reduction, session.adjusted),
    }),
  );
  if ("problems" in found) throw new Error("a random log has problems");
  return found.pairs;
}

function wrongPair(plan: Plan, metrics: readonly OracleMetric[], pair: Pair): { lines: string[]; both: boolean } {
  const values = metrics.find(({ metric }) => metric === plan.metrics[pair.metric]?.name)?.values ?? [];
  const [c, t] = [pair.control, pair.variant].map((at) => values.filter(({ variant }) => variant === at));
  if (c === undefined || t === undefined) return { lines: ["is not in the plan"], both: false };
  const exact = adjustedOf(c, t);
  if (isAbsent(pair.found)) {
    const mayLack = exact === null || isHard(values) || isFlat(exact.control) || isFlat(exact.variant);
    return { lines: mayLack ? [] : [`there is none (${pair.found.absent})`], both: false };
  }
  if (exact === null) return { lines: ["there is one, but x does not vary"], both: false };
  // An outlier of 18 digits sets the scale, and takes from the joint sums what the others have.
  if (isHard(values)) return { lines: [], both: false };
  const theta = quotient(exact.theta[0], exact.theta[1]);
  const { by, control, variant } = pair.found;
  const reach = widest(values.map(({ of }) => of)) + Math.abs(theta) * widest(values.map(({ x }) => x ?? 0n));
  return {
    both: true,
    lines: [
      ...near("theta", by.theta, theta, 1e-9 * Math.abs(theta) + 1e-12),
      ...wrongArm("control", armFigures(control.arm), exact.control, exact.one, reach),
      ...wrongArm("variant", armFigures(variant.arm), exact.variant, exact.one, reach),
    ],
  };
}

function wrongArm(side: string, found: ArmFigures, values: readonly bigint[], one: bigint, reach: number): string[] {
  const exact = momentsOf(values, one);
  if (exact === null) return [`${side} has no units`];
  const sd = exact.variance === null ? null : Math.sqrt(exact.variance);
  const ends = values.map((value) => quotient(value, one));
  // Values are doubles, off by 2^-50 of their terms at most: an arm without spread beyond that has none to show.
  const mayBeNull = sd === null || sd < reach * 1e-7;
  const narrow = sd === null || sd === 0 ? 0 : reach / sd;
  return [
    ...(found.units === values.length ? [] : [`has ${found.units} units, exact ${values.length}`]),
    ...near("mean", found.mean, exact.mean, 1e-12 * reach),
    ...near("sd", found.sd, sd, 1e-9 * (sd ?? 0) + 1e-12 * reach, mayBeNull),
    ...near("skewness", found.skewness, exact.g1, 1e-9 + 1e-14 * narrow ** 3, mayBeNull),
    ...near("kurtosis", found.kurtosis, exact.g2, 1e-9 + 1e-14 * narrow ** 4, mayBeNull),
    ...near("smallest", found.smallest, Math.min(...ends), 1e-12 * reach),
    ...near("largest", found.largest, Math.max(...ends), 1e-12 * reach),
  ].map((line) => `${side} ${line}`);
}

/** Whether some value is so far from the others that sums relative to it keep few digits of theirs. */
function isHard(values: readonly UnitValue[]): boolean {
  return [values.map(({ of }) => of), values.flatMap(({ x }) => (x === null ? [] : [x]))].some((xs) => {
    const sizes = xs.map((x) => Math.abs(Number(x)) / 1e9);
    return Math.max(0, ...sizes) > 1e8;
  });
}

const isFlat = (values: readonly bigint[]) => values.every((value) => value === values[0]);

const widest = (values: readonly bigint[]) => Math.max(0, ...values.map((x) => Math.abs(Number(x)) / 1e9));

function near(
  what: string,
  found: number | null,
  exact: number | null,
  tolerance: number,
  mayBeNull = false,
): string[] {
  if (found === null)
    return exact === null || mayBeNull || Math.abs(exact) <= tolerance ? [] : [`${what} is null, exact ${exact}`];
  if (exact === null) return mayBeNull ? [] : [`${what} is ${found}, but there is none`];
  return Math.abs(found - exact) <= tolerance ? [] : [`${what} is ${found}, exact ${exact}`];
}
