import type { Plan } from "../../plan/types.ts";
import { capital, count, list, plain, planPercent, plural, quoted } from "../../words/index.ts";

/** What the plan laid down before the start: who could be enrolled, what the groups were given, and how it is judged. */
export interface DesignSection {
  readonly variants: readonly DesignVariant[];
  readonly facts: readonly Fact[];
  readonly rule: readonly Fact[];
  /** CONSORT keeps the two apart: what the plan names, and what every report of this tool adds. */
  readonly planned: readonly string[];
  readonly added: readonly string[];
  /** What was asked after the test began; null where nothing was. */
  readonly afterwards: string | null;
}
/** Which of the parts that not every report has stand in this one. */
export interface Shown {
  /** Draws from the groups' own values. */
  readonly drawn: boolean;
  readonly accrual: boolean;
  readonly daysSince: boolean;
}
export interface DesignVariant {
  readonly name: string;
  readonly control: boolean;
  readonly what: string;
  readonly share: string;
}
export interface Fact {
  readonly name: string;
  readonly value: string;
}

/** What the plan does not say, wherever the report has a place for it. */
export const NOT_STATED = "not stated";

export function designSection(plan: Plan, shown: Shown): DesignSection {
  const parts = plan.variants.reduce((sum, { allocation }) => sum + allocation, 0);
  return {
    variants: plan.variants.map(({ name, what, isControl, allocation }) => ({
      name,
      control: isControl,
      what: what ?? NOT_STATED,
      share: `${plain(allocation)} of ${plain(parts)}`,
    })),
    facts: facts(plan),
    rule: rule(plan),
    planned: planned(plan),
    added: added(plan, shown),
    afterwards: afterwards(plan),
  };
}

function facts(plan: Plan): Fact[] {
  const { enrolment, unitCalled, followUp } = plan;
  const { one, many } = unitCalled;
  const dates = [
    ...(enrolment.fromText === null ? [] : [`from ${enrolment.fromText}`]),
    ...(enrolment.beforeText === null ? [] : [`before ${enrolment.beforeText}`]),
  ];
  const by =
    enrolment.event === null ? "by the first row that names a variant" : `by the first "${enrolment.event}" row`;
  return [
    { name: "Enrolled", value: `Each ${one} ${by}, which gives its variant.` },
    {
      name: "Dates",
      value:
        dates.length === 0
          ? `The plan sets no dates: whoever the log names is enrolled.`
          : `Enrolled ${dates.join(" and ")} (${plan.timezone}); whoever came first outside of these is not.`,
    },
    {
      name: "Followed",
      value:
        followUp === null
          ? `From enrolment to the end of the log: the plan sets no follow-up.`
          : `For ${plural(followUp.days, "day", "days")} from enrolment; ${many} not followed to the end are ${followUp.incomplete === "exclude" ? "left out" : "counted too"}.`,
    },
    {
      name: "Seen in two variants",
      value: enrolment.inTwoVariants === "first" ? "Counted where first enrolled." : "Left out.",
    },
    {
      name: "Size planned",
      value:
        plan.plannedUnits === null
          ? `${capital(NOT_STATED)}.`
          : `${count(plan.plannedUnits)} ${many}, all variants together.`,
    },
  ];
}

function rule(plan: Plan): Fact[] {
  const { decision, metrics } = plan;
  const named = (role: "primary" | "guardrail" | "secondary") =>
    metrics.filter((metric) => metric.role === role).map(({ name }) => name);
  const [primaries, guardrails, secondaries] = [named("primary"), named("guardrail"), named("secondary")];
  const any = primaries.length > 1 && decision.primaries === "any";
  return [
    { name: "Decides", value: `${list(primaries, any ? "or" : "and")}${any ? "; any one of them is enough" : ""}.` },
    ...(guardrails.length === 0
      ? []
      : [
          {
            name: "Must not get worse",
            value: `${list(guardrails)}, ${guardrails.length === 1 ? "" : "each "}within its limit.`,
          },
        ]),
    ...(secondaries.length === 0 ? [] : [{ name: "For information", value: `${list(secondaries)}.` }]),
    {
      name: "Adopts",
      value:
        decision.adoptWhen === "shown-better"
          ? "When the whole interval is a gain."
          : "When the whole interval is beyond what was asked for.",
    },
    { name: "Confidence", value: `${planPercent(decision.confidence)}.` },
    { name: "Power", value: `${planPercent(decision.power)}, for sizes.` },
  ];
}

function planned(plan: Plan): string[] {
  const adjusted = plan.metrics.filter(({ adjustFor }) => adjustFor !== null).map(({ name }) => name);
  const capped = plan.metrics.filter(({ cap }) => cap !== null).map(({ name }) => name);
  return [
    "Every measure with its role, and the rule above: section 1 and the tables of section 5.",
    ...(adjusted.length === 0 ? [] : [`Adjusted for what was known before enrolment: ${list(adjusted)}.`]),
    ...(capped.length === 0 ? [] : [`Values cut at a cap: ${list(capped)}.`]),
    ...(plan.filters.length === 0 ? [] : [`Filters: ${list(plan.filters.map(({ name }) => quoted(name)))}.`]),
    ...(plan.subgroups.length === 0
      ? []
      : [`Subgroups, under each measure: by ${list(plan.subgroups.map(quoted))} at enrolment; they never decide.`]),
    ...(plan.looks === null
      ? []
      : [
          `Looks, at ${list(plan.looks.planned.map(planPercent))} of the planned size: this is look ${plan.looks.at}, and what decides allows for all of them.`,
        ]),
    ...(plan.incidents.length === 0
      ? []
      : [
          `What happened meanwhile, at the end of section 3: ${list(plan.incidents.map(({ name }) => quoted(name)))}. It is known only once it happened, and leaves nobody out of what decides.`,
        ]),
  ];
}

function added({ unitCalled: { many } }: Plan, { drawn, accrual, daysSince }: Shown): string[] {
  const course = [
    ...(accrual ? [`as ${many} enrolled (with a band that holds on all days)`] : []),
    ...(daysSince ? ["by day since enrolment"] : []),
  ];
  return [
    "The soundness checks of section 3: they judge the data and know no effect.",
    "Other reasonable choices: they show how much hangs on a choice, and never take the place of the plan\u2019s own.",
    drawn
      ? `How near the normal curve, with intervals from draws and by other methods, and how the ${many}\u2019 values lie.`
      : `How the ${many}\u2019 values lie, and intervals by other methods where they stand beside.`,
    ...(course.length === 0 ? [] : [`How each difference came about: ${list(course)}.`]),
    "What would turn the result, power and sizes.",
  ];
}

function afterwards({ askedAfterwards: { metrics, subgroups } }: Plan): string | null {
  const asked = [
    ...metrics.map(({ name }) => quoted(name)),
    ...(subgroups.length === 0 ? [] : [`subgroups by ${list(subgroups.map(quoted))}`]),
  ];
  return asked.length === 0 ? null : `${list(asked)}.`;
}
