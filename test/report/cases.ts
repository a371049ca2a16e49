import { withFamilies } from "../../src/decision/families.ts";
import { placed } from "../../src/decision/index.ts";
import { analysedUnits, NO_POWER, withPower } from "../../src/decision/power.ts";
import type { Effect, Zone } from "../../src/decision/types.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import type { Contrast } from "../../src/stats/types.ts";
import { allocationFailed, allocationPassed, duplicatesCaution, otherChecks } from "./checks.ts";
import { handChoices } from "./choices.ts";
import { handContrast, shareArm } from "./contrasts.ts";
import { booked, calendar, contacts, fare, farePlan, list, perSearch, planText } from "./plans.ts";
import { type HandFlow, reductionOf } from "./reductions.ts";

const N = 50_150;
const flow: HandFlow = {
  analysed: [50_120, 50_181],
  byFilter: [[101, 98]],
  followUp: [709, 701],
  notEnrolled: 2_180,
  outside: [204, 208],
  unknown: 10,
};

export function effectOf(metric: Metric, variant: string, contrast: Contrast, zone: Zone): Effect {
  return {
    metric: metric.name,
    role: metric.role,
    summary: metric.summary,
    variant,
    control: "list",
    contrast,
    adjusted: null,
    notAdjusted: null,
    pAdjusted: metric.role === "secondary" ? null : contrast.difference.p,
    pHolm: null,
    zone,
    eitherWay: false,
    power: NO_POWER,
    normality: null,
    resampled: null,
    toDraw: null,
  };
}

export function inputs(over: Partial<ReportInputs> & { readonly plan: Plan; readonly flow?: HandFlow }): ReportInputs {
  const { plan, effects = [] } = over;
  const reduction = reductionOf(plan, over.flow ?? flow);
  const units = analysedUnits(reduction);
  return {
    planText,
    planSha256: "3f9a20c1".repeat(8),
    version: "0.1.0",
    reduction,
    checks: [allocationPassed, ...otherChecks.slice(0, 2), duplicatesCaution, ...otherChecks.slice(2)],
    choices: [],
    accruals: [],
    daysSince: [],
    subgroups: [],
    afterwards: { subgroups: [], metrics: null },
    conclusion: { decision: "not-settled", variant: null, sentence: "", reasons: [] },
    ...over,
    effects: withFamilies(plan, effects).map((effect) => withPower(effect, plan, units)),
  };
}

const bookedContrast = handContrast(shareArm(N, 0.12), shareArm(N, 0.132));
const contactsContrast = handContrast(
  { units: N, mean: 0.0809, sd: 0.33, largest: 7 },
  { units: N, mean: 0.0799, sd: 0.33, largest: 6 },
);
const fareContrast = handContrast(
  { units: N, mean: 96.4, sd: 410, largest: 1450.5 },
  { units: N, mean: 103.9, sd: 430, largest: 1450.5 },
);

const adoptChoices = [
  handChoices(effectOf(booked, "calendar", bookedContrast, "worthwhile"), booked, [
    ["any-follow-up", shareArm(N + 709, 0.1196), shareArm(N + 701, 0.1317)],
    ["without-first-day", shareArm(46_200, 0.1203), shareArm(46_280, 0.1301)],
    ["score", shareArm(N, 0.12), shareArm(N, 0.132)],
  ]),
  handChoices(effectOf(contacts, "calendar", contactsContrast, "within"), contacts, [
    ["cap-0.99", { units: N, mean: 0.0771, sd: 0.27 }, { units: N, mean: 0.0766, sd: 0.27 }],
    ["without-first-day", { units: 46_200, mean: 0.0807, sd: 0.33 }, { units: 46_280, mean: 0.08, sd: 0.33 }],
  ]),
  handChoices(
    effectOf(fare, "calendar", fareContrast, "better"),
    fare,
    [
      ["no-cap", { units: N, mean: 97.9, sd: 590 }, { units: N, mean: 104.6, sd: 610 }],
      ["cap-0.99", { units: N, mean: 90.2, sd: 330 }, { units: N, mean: 98.8, sd: 341 }],
      ["without-largest", { units: N - 1, mean: 96.37, sd: 409.8 }, { units: N - 1, mean: 103.87, sd: 429.7 }],
    ],
    0.00002,
  ),
];

/** PAGES, page one: adopt. */
export const adopt = inputs({
  plan: farePlan,
  choices: adoptChoices,
  effects: [
    effectOf(booked, "calendar", bookedContrast, "worthwhile"),
    effectOf(contacts, "calendar", contactsContrast, "within"),
    effectOf(fare, "calendar", fareContrast, "better"),
  ],
  conclusion: {
    decision: "adopt",
    variant: "calendar",
    sentence: "Adopt the calendar.",
    reasons: [
      "Booked: 10.0% more (6.5% to 13.7% more); the plan asked for at least 5%.",
      "Support contacts: within the limit of 5% more (6.0% fewer to 3.8% more).",
    ],
  },
});

/** PAGES, page one: not settled. */
export const notSettled = inputs({
  plan: farePlan,
  flow: { ...flow, analysed: [21_398, 21_430] },
  effects: [
    effectOf(booked, "calendar", handContrast(shareArm(21_398, 0.12), shareArm(21_430, 0.123)), "not-settled"),
    effectOf(
      contacts,
      "calendar",
      handContrast({ units: 21_398, mean: 0.0801, sd: 0.33 }, { units: 21_430, mean: 0.0812, sd: 0.33 }),
      "not-settled",
    ),
    effectOf(
      fare,
      "calendar",
      handContrast({ units: 21_398, mean: 96.4, sd: 410 }, { units: 21_430, mean: 97.1, sd: 430 }),
      "not-settled",
    ),
  ],
  conclusion: {
    decision: "not-settled",
    variant: null,
    sentence: "Not settled: this test can neither recommend the calendar nor advise against it.",
    reasons: ['Booked: the interval holds both "no gain" and "more than 5%" (2.6% fewer to 7.8% more).'],
  },
});

/** PAGES, the other ends: keep, worse. */
export const keepControl = inputs({
  plan: farePlan,
  effects: [
    effectOf(booked, "calendar", handContrast(shareArm(N, 0.12), shareArm(N, 0.1127)), "worse"),
    effectOf(
      contacts,
      "calendar",
      handContrast({ units: N, mean: 0.08, sd: 0.2 }, { units: N, mean: 0.0912, sd: 0.2 }),
      "beyond",
    ),
    effectOf(fare, "calendar", fareContrast, "better"),
  ],
  conclusion: {
    decision: "keep-control",
    variant: null,
    sentence: "Stay with the list. Fewer visitors booked with the calendar: 6.1% fewer (9.3% to 2.8% fewer).",
    reasons: [
      "Booked: fell by 6.1% (9.3% to 2.8%).",
      "Support contacts: rose by 14% (10.8% to 17.2%), beyond the limit of 5%.",
    ],
  },
});

/** PAGES, page one: undecidable. The effects are there, for finding the fault. */
export const undecidable = inputs({
  plan: {
    ...farePlan,
    filters: [
      {
        name: "robots",
        why: null,
        drop: "units",
        when: "ever",
        where: [{ column: "pages", kind: "above", value: "40" }],
      },
    ],
  },
  flow: { ...flow, analysed: [50_087, 47_902], byFilter: [[61, 2_312]], followUp: [0, 0] },
  effects: adopt.effects,
  checks: [
    allocationFailed,
    ...otherChecks.slice(0, 3),
    {
      id: "filters",
      result: "caution",
      strong: false,
      sentence: 'The filter "robots" looks past enrolment, so the variant can change who is removed.',
      remedy: "Judge by what was known at enrolment (when: at-enrolment).",
      figures: {},
      parts: [],
    },
    ...otherChecks.slice(4),
  ],
  conclusion: {
    decision: "undecidable",
    variant: null,
    sentence: "No decision from this data yet. It must be mended first; the calendar has not been judged.",
    reasons: [
      "The two groups should be of one size. Counted were 50,087 visitors with the list and 47,902 with the calendar.",
    ],
  },
});

const severalPlan: Plan = {
  ...farePlan,
  variants: [
    list,
    calendar,
    { name: "map", what: "ports on a map", isControl: false, allocation: 1 },
    { name: "map with fares", what: null, isControl: false, allocation: 1 },
  ],
  metrics: [
    booked,
    { ...fare, role: "primary", worthwhile: { kind: "absolute", value: 2 } },
    contacts,
    { ...contacts, name: "Cancelled within a day", summary: "proportion", margin: { kind: "absolute", value: 0.002 } },
    perSearch,
    { ...fare, name: "Change of balance after refunds, disputes and corrections", cap: null },
  ],
};

/** Three variants, two deciding measures, an end without a limit, a relative effect that is not shown. */
export const several = inputs({
  plan: severalPlan,
  flow: {
    ...flow,
    analysed: [25_060, 25_090, 25_011, 25_140],
    byFilter: [[50, 51, 49, 49]],
    followUp: [350, 353, 352, 355],
    outside: [102, 104, 101, 105],
  },
  effects: severalPlan.metrics.flatMap((metric, m) =>
    severalPlan.variants.slice(1).map(({ name }, v) => severalEffect(metric, m, name, v)),
  ),
  conclusion: {
    decision: "adopt",
    variant: "calendar",
    sentence:
      "Adopt the calendar. The map passed too; the calendar had the larger gain, but the two were not compared with each other.",
    reasons: ["Booked, calendar: 10.0% more.", "Booked, map: 8.3% more.", "Booked, map with fares: not settled."],
  },
});

function severalEffect(metric: Metric, m: number, variant: string, v: number): Effect {
  const n = 25_000;
  const gain = [1.1, 1.083, 1.02][v] ?? 1;
  const z = 2.3939797998; // alpha / 3 shared out: the normal quantile of 1 - 0.05 / 6
  const arms = [
    [shareArm(n, 0.12), shareArm(n, 0.12 * gain)],
    [
      { units: n, mean: 96.4, sd: 210 },
      { units: n, mean: 96.4 * gain, sd: 215 },
    ],
    [
      { units: n, mean: 0.08, sd: 0.2 },
      { units: n, mean: 0.08 / gain ** 0.2, sd: 0.2 },
    ],
    [shareArm(n, 0.011), shareArm(n, 0.011 + 0.0004 * v)],
    [
      { units: n, mean: 0.204, sd: 1.1 },
      { units: n, mean: 0.204 * gain, sd: 1.1 },
    ],
    [
      { units: n, mean: 0.41, sd: 260, smallest: -1904, largest: 2210 },
      { units: n, mean: 1.96 + v, sd: 268, smallest: -2204, largest: 2080 },
    ],
  ] as const;
  const pair = arms[m];
  if (pair === undefined) throw new Error(`no arms for metric ${m}`);
  const contrast = handContrast(pair[0], pair[1], metric.role === "secondary" ? undefined : z);
  return { ...effectOf(metric, variant, contrast, "not-settled"), ...placed(metric, contrast) };
}

const nobody = {
  units: 0,
  mean: null,
  sd: null,
  skewness: null,
  kurtosis: null,
  total: null,
  smallest: null,
  largest: null,
} as const;
const noDifference = { estimate: null, standardError: null, low: null, high: null, z: null, p: null } as const;

/** As little as there can be: no time, no filter, no size, one visitor in one arm, nobody in the other; ends without limit. */
export const little = inputs({
  plan: {
    ...farePlan,
    enrolment: {
      event: null,
      fromUs: null,
      beforeUs: null,
      fromText: null,
      beforeText: null,
      inTwoVariants: "exclude",
    },
    followUp: null,
    filters: [],
    plannedUnits: null,
    looks: null,
    incidents: [],
    metrics: [booked, contacts, { ...fare, cap: null, worthwhile: null, role: "primary" }, perSearch],
    registered: null,
    texts: { ended: null, owner: null, link: null, limits: null, notes: null, decided: null },
  },
  flow: { analysed: [1, 0], byFilter: [], followUp: [0, 0], notEnrolled: 0, outside: [0, 0], unknown: 0 },
  checks: [],
  effects: [
    effectOf(
      booked,
      "calendar",
      {
        ...bookedContrast,
        control: { ...nobody, units: 1, mean: 1, total: 1, smallest: 1, largest: 1 },
        variant: nobody,
        difference: { ...noDifference, method: "normal" },
        relative: { absent: "no-units" },
        why: { absent: "no-units" },
      },
      "not-settled",
    ),
    effectOf(
      contacts,
      "calendar",
      {
        ...contactsContrast,
        difference: { ...contactsContrast.difference, method: "welch", low: null },
        relative: { estimate: -0.012, low: null, high: 0.039 },
        df: 17.3,
        beside: [{ method: "normal", low: -0.0051, high: 0.0031 }],
      },
      "within",
    ),
    effectOf(
      fare,
      "calendar",
      {
        ...fareContrast,
        difference: { ...noDifference, estimate: 7.5, method: "normal" },
        relative: { absent: "few-units" },
        why: { absent: "few-units" },
      },
      "not-settled",
    ),
    effectOf(
      perSearch,
      "calendar",
      {
        ...fareContrast,
        control: nobody,
        variant: nobody,
        difference: { ...noDifference, method: "normal" },
        relative: { absent: "zero-denominator" },
        why: { absent: "zero-denominator" },
      },
      "not-settled",
    ),
  ],
  conclusion: {
    decision: "not-settled",
    variant: null,
    sentence: 'Not settled: this test can neither recommend "calendar" nor advise against it.',
    reasons: [],
  },
});
