import { type CovariateArm, covariateArms, NANO } from "../cells/index.ts";
import type { Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { holm, balance as meansOf } from "../stats/index.ts";
import { alike, plural, quoted } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { asCheck, type Finding } from "./finding.ts";
import { sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import type { Check } from "./types.ts";
import { byChance } from "./words.ts";

/**
 * Were the groups alike before the test? Each covariate that the plan adjusts for, a metric's own past among them, is
 * compared between every variant and the control, with Holm's p over all of these comparisons. One part a covariate.
 *
 * Means by z, or Welch's t with under 200 units in an arm, corrected for skewness where that matters; shares by chi-square or Fisher's exact test.
 */
export function balance(plan: Plan, reduction: Reduction): Check | null {
  const all = covariates(plan, reduction).map((covariate) => ({ covariate, found: comparisons(plan, covariate) }));
  const tests = all.flatMap(({ found }) => found);
  const adjusted = holm(tests.map(({ p }) => p));
  const judged = new Map(tests.map((test, i) => [test, adjusted[i] ?? null]));
  const findings = all.flatMap(({ covariate, found }) => {
    const own = found.flatMap((test) => {
      const pAdjusted = judged.get(test) ?? null;
      return pAdjusted === null ? [] : [{ ...test, pAdjusted }];
    });
    return own.length === 0 ? [] : [judge(plan, covariate, own, adjusted.filter((p) => p !== null).length)];
  });
  return asCheck("balance", findings, {});
}

export interface Covariate {
  readonly about: string;
  /** Whether it is a 0 or 1 of each unit: a proportion's own past. */
  readonly isShare: boolean;
  readonly fromColumn: boolean;
  /** Per variant. */
  readonly arms: readonly CovariateArm[];
}

interface Comparison {
  readonly variant: number;
  readonly control: number;
  readonly means: readonly [control: number, variant: number];
  readonly p: number | null;
}

/** Each once, though several metrics adjust for it: over the most units that have a value. */
export function covariates(plan: Plan, { metrics }: Reduction): Covariate[] {
  const found = new Map<string, Covariate>();
  for (const [m, metric] of plan.metrics.entries()) {
    const cells = metrics[m];
    if (cells?.covariate == null) continue;
    const arms = covariateArms(cells.of, cells.covariate, plan.variants.length);
    const key = keyOf(metric);
    const held = found.get(key);
    if (held !== undefined && units(held.arms) >= units(arms)) continue;
    const isShare = metric.summary === "proportion" && metric.adjustFor?.kind === "days-before";
    found.set(key, { about: nameOf(metric), isShare, fromColumn: metric.adjustFor?.kind === "column", arms });
  }
  return [...found.values()];
}

function keyOf({ adjustFor, of, summary }: Metric): string {
  if (adjustFor?.kind !== "days-before") return `column ${adjustFor?.column}`;
  return JSON.stringify([adjustFor.days, of, summary === "proportion"]);
}

function nameOf({ name, adjustFor }: Metric): string {
  if (adjustFor?.kind !== "days-before") return `${quoted(adjustFor?.column ?? "")} at enrolment`;
  return `${name} in the ${plural(adjustFor.days, "day", "days")} before enrolment`;
}

const units = (arms: readonly CovariateArm[]) => sum(arms.map(({ covariate }) => covariate.n));

function comparisons(plan: Plan, { arms, isShare }: Covariate): Comparison[] {
  const c = plan.variants.findIndex(({ isControl }) => isControl);
  const control = arms[c]?.covariate;
  if (control === undefined) throw new Error(`no covariate of the control, variant ${c} of ${arms.length}`);
  return arms.flatMap(({ covariate }, variant) => {
    if (variant === c) return [];
    const found = meansOf(control, covariate, 1 - plan.decision.confidence);
    const means = [found.control.mean, found.variant.mean] as const;
    if (means[0] === null || means[1] === null) return [];
    const having = [control, covariate].map(({ total }) => Number((total ?? 0n) / NANO));
    const p = isShare ? armsAlike(having, [control.n, covariate.n]) : found.p;
    return [{ variant, control: c, means: [means[0], means[1]] as const, p }];
  });
}

type Judged = Comparison & { readonly pAdjusted: number };

function judge(plan: Plan, { about, fromColumn }: Covariate, tests: readonly Judged[], of: number): Finding {
  const [worst] = [...tests].sort((a, b) => a.pAdjusted - b.pAdjusted);
  if (worst === undefined) throw new Error(`no comparison of ${about}`);
  const result = byP(worst.pAdjusted);
  const name = (variant: number) => quoted(plan.variants[variant]?.name ?? "");
  const [ofControl, ofVariant] = alike([...worst.means]);
  const means = `${about}: mean ${ofControl} with ${name(worst.control)} and ${ofVariant} with ${name(worst.variant)}`;
  return {
    about,
    result,
    strong: false,
    sentence:
      result === "pass"
        ? `${means}, a difference that chance can explain.`
        : `${means}. Before the test the groups should be alike. ${byChance("so large a difference", worst.pAdjusted)}`,
    remedy: result === "pass" ? "" : remedy(plan, fromColumn),
    figures: {
      comparisons: of,
      variants: tests.map(({ variant, means: [control, treated], p, pAdjusted }) => ({
        variant: plan.variants[variant]?.name ?? "",
        meanOfControl: control,
        meanOfVariant: treated,
        p: p ?? 1,
        pAdjusted,
      })),
    },
  };
}

function remedy({ unitCalled }: Plan, fromColumn: boolean): string {
  const asks = `Find out how a ${unitCalled.one} is given a variant, and whether some were enrolled late or twice`;
  return fromColumn
    ? `${asks}. The value is the one on the enrolling row: if it is written after the variant was shown, the variant can have changed it.`
    : `${asks}: nothing that came before enrolment can come from the variant.`;
}
