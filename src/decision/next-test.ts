import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { type Absent, isAbsent, powerWith, type Question, sizeForAll } from "../stats/index.ts";
import { metricOf } from "./measure.ts";
import { analysedUnits, questionOfNextTest } from "./power.ts";
import type { Effect } from "./types.ts";
import { ruleOf } from "./zones.ts";

/** What a next test needs to answer what the plan asks. */
export interface NextTest {
  /** Null where no metric can be sized. */
  readonly size: Size | null;
  /** One a metric, in plan order. */
  readonly unsized: readonly Unsized[];
}

/** The size asked for: the largest over primaries and guardrails (METHODS 4). */
export interface Size {
  /** Units of all arms, shared out as in this test, whole. */
  readonly units: number;
  /** Units of each arm, where the plan's variants are of one size. */
  readonly perArm: number | null;
  /** Whole days of enrolment at this test's pace; null where that is not known. */
  readonly days: number | null;
  /** One a metric, in plan order: its effect on the variant that is found least often at that size. */
  readonly sized: readonly Sized[];
  /** A variant with all these effects shows all of them at least this often: 1 - sum of misses. */
  readonly together: number;
}
export interface Sized {
  readonly effect: Effect;
  readonly question: Question;
  /** Of the question, at the size of the next test. */
  readonly power: number;
}
/** A metric for which the plan states an amount and no size can be told. */
export interface Unsized {
  readonly effect: Effect;
  /** Null where the data give no standard error, or no level to take a share of. */
  readonly why: Absent | null;
}

export function nextTest(plan: Plan, effects: readonly Effect[], reduction: Reduction): NextTest {
  const counted = analysedUnits(reduction);
  const asked = effects
    .filter((effect) => ruleOf(metricOf(effect, plan)) !== null)
    .map((effect) => ({ effect, question: questionOfNextTest(effect, plan, counted) }));
  const able: { effect: Effect; question: Question }[] = [];
  const unsized: Unsized[] = [];
  for (const { effect, question } of asked) {
    if (question !== null && !isAbsent(question)) able.push({ effect, question });
    else if (unsized.every((other) => other.effect.metric !== effect.metric)) unsized.push({ effect, why: question });
  }
  return { size: sizeOf(plan, able, reduction), unsized };
}

function sizeOf(plan: Plan, able: readonly Omit<Sized, "power">[], reduction: Reduction): Size | null {
  const size = sizeForAll(
    able.map(({ question }) => question),
    plan.decision.power,
  );
  if (size === null) return null;
  const each = able.map((one) => ({ ...one, power: powerWith(one.question, size.units) }));
  const pace = enrolledADay(reduction);
  const equal = plan.variants.every(({ allocation }) => allocation === plan.variants[0]?.allocation);
  const byVariant = plan.variants.map(({ name }) => each.filter(({ effect }) => effect.variant === name));
  return {
    units: Math.ceil(size.units),
    perArm: equal ? Math.ceil(size.units / plan.variants.length) : null,
    days: pace === null ? null : Math.ceil(size.units / pace),
    sized: leastPerMetric(each),
    together: Math.min(...byVariant.map(allOf)),
  };
}

function leastPerMetric(each: readonly Sized[]): Sized[] {
  const least = new Map<string, Sized>();
  for (const sized of each) {
    const other = least.get(sized.effect.metric);
    if (other === undefined || sized.power < other.power) least.set(sized.effect.metric, sized);
  }
  return [...least.values()];
}

/** The bound for all questions of one variant together; 1 for the control, which has none. */
function allOf(sized: readonly Sized[]): number {
  return Math.max(0, 1 - sized.reduce((misses, { power }) => misses + (1 - power), 0));
}

const DAY_US = 86_400_000_000;

/** Counted units a day of enrolment; null without time, and where all enrolled within a day, which tells no pace. */
export function enrolledADay({ unitLines, facts }: Pick<Reduction, "unitLines" | "facts">): number | null {
  const { firstEnrolledUs, lastEnrolledUs } = facts;
  if (firstEnrolledUs === null || lastEnrolledUs === null) return null;
  const days = Number(lastEnrolledUs - firstEnrolledUs) / DAY_US;
  const counted = unitLines.find(({ id }) => id === "analysed")?.units ?? 0;
  return days < 1 || counted === 0 ? null : counted / days;
}

/** What the plan's size and dates meant a day; null where it states not both. */
export function plannedADay({ plannedUnits, enrolment }: Plan): number | null {
  const { fromUs, beforeUs } = enrolment;
  if (plannedUnits === null || fromUs === null || beforeUs === null || beforeUs <= fromUs) return null;
  return plannedUnits / (Number(beforeUs - fromUs) / DAY_US);
}
