import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { pearson } from "../stats/index.ts";
import { percent, pText, quoted } from "../words/index.ts";
import { whereItLies } from "./allocation-places.ts";
import {
  brokenAt,
  brokenRemedy,
  brokenSentence,
  stepFigures,
  stepsToAnalysed,
  stepsToEnrolled,
} from "./allocation-steps.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import type { Step } from "./flow.ts";
import { analysedUnits, sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import { absentVariants } from "./never-occurs.ts";
import { plannedShares } from "./planned-shares.ts";
import type { Check } from "./types.ts";
import { byChance, groups, perVariant } from "./words.ts";

/**
 * Do the units split as planned? Asked of those enrolled, by the variant they were first given, and again of those
 * analysed; the worse of the two counts. An uneven split is traced: after which step of the flow it broke, and on which
 * days or levels of a subgroup it lies.
 *
 * Pearson 1900, Philosophical Magazine 50, 157-175: the sum of (observed - expected)^2 / expected.
 */
export function allocation(plan: Plan, reduction: Reduction): Check | null {
  const enrolled = split(plan, reduction.facts.enrolled);
  if (enrolled === null) return null;
  const analysed = split(plan, analysedUnits(reduction));
  const findings = [
    asEnrolled(plan, reduction, enrolled),
    ...(analysed === null ? [] : [asAnalysed(plan, reduction, analysed)]),
  ];
  const isUneven = findings.some(({ result }) => result !== "pass");
  return asCheck("allocation", findings, {
    ...figuresOf(plan, enrolled),
    ...(analysed === null ? {} : { analysed: figuresOf(plan, analysed) }),
    ...(isUneven ? { steps: stepFigures(plan, stepsToAnalysed(reduction)) } : {}),
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

function asEnrolled(plan: Plan, reduction: Reduction, found: Split): Finding {
  const result = byP(found.p);
  const about = "enrolled";
  if (result === "pass") return passed(about, evenSentence(plan, "Enrolled", found), figuresOf(plan, found));
  const step = brokenAt(plan, stepsToEnrolled(reduction), result);
  const lies = step === null ? whereItLies(plan, reduction, "enrolled") : [];
  const { many, one } = plan.unitCalled;
  // A name that is written otherwise is no loss of units.
  const [absent] = absentVariants(plan, reduction);
  if (absent !== undefined) {
    const sentence = `${unevenSentence(plan, "Enrolled", found)} ${absent.sentence}`;
    return { about, result, strong: false, sentence, remedy: absent.remedy, figures: figuresOf(plan, found) };
  }
  return {
    about,
    result,
    strong: false,
    sentence: [unevenSentence(plan, "Enrolled", found), ...traced(plan, step), ...lies].join(" "),
    remedy:
      step === null
        ? `Find out where ${many} of one group are lost or added before their first row: how a ${one} is given a variant, redirects, pages that load slowly, rows that never arrive. If the log cannot be mended, the test must be run again.`
        : brokenRemedy(plan, step),
    figures: { ...figuresOf(plan, found), ...(step === null ? {} : { brokenAt: step.line }) },
  };
}

function asAnalysed(plan: Plan, reduction: Reduction, found: Split): Finding {
  const result = byP(found.p);
  const about = "analysed";
  if (result === "pass") return passed(about, evenSentence(plan, "Counted", found), figuresOf(plan, found));
  const step = brokenAt(plan, stepsToAnalysed(reduction), result);
  const lies = whereItLies(plan, reduction, "analysed");
  return {
    about,
    result,
    strong: false,
    sentence: [unevenSentence(plan, "Counted", found), ...traced(plan, step), ...lies].join(" "),
    remedy: brokenRemedy(plan, step),
    figures: { ...figuresOf(plan, found), ...(step === null ? {} : { brokenAt: step.line }) },
  };
}

const traced = (plan: Plan, step: Step | null): string[] => (step === null ? [] : [brokenSentence(plan, step)]);

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
