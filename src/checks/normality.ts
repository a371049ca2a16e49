import type { Reduction } from "../engine/types.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { CAUTION_SHARE, type Method, type Normality, type TailPair, type Tails } from "../stats/index.ts";
import { percent, quoted } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import type { Check, ContrastFigures } from "./types.ts";

/** Ends the sentence of a contrast whose corrected interval decides. */
export const CORRECTED_COUNTS = "The corrected interval counts here.";

type Known = ContrastFigures & { readonly normality: Normality };

/**
 * How far the tails of the interval are off their nominal chance, one part a metric with the worst of its variants: over a
 * fifth of it a caution, over a half a strong one; a caution too where the arms' shapes differ. Never a failure: it says
 * how good the interval is, not that the data are at fault.
 */
export function normality(plan: Plan, _: Reduction, contrasts: readonly ContrastFigures[]): Check | null {
  const findings = plan.metrics.flatMap((metric) => {
    const [worst] = contrasts
      .filter((contrast): contrast is Known => contrast.metric === metric.name && contrast.normality !== null)
      .sort((a, b) => badness(b) - badness(a));
    return worst === undefined ? [] : [judge(plan, metric, worst)];
  });
  return asCheck("normality", findings, {});
}

/** In nominal tails: how far the worse tail is off, and where the score interval counts not at all. */
function badness({ method, normality: { tails } }: Known): number {
  if (method === "score") return -1;
  const { nominal, reported, shapesDiffer } = tails;
  const off = Math.max(Math.abs(reported.lowerTail - nominal), Math.abs(reported.upperTail - nominal)) / nominal;
  // A difference of shapes makes a caution of what else would pass.
  return tails.level === "near" && shapesDiffer ? Math.max(off, CAUTION_SHARE) : off;
}

function judge(plan: Plan, metric: Metric, { variant, method, normality: { tails, unitsForTails } }: Known): Finding {
  const figures = {
    variant,
    nominal: tails.nominal,
    lowerTail: tails.reported.lowerTail,
    upperTail: tails.reported.upperTail,
    ...(unitsForTails === null ? {} : { unitsForTails }),
  };
  if (method === "score") {
    const sentence = `${metric.name}: with so few events the score interval counts, which does not lean on the normal curve.`;
    return passed(metric.name, sentence, figures);
  }
  const name = plan.variants.length > 2 ? `${metric.name} with ${quoted(variant)}` : metric.name;
  const { level, shapesDiffer, nominal, reported } = tails;
  if (level === "near" && !shapesDiffer) {
    const both = `about ${chance(reported.lowerTail)} and ${chance(reported.upperTail)}`;
    return passed(metric.name, `${name}: the nominal ${percent(nominal)} tails are ${both}, near enough.`, figures);
  }
  const start = `${name}: ${tailsInWords(tails)}`;
  const off = level === "near" ? "" : `, off by more than ${level === "strong" ? "half" : "a fifth"}`;
  return {
    about: metric.name,
    result: "caution",
    strong: level === "strong",
    sentence: [
      `${start}${off}.`,
      ...(shapesDiffer ? [shapesInWords(tails)] : []),
      ...(method === "skew-corrected" ? [CORRECTED_COUNTS] : []),
    ].join(" "),
    remedy: remedy(plan, metric, tails, method),
    figures,
  };
}

/** "the nominal 2.5% tails are about 1.6% (the interval wholly below the truth) and 3.4% (wholly above)". */
export function tailsInWords({ nominal, reported: { lowerTail, upperTail } }: Tails): string {
  return `the nominal ${percent(nominal)} tails are ${isFar(lowerTail) ? "" : "about "}${chance(lowerTail)} (the interval wholly below the truth) and ${chance(upperTail)} (wholly above)`;
}

function shapesInWords({ own, pooled }: Tails): string {
  const pair = ({ lowerTail, upperTail }: TailPair) => `${chance(lowerTail)} and ${chance(upperTail)}`;
  return `The groups' values are of different shapes: by each group's own the tails are ${pair(own)}, by one for both ${pair(pooled)}.`;
}

/** Far from the normal curve the expansion says only "far": it can leave 0 to 1, and is not to be believed near there. */
function chance(tail: number): string {
  if (!isFar(tail)) return percent(tail);
  return tail > 0.3 ? "over 30%" : "next to 0%";
}
const isFar = (tail: number): boolean => tail < 0.0001 || tail > 0.3;

function remedy({ unitCalled }: Plan, metric: Metric, tails: Tails, method: Method): string {
  const isShare = metric.summary === "proportion";
  const cap = metric.cap === null ? "cap its values (cap: {quantile: 0.999})" : "cap its values lower";
  const isCorrected = method === "skew-corrected";
  const ways = [
    ...(isShare ? [] : [cap]),
    ...(isCorrected || tails.level === "near" ? [] : ["let the corrected interval decide (interval: skew-corrected)"]),
  ];
  const beside = isCorrected || tails.level === "near" ? "" : "Read the corrected interval in section 5 beside it. ";
  return `${beside}In the plan of a next test, ${ways.length === 0 ? `ask for more ${unitCalled.many}` : ways.join(" or ")}.`;
}
