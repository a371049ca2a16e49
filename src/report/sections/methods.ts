import { anyIsEnough, type Effect } from "../../decision/index.ts";
import { type Plan, sealDifference, sealOf } from "../../plan/index.ts";
import { list, planPercent } from "../../words/index.ts";
import { FROM_CELLS, REPLACES } from "../history.ts";
import type { ReportInputs } from "../types.ts";
import { cautions } from "./cautions.ts";
import { type FromWhat, fromWhat } from "./from-what.ts";
import { groupMethods } from "./group-methods.ts";
import { lookMethods } from "./look-methods.ts";
import { normalityMethods } from "./normality-methods.ts";

/** Section 7: how it was computed, from which sources, of what, and what it cannot say. */
export interface MethodsSection extends FromWhat {
  readonly methods: readonly Method[];
  readonly cautions: readonly string[];
}
export interface Method {
  /** What a term of the report links to. */
  readonly id: string;
  readonly name: string;
  readonly how: string;
  readonly source: string;
}

export function methodsSection(inputs: ReportInputs): MethodsSection {
  const { plan } = inputs;
  return {
    methods: methods(inputs),
    cautions: cautions(plan),
    ...fromWhat({
      ...inputs,
      more: [
        ["Made from", inputs.fromCells === true ? FROM_CELLS : null],
        ["cells.json, SHA-256", inputs.cellsSha256 ?? null],
        [REPLACES, inputs.rerun?.previous.sha256 ?? null],
        ["The rule, kept before the start", registeredText(plan)],
      ],
    }),
  };
}

/** Whether the rule is the one that was kept before the start; null where none was. */
function registeredText(plan: Plan): string | null {
  if (plan.registered === null) return null;
  const { on, where, fingerprint } = plan.registered;
  const kept = `${on}${where === null ? "" : `, ${where}`}: ${fingerprint}`;
  const own = sealOf(plan).fingerprint;
  const differ = sealDifference(fingerprint, own);
  return differ.length === 0 ? `${kept}; unchanged since` : `${kept}; now ${own}, another in: ${list(differ)}`;
}

/** Only what this report uses. */
function methods(inputs: ReportInputs): MethodsSection["methods"] {
  const { plan, effects, choices, reduction } = inputs;
  const isDecided = inputs.conclusion.decision !== "undecidable";
  const shown = effects.flatMap(({ contrast, adjusted }) =>
    adjusted === null ? [contrast] : [contrast, adjusted.contrast],
  );
  const used = new Set(shown.map(({ difference }) => difference.method));
  const beside = new Set(shown.flatMap((contrast) => contrast.beside.map(({ method }) => method)));
  const has = (summary: Effect["summary"]) => effects.some((effect) => effect.summary === summary);
  const others = plan.variants.filter((variant) => !variant.isControl).length;
  const confidence = planPercent(plan.decision.confidence);
  const { one, many } = plan.unitCalled;
  const primaries = plan.metrics.filter(({ role }) => role === "primary").length;
  const forInformation = effects.filter(({ role }) => role === "secondary").length;
  const simply = effects.some(
    ({ role, contrast, summary }) => role !== "secondary" && (summary === "quantile" || hasNoSpread(contrast)),
  );
  const all: readonly (Omit<Method, "id"> & { readonly when: boolean })[] = [
    {
      when: [...used].some((method) => method !== "quantile"),
      name: "Difference",
      how: `Variant minus control, of means over ${many}; two-sided ${confidence} interval by the normal approximation, each group with its own variance.`,
      source: "Neyman 1923, Statistical Science 5 (1990) 465-472; Imbens and Rubin 2015, chapter\u00a06",
    },
    {
      when: effects.some(({ summary, contrast }) => summary !== "quantile" && !("absent" in contrast.relative)),
      name: "Relative difference",
      how: "Variant over control, minus 1, with the interval for a ratio of means that holds 0 exactly when the difference\u2019s does. Not shown where the control\u2019s level is not clearly above 0.",
      source: "Fieller 1954, Journal of the Royal Statistical Society B 16, 175-185",
    },
    {
      when: has("proportion"),
      name: "Shares",
      how: `A share is the mean of a 0 or 1 per ${one}. The score interval is shown beside it, and counts where a group has fewer than 10 ${many} with, or fewer than 10 without; the relative difference then follows from the same limits.`,
      source:
        "Newcombe 1998, Statistics in Medicine 17, 873-890, method 10; Wilson 1927; Donner and Zou 2012, Statistical Methods in Medical Research 21, 347-359",
    },
    {
      when: has("ratio-of-totals"),
      name: "Ratio of totals",
      how: `Total over total in each group; its variance from the score of each ${one}, numerator minus ratio times denominator, over the mean denominator.`,
      source: "Cochran 1977, chapter\u00a06; Deng, Knoblich and Lu 2018",
    },
    {
      when: has("quantile"),
      name: "Quantiles",
      how: `A group\u2019s quantile is the smallest value that at least the stated share of its ${many} do not exceed. Its interval runs from one value of the ordered list to another, at the ranks nq \u2213 z\u221a(nq(1 \u2212 q)) rounded outwards; the two groups are joined by the root of the sum of squares, and the relative difference follows from the same limits. p is the level at which the interval touches 0. Nothing is supposed of the shape of the values; many equal ones make the interval wider than stated, not narrower.`,
      source:
        "Hyndman and Fan 1996, The American Statistician 50, 361-365, type 1; Conover 1999, Practical Nonparametric Statistics, 3.2; Zou and Donner 2008, Statistics in Medicine 27, 1693-1702; Donner and Zou 2012, Statistical Methods in Medical Research 21, 347-359",
    },
    {
      when: effects.some(({ adjusted }) => adjusted !== null),
      name: "Adjusted differences",
      how: `A ${plan.unitCalled.one}\u2019s value less a share of what was known of it before: the share that leaves the difference the smallest variance. Levels keep their height, since only distances from the mean of both groups are taken off. The unadjusted difference stands under it and does not decide.`,
      source:
        "Deng, Xu, Kohavi and Walker 2013; Yang and Tsiatis 2001, The American Statistician 55, 314-321; Lin 2013, Annals of Applied Statistics 7, 295-318",
    },
    {
      when: used.has("welch") || beside.has("welch"),
      name: "Small groups",
      how: `Under 200 ${many} in a group, Student\u2019s t with the degrees of freedom of unequal variances takes the place of the normal distribution.`,
      source: "Welch 1947, Biometrika 34, 28-35; Satterthwaite 1946",
    },
    {
      when: others > 1 && plan.looks === null,
      name: "Several variants",
      how: `Each variant is compared with the control. For what decides and what must not get worse, the ${others} intervals hold together with ${confidence} confidence: they share the control, and their critical value allows for that. p is adjusted in one step by the same distribution; Holm\u2019s, by several steps, stands beside it and does not decide.${simply ? " Where that distribution is not to be had, the error is shared out evenly over the variants: for quantiles, and where a group has no spread." : ""}`,
      source: `Dunnett 1955, Journal of the American Statistical Association 50, 1096-1121; by Dunnett 1989, Applied Statistics 38, 564-579; Holm 1979, Scandinavian Journal of Statistics 6, 65-70${simply ? "; Dunn 1961, Journal of the American Statistical Association 56, 52-64" : ""}`,
    },
    ...lookMethods(plan, others, confidence),
    {
      when: primaries > 1 && !anyIsEnough(plan),
      name: "Several deciding measures",
      how: "Every one of them must pass, so none of their intervals needs to be wider.",
      source: "Berger 1982, Technometrics 24, 295-300",
    },
    {
      when: anyIsEnough(plan),
      name: "Several deciding measures",
      how: `Any one of the ${primaries} is enough, so the error is shared out evenly over them: all their intervals hold together with ${confidence} confidence. Their p are adjusted for their number by steps. The limits of what must not get worse must all hold, so those intervals are not wider.`,
      source:
        "Dunn 1961, Journal of the American Statistical Association 56, 52-64; Holm 1979, Scandinavian Journal of Statistics 6, 65-70; Berger 1982",
    },
    {
      when: forInformation > 1,
      name: "Measures for information",
      how: `Each interval holds alone. p is adjusted over their ${forInformation} tests so that, of those it puts under a limit, about that share at most is expected to be false. They suggest, they do not decide.`,
      source: "Benjamini and Hochberg 1995, Journal of the Royal Statistical Society B 57, 289-300",
    },
    {
      when: effects.some((effect) => effect.role === "guardrail"),
      name: "What must not get worse",
      how: "Held when the interval\u2019s harmful end stays within the limit that the plan set beforehand: non-inferiority.",
      source: "ICH E9 and E10; CONSORT extension to non-inferiority trials, Piaggio and others 2012",
    },
    {
      when: effects.some(({ power }) => power.detectable !== null),
      name: "Power and sizes",
      how: "From the standard error seen here, the critical value that decides and the amounts that the plan states; never from the effect seen here. The standard error falls with the root of the size, the groups shared out as here. For all questions together the chance is at least 1 minus the sum of the single chances to miss.",
      source:
        "Chow, Shao and Wang 2008, Sample Size Calculations in Clinical Research, 3.2; what is overstated: Gelman and Carlin 2014, Perspectives on Psychological Science 9, 641-651",
    },
    ...normalityMethods(plan, effects),
    ...groupMethods(plan, inputs),
    {
      when: choices.some(({ rows }) => rows.length > 1),
      name: "Other reasonable choices",
      how: `The same difference with one choice changed and all else as planned: other caps, other ${many}, without the most extreme ${plan.unitCalled.one} of each group, unadjusted, by other methods; of the logarithm of 1 + the value only the side and p. All are taken from one pass over the log. They share the data, so how many agree says how fragile the result is and adds no evidence.`,
      source:
        "Simonsohn, Simmons and Nelson 2020, Nature Human Behaviour 4, 1208-1214; ICH E9(R1), sensitivity analysis",
    },
    {
      // on an undecidable report nothing is told that could turn
      when: isDecided && effects.some(({ role, zone }) => role !== "secondary" && zone !== "not-settled"),
      name: "What would turn it",
      how: `The level at which the ${many} of a variant that were not counted would carry the end of the interval to the limit it has passed, were those of the control like its counted ones and the interval as wide as it is.`,
      source:
        "ICH E9(R1), sensitivity analysis; Campbell, Pennello and Yue 2011, Journal of Biopharmaceutical Statistics 21, 180-195, tipping point",
    },
    {
      when: reduction.metrics.some(({ sizes }) => sizes !== null),
      name: "Values by size",
      how: `How many ${many} have a value in each of four steps to every doubling, exact counts, zero apart. Drawn over the width of the step, so that equal areas are equal numbers; the tails add them up from the far end.`,
      source: "Pareto 1896, on the tail on scales of ratios; the steps are this tool\u2019s",
    },
    {
      when: reduction.metrics.some(({ covariate }) => covariate !== null) || reduction.facts.subgroups.length > 0,
      name: "Groups before enrolment",
      how: "The standardised difference: of the means or shares, over the root of the mean of both variances. It tells whether groups are alike enough and does not grow with their size; the check of section 3 tells whether chance made it.",
      source: "Austin 2009, Statistics in Medicine 28, 3083-3107; CONSORT 2010 item 15",
    },
    {
      when: true,
      name: "Who was counted",
      how: `Each row and each ${plan.unitCalled.one} ends on one line of section 4. A ${plan.unitCalled.one} is counted in the group of its first enrolment, whatever it did later; one without events counts with 0.`,
      source: "CONSORT 2010 flow diagram; ICH E9(R1)",
    },
  ];
  return all
    .filter(({ when }) => when)
    .map(({ name, how, source }) => ({ id: idOf(name), name, how, source: ranges(source) }));
}

/** Pages of a journal: "221–228". */
function ranges(source: string): string {
  return source.replace(/(\d)-(?=\d)/g, "$1\u2013");
}

/** "Relative difference" is `method-relative-difference`. */
function idOf(name: string): string {
  // the plan's own word stands in this one
  if (/^As .* enrolled$/s.test(name)) return "method-accrual";
  return `method-${name.toLowerCase().replace(/[^a-z]+/g, "-")}`;
}

function hasNoSpread({ control, variant }: Effect["contrast"]): boolean {
  return control.sd === null || variant.sd === null;
}
