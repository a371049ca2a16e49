import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { count, percent } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { analysedUnits, sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import type { Check, Figure } from "./types.ts";
import { groupShares, ofDifference, perVariant, units } from "./words.ts";

/**
 * Metrics that leave out units without a value, one part each, named like the metric: a caution where there are any, since
 * only some of those enrolled are compared; a failure where the share left out differs by arm.
 */
export function withoutRows(plan: Plan, reduction: Reduction): Check | null {
  const analysed = analysedUnits(reduction);
  if (sum(analysed) === 0) return null;
  const findings = plan.metrics.flatMap((metric, i) => {
    const leftOut = reduction.metrics[i]?.leftOut;
    return metric.withoutRows === "leave-out" && leftOut !== undefined ? [judge(plan, metric, leftOut, analysed)] : [];
  });
  return asCheck("without-rows", findings, {});
}

/** The same for all variants together, before the end: who has a value is an outcome. */
export function withoutRowsTogether(plan: Plan, reduction: Reduction): Check | null {
  const counted = sum(analysedUnits(reduction));
  if (counted === 0) return null;
  const findings = plan.metrics.flatMap((metric, i): Finding[] => {
    const leftOut = reduction.metrics[i]?.leftOut;
    if (metric.withoutRows !== "leave-out" || leftOut === undefined) return [];
    const share = sum(leftOut) / counted;
    if (sum(leftOut) === 0) return [nobody(plan, metric, 0)];
    return [
      {
        about: metric.name,
        result: "caution",
        strong: false,
        sentence: `${leftOutSentence(plan, metric, sum(leftOut), counted)}.`,
        remedy: onlyWithValue(plan, metric),
        figures: { units: sum(leftOut), share },
      },
    ];
  });
  return asCheck("without-rows", findings, {});
}

function leftOutSentence(plan: Plan, metric: Metric, n: number, counted: number): string {
  return `${metric.name}: ${units(plan, n)} of ${count(counted)} (${percent(n / counted)}) without a value ${n === 1 ? "is" : "are"} left out`;
}

function nobody({ unitCalled: { one } }: Plan, { name }: Metric, none: Figure): Finding {
  return passed(name, `${name}: no ${one} is left out, each has a value.`, { units: none, share: 0 });
}

function onlyWithValue({ unitCalled }: Plan, { name }: Metric): string {
  return `Read ${name} as a statement about ${unitCalled.many} with a value only: the variant may change who has one.`;
}

function judge(plan: Plan, metric: Metric, leftOut: ByVariant, analysed: ByVariant): Finding {
  const n = sum(leftOut);
  if (n === 0) return nobody(plan, metric, perVariant(plan, leftOut));
  const share = n / sum(analysed);
  const p = armsAlike(leftOut, analysed);
  const differ = p === null ? "pass" : byP(p);
  const left = leftOutSentence(plan, metric, n, sum(analysed));
  const byVariant = `: ${groupShares(plan, leftOut, analysed)}`;
  const chance = p === null || differ === "pass" ? "" : ` ${ofDifference(p)}`;
  return {
    about: metric.name,
    result: differ === "fail" ? "fail" : "caution",
    strong: false,
    sentence: `${left}${byVariant}.${chance}`,
    remedy:
      differ === "pass"
        ? onlyWithValue(plan, metric)
        : `The variant changes who has a value, so those compared are no longer alike. Choose a metric that counts every ${plan.unitCalled.one} (without-rows: 0), or find out why values are missing.`,
    figures: { units: perVariant(plan, leftOut), share, ...(p === null ? {} : { p }) },
  };
}
