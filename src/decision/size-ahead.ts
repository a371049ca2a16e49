import type { Amount, Looks as PlannedLooks } from "../plan/types.ts";
import {
  type Ahead,
  beyondWorthwhile,
  enrolmentDays,
  isAbsent,
  type Looks,
  meanVariances,
  shareVariances,
  sizing,
} from "../stats/index.ts";
import type { Absent } from "../stats/types.ts";
import { planPercent } from "../words/index.ts";

/** What is known of a test to come, and what it is to show (METHODS 4, sizing ahead). */
export interface SizeQuestion {
  /** The control's level: a share of units, or a mean with the standard deviation of one unit's value. */
  readonly level:
    | { readonly kind: "share"; readonly share: number }
    | { readonly kind: "mean"; readonly mean: number; readonly sd: number };
  readonly goodIs: "higher" | "lower";
  /** A gain to find, or a harm to keep within; with an expected effect the gain is to be shown to go beyond. */
  readonly asked:
    | { readonly kind: "worthwhile"; readonly amount: Amount; readonly expected: Amount | null }
    | { readonly kind: "margin"; readonly amount: Amount };
  /** Of the variants, the control's first. */
  readonly allocation: readonly number[];
  readonly confidence: number;
  readonly power: number;
  /** Units enrolled a day, all variants together. */
  readonly unitsADay: number | null;
  readonly looks: Pick<PlannedLooks, "planned" | "spending"> | null;
}

export interface SizeAnswer {
  /** Whole units of each variant, the control's first. */
  readonly units: readonly number[];
  readonly total: number;
  /** Whole days of enrolment; null without a pace. */
  readonly days: number | null;
  /** What the planned looks cost: units of a test with a single look, and both critical values; null without looks. */
  readonly single: { readonly total: number; readonly critical: number } | null;
  readonly critical: number;
  /** What the amounts are in the measure's own unit, all above 0. */
  readonly amount: number;
  readonly expected: number | null;
}

/** Larger than any test there will be; beyond it whole units are no exact numbers. */
const MOST_UNITS = 1e12;

/**
 * The size of a test to come: units of each variant, and days of enrolment; with planned looks up to the last of them.
 * @returns what is wrong with the question, in sentences to print
 */
export function sizeAhead(question: SizeQuestion): SizeAnswer | { readonly problems: readonly string[] } {
  const { level, asked, allocation, looks } = question;
  const amount = amountOf(asked.amount, level);
  const expected = asked.kind === "worthwhile" && asked.expected !== null ? amountOf(asked.expected, level) : null;
  const distance = asked.kind === "worthwhile" && expected !== null ? beyondWorthwhile(amount, expected) : amount;
  const effect = asked.kind === "margin" ? 0 : signed(question, expected ?? amount);
  const problems = [...isAway(distance), ...isOutside(question, amount, expected), ...isByChance(question)];
  if (isAbsent(distance) || problems.length > 0) return { problems };
  const ahead: Ahead = {
    variances: variancesOf(level, effect, allocation.length - 1),
    allocation,
    distance,
    alpha: 1 - question.confidence,
    power: question.power,
  };
  const alone = sizing(ahead);
  const planned: Looks | null =
    looks === null ? null : { shares: looks.planned, spending: looks.spending, isLast: true };
  const { units, total, critical } = planned === null ? alone : sizing({ ...ahead, looks: planned });
  if (!(total <= MOST_UNITS))
    return { problems: ["No test is large enough for that: it would need over 10^12 units."] };
  return {
    units,
    total,
    days: question.unitsADay === null ? null : enrolmentDays(total, question.unitsADay),
    single: planned === null ? null : { total: alone.total, critical: alone.critical },
    critical,
    amount,
    expected,
  };
}

/** The level that the amount stands for, on the side where it lies. */
export function levelAt(question: SizeQuestion, amount: number): number {
  const { level } = question;
  return (level.kind === "share" ? level.share : level.mean) + signed(question, amount);
}

function amountOf({ kind, value }: Amount, level: SizeQuestion["level"]): number {
  return kind === "absolute" ? value : value * (level.kind === "share" ? level.share : level.mean);
}

/** A gain lies on the good side, the limit of a harm on the other. */
function signed({ goodIs, asked }: SizeQuestion, amount: number): number {
  return (goodIs === "higher") === (asked.kind === "worthwhile") ? amount : -amount;
}

function variancesOf(level: SizeQuestion["level"], effect: number, variants: number): Ahead["variances"] {
  return level.kind === "share" ? shareVariances(level.share, effect, variants) : meanVariances(level.sd, variants);
}

function isAway(distance: number | Absent): string[] {
  return isAbsent(distance)
    ? ["--expected is to be larger than --worthwhile: a gain that just reaches it is never shown to go beyond."]
    : [];
}

function isByChance({ confidence, power }: SizeQuestion): string[] {
  const chance = (1 - confidence) / 2;
  return power > chance ? [] : [`--power is to be above ${planPercent(chance)}: so often chance alone shows a gain.`];
}

function isOutside(question: SizeQuestion, amount: number, expected: number | null): string[] {
  const { level } = question;
  if (level.kind === "mean") return [];
  const reached = [amount, ...(expected === null ? [] : [expected])].map((one) => levelAt(question, one));
  return reached.every((share) => share >= 0 && share <= 1)
    ? []
    : [
        "That would be a share below 0 or above 1. An amount in percent is of the control\u2019s level, a number is added to it.",
      ];
}
