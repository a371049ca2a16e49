import type { Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import type { LargestShare } from "../stats/index.ts";
import { percent, quoted } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import type { Check, ContrastFigures } from "./types.ts";

interface ArmShare {
  readonly variant: string;
  readonly share: LargestShare;
}

/**
 * How much of an arm's spread one single unit holds, one part a mean or ratio with its worst arm. Where the variance of the
 * values does not exist, that does not shrink with more units, and no interval by a standard error is right.
 */
export function oneUnit(plan: Plan, _: Reduction, contrasts: readonly ContrastFigures[]): Check | null {
  const findings = plan.metrics.flatMap((metric) => {
    const [worst] = contrasts
      .filter((contrast) => contrast.metric === metric.name)
      .flatMap(sharesOf)
      .sort((a, b) => RANK[b.share.level] - RANK[a.share.level] || b.share.ofSquares - a.share.ofSquares);
    return worst === undefined ? [] : [judge(plan, metric, worst)];
  });
  return asCheck("one-unit", findings, {});
}

const RANK: Readonly<Record<LargestShare["level"], number>> = { near: 0, caution: 1, strong: 2 };

function sharesOf({ control, variant, normality }: ContrastFigures): ArmShare[] {
  const { control: ofControl = null, variant: ofVariant = null } = normality?.largest ?? {};
  return [
    ...(ofControl === null ? [] : [{ variant: control, share: ofControl }]),
    ...(ofVariant === null ? [] : [{ variant, share: ofVariant }]),
  ];
}

function judge(plan: Plan, metric: Metric, { variant, share }: ArmShare): Finding {
  const { one } = plan.unitCalled;
  const size = percent(share.ofSquares);
  const figures = { variant, share: share.ofSquares };
  if (share.level === "near") {
    return passed(metric.name, `${metric.name}: no ${one} holds more than ${size} of its group's spread.`, figures);
  }
  const strong = share.level === "strong";
  return {
    about: metric.name,
    result: "caution",
    strong,
    sentence: `${metric.name}: one ${one} with ${quoted(variant)} holds ${size} of its group's spread (of the sum of squares about the mean)${strong ? ", so no interval for it can be relied on" : ""}.`,
    remedy: `In the plan of a next test, ${metric.cap === null ? "cap its values (cap: {quantile: 0.999})" : "cap its values lower"}; here, look whether that value is real.`,
    figures,
  };
}
