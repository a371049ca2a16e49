import {
  analysedUnits,
  anyIsEnough,
  deciding,
  type Effect,
  enrolledADay,
  foundSentence,
  metricOf,
  nextTest,
  questionOf,
  questionOfNextTest,
  ruleInWords,
  ruleOf,
  type Size,
  unsizedSentences,
} from "../../decision/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Metric, Plan } from "../../plan/types.ts";
import { isAbsent, powerWith } from "../../stats/index.ts";
import { capital, casesText, count, list, percent, plain, planPercent, plural, spanText } from "../../words/index.ts";
import { NONE } from "../effect-text.ts";

/** Section 6: what a test of this size finds, and the size of a next one. */
export interface PowerSection {
  /** The size that was planned beside the one that was counted. */
  readonly sizes: string;
  readonly table: PowerTable | null;
  /** How the table is read. */
  readonly reading: readonly string[];
  readonly next: readonly string[];
}
export interface PowerTable {
  readonly caption: string;
  readonly several: boolean;
  readonly columns: readonly string[];
  readonly rows: readonly { readonly metric: string; readonly variant: string; readonly cells: readonly string[] }[];
}

export function powerSection(plan: Plan, reduction: Reduction, effects: readonly Effect[]): PowerSection {
  const able = effects.filter(({ power }) => power.detectable !== null);
  return {
    sizes: sizesText(plan, analysedUnits(reduction)),
    table: able.length === 0 ? null : powerTable(plan, reduction, able),
    reading: [...(able.length === 0 ? [] : reading(plan, able)), ...notInTable(plan, able)],
    next: nextTexts(plan, effects, reduction),
  };
}

/** A quantile's interval comes from ranks, and a group without spread has none. */
function notInTable({ metrics }: Plan, able: readonly Effect[]): string[] {
  const names = metrics.map(({ name }) => name).filter((name) => !able.some(({ metric }) => metric === name));
  if (names.length === 0 || able.length === 0) return [];
  return [`Not in the table: ${list(names)}, for want of a standard error to take a size from.`];
}

function sizesText(plan: Plan, counted: number): string {
  const { one, many } = plan.unitCalled;
  const were = `${plural(counted, one, many)} ${counted === 1 ? "was" : "were"} counted`;
  const sizes =
    plan.plannedUnits === null
      ? `The plan states no size. ${were}.`
      : `The plan asked for ${plural(plan.plannedUnits, one, many)}, all variants together; ${were}, ${percent(counted / plan.plannedUnits)} of that.`;
  return `${sizes} It asks for a power of ${planPercent(plan.decision.power)}: a test of the right size finds what it was sized for in ${casesText(plan.decision.power)} cases.`;
}

interface Column {
  readonly head: string;
  readonly cell: (effect: Effect) => string;
}

function powerTable(plan: Plan, reduction: Reduction, effects: readonly Effect[]): PowerTable {
  const counted = analysedUnits(reduction);
  const columns = columnsOf(plan, counted);
  return {
    caption: "What tests of a size find: from the spread of the values, never from the effects found",
    several: plan.variants.length > 2,
    columns: columns.map(({ head }) => head),
    rows: effects.map((effect) => ({
      metric: effect.metric,
      variant: effect.variant,
      cells: columns.map(({ cell }) => cell(effect)),
    })),
  };
}

function columnsOf(plan: Plan, counted: number): Column[] {
  const { plannedUnits } = plan;
  const foundWith = (units: number, ask: typeof questionOf) => (effect: Effect) => {
    const question = ask(effect, plan, counted);
    return question === null || isAbsent(question) ? NONE : ofHundred(powerWith(question, units));
  };
  const planned: Column[] =
    plannedUnits === null || plannedUnits === counted
      ? []
      : [{ head: `Found with ${count(plannedUnits)}, as planned`, cell: foundWith(plannedUnits, questionOfNextTest) }];
  return [
    { head: "Asked for, or limit", cell: (effect) => askedText(metricOf(effect, plan)) },
    { head: `Found with ${count(counted)}, as counted`, cell: foundWith(counted, questionOf) },
    ...planned,
    {
      head: `${capital(plan.unitCalled.many)} for ${casesText(plan.decision.power)}`,
      cell: ({ power }) => (power.unitsForWorthwhile === null ? NONE : count(Math.ceil(power.unitsForWorthwhile))),
    },
    {
      head: `Smallest effect found in ${casesText(plan.decision.power)}`,
      cell: (effect) => smallestText(effect, metricOf(effect, plan)),
    },
    {
      head: "Overstated",
      cell: ({ power }) =>
        power.exaggeration === null ? NONE : `${plain(Number(power.exaggeration.toFixed(2)))} times`,
    },
  ];
}

function askedText(metric: Metric): string {
  const rule = ruleOf(metric);
  return rule === null ? NONE : ruleInWords(metric, rule);
}

/** "0.88 points (7.4%)": in the metric's unit, and of the control's level where that is above 0. */
function smallestText(effect: Effect, metric: Metric): string {
  const { power } = effect;
  if (power.detectable === null) return NONE;
  const [factor, unit] = metric.summary === "proportion" ? [100, "points"] : [1, metric.unitOfMeasure ?? ""];
  const amount = `${plain(Number((power.detectable * factor).toPrecision(3)))} ${unit}`.trimEnd();
  const level = deciding(effect).control.mean;
  return level !== null && level > 0 ? `${amount} (${percent(power.detectable / level)})` : amount;
}

function ofHundred(power: number): string {
  if (power < 0.01) return "under 1 of 100";
  return power > 0.99 ? "over 99 of 100" : `${Math.round(power * 100)} of 100`;
}

/** How the table is read, only what it holds. */
function reading(plan: Plan, effects: readonly Effect[]): string[] {
  const has = (role: Effect["role"]) => effects.some((effect) => effect.role === role);
  const clears =
    plan.decision.adoptWhen === "shown-better"
      ? "what decides is found where its whole interval is a gain, if the true effect is the one asked for"
      : "what decides is found where its whole interval lies beyond what was asked for, if the true effect is the one that the plan expects";
  const within = has("guardrail")
    ? "; what must not get worse, where its whole interval is within its limit, if nothing changes"
    : "";
  const overstated = effects.some(({ power }) => power.exaggeration !== null)
    ? [
        "Overstated: if the true effect were just what was asked for, the tests of the size counted whose interval does not hold zero would report it, on average, so many times as large.",
      ]
    : [];
  const { many } = plan.unitCalled;
  return [
    `How often, in 100 tests of a size: ${clears}${within}. Numbers of ${many} are of all variants together.`,
    ...overstated,
  ];
}

function nextTexts(plan: Plan, effects: readonly Effect[], reduction: Reduction): string[] {
  const { size, unsized } = nextTest(plan, effects, reduction);
  const without = unsizedSentences(plan, unsized);
  const never =
    "A size is never to be taken from the effect found here: that effect is itself uncertain, and a large one is found large partly by chance.";
  if (size === null) {
    const none = without.length > 0 ? without : ["The plan states no amount that a next test could be sized for."];
    return [...none, never];
  }
  return [
    [sizeText(plan, size, reduction), foundSentence(plan, size), ...without].join(" "),
    `${anyText(plan)}${never}`,
  ];
}

/** The size in whole units: "The next test needs 93,093 visitors …: 46,547 in each variant, 5 weeks of enrolment …". */
function sizeText(plan: Plan, { units, perArm, days }: Size, reduction: Reduction): string {
  const each = perArm === null ? ", shared out as in this test" : `: ${count(perArm)} in each variant`;
  const pace = enrolledADay(reduction);
  const long =
    days === null || pace === null
      ? ""
      : `, ${spanText(days)} of enrolment at this test\u2019s pace of ${plain(Number(pace.toPrecision(3)))} a day`;
  return `For the plan\u2019s power a next test needs ${count(units)} ${plan.unitCalled.many}, all variants together${each}${long}.`;
}

function anyText(plan: Plan): string {
  if (!anyIsEnough(plan)) return "";
  const names = plan.metrics.filter(({ role }) => role === "primary").map(({ name }) => name);
  return `Any one of ${list(names)} is enough to adopt; that size is for the one that needs most. `;
}
