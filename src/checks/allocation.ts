import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { pearson } from "../stats/index.ts";
import { percent, pText, quoted } from "../words/index.ts";
import { brokenAt, brokenRemedy, brokenSentence } from "./allocation-steps.ts";
import { asCheck, type Finding } from "./finding.ts";
import { analysedUnits, sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import { plannedShares } from "./planned-shares.ts";
import type { Check } from "./types.ts";
import { byChance, groups, perVariant } from "./words.ts";

/**
 * Do the units split as planned? Asked of those enrolled, by the variant they were first given, and again of those
 * analysed; the worse of the two counts.
 *
 * Pearson 1900, Philosophical Magazine 50, 157-175: the sum of (observed - expected)^2 / expected.
 */
export function allocation(plan: Plan, reduction: Reduction): Check | null {
  const enrolled = split(plan, reduction.facts.enrolled);
  if (enrolled === null) return null;
  const analysed = split(plan, analysedUnits(reduction));
  const findings = [asEnrolled(plan, enrolled), ...(analysed === null ? [] : [asAnalysed(plan, reduction, analysed)])];
  return asCheck("allocation", findings, {
    ...figuresOf(plan, enrolled),
    ...(analysed === null ? {} : { analysed: figuresOf(plan, analysed) }),
  });
}

interface Split {
  readonly counts: ByVariant;
  readonly chiSquare: number;
  readonly df: number;
  readonly p: number;
}

function split(plan: Plan, counts: ByVariant): Split | null {
  return sum(counts) === 0 ? null : { counts, ...pearson(counts, plannedShares(plan)) };
}

function asEnrolled(plan: Plan, found: Split): Finding {
  const result = byP(found.p);
  const { many, one } = plan.unitCalled;
  return {
    about: "enrolled",
    result,
    strong: false,
    sentence: result === "pass" ? evenSentence(plan, "Enrolled", found) : unevenSentence(plan, "Enrolled", found),
    remedy:
      result === "pass"
        ? ""
        : `Find out where ${many} of one group are lost or added before their first row: how a ${one} is given a variant, redirects, pages that load slowly, rows that never arrive. If the log cannot be mended, the test must be run again.`,
    figures: figuresOf(plan, found),
  };
}

function asAnalysed(plan: Plan, reduction: Reduction, found: Split): Finding {
  const result = byP(found.p);
  const step = result === "pass" ? null : brokenAt(plan, reduction, result);
  const uneven = [unevenSentence(plan, "Counted", found), ...(step === null ? [] : [brokenSentence(plan, step)])];
  return {
    about: "analysed",
    result,
    strong: false,
    sentence: result === "pass" ? evenSentence(plan, "Counted", found) : uneven.join(" "),
    remedy: result === "pass" ? "" : brokenRemedy(plan, step),
    figures: { ...figuresOf(plan, found), ...(step === null ? {} : { brokenAt: step.line }) },
  };
}

function evenSentence(plan: Plan, verb: string, { counts, p }: Split): string {
  return `${verb} were ${groups(plan, counts)}, a split that chance can explain (${pText(p)}).`;
}

function unevenSentence(plan: Plan, verb: string, { counts, p }: Split): string {
  return `${asPlanned(plan)} ${verb} were ${groups(plan, counts)}. ${byChance("so uneven a split", p)}`;
}

function asPlanned(plan: Plan): string {
  const shares = plannedShares(plan);
  const number = plan.variants.length === 2 ? "two" : plan.variants.length;
  if (shares.every((share) => share === shares[0])) return `The ${number} groups should be of one size.`;
  const wanted = plan.variants.map((variant, i) => `${percent(shares[i] ?? 0)} to ${quoted(variant.name)}`);
  return `The plan gives ${wanted.join(", ")}.`;
}

function figuresOf(plan: Plan, { counts, chiSquare, df, p }: Split) {
  return { chiSquare, df, p, counts: perVariant(plan, counts) };
}
