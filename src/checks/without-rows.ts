import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { count, percent } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { asCheck, type Finding } from "./finding.ts";
import { analysedUnits, sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import type { Check } from "./types.ts";
import { groupShares, ofDifference, perVariant, units } from "./words.ts";

/**
 * Metrics that leave out units without a value, one part each, named like the metric: a caution in any case, since only
 * some of those enrolled are compared; a failure where the share left out differs by arm.
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

function judge(plan: Plan, metric: Metric, leftOut: ByVariant, analysed: ByVariant): Finding {
  const n = sum(leftOut);
  const share = n / sum(analysed);
  const p = armsAlike(leftOut, analysed);
  const differ = p === null ? "pass" : byP(p);
  const { many } = plan.unitCalled;
  const left = `${metric.name}: ${units(plan, n)} of ${count(sum(analysed))} (${percent(share)}) without a value ${n === 1 ? "is" : "are"} left out`;
  const byVariant = n === 0 ? "" : `: ${groupShares(plan, leftOut, analysed)}`;
  const chance = p === null || differ === "pass" ? "" : ` ${ofDifference(p)}`;
  return {
    about: metric.name,
    result: differ === "fail" ? "fail" : "caution",
    strong: false,
    sentence: `${left}${byVariant}.${chance}`,
    remedy:
      differ === "pass"
        ? `Read ${metric.name} as a statement about ${many} with a value only: the variant may change who has one.`
        : `The variant changes who has a value, so those compared are no longer alike. Choose a metric that counts every ${plan.unitCalled.one} (without-rows: 0), or find out why values are missing.`,
    figures: { units: perVariant(plan, leftOut), share, ...(p === null ? {} : { p }) },
  };
}
