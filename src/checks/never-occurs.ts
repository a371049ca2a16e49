import type { Reduction, ValueCount } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { quoted } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { nearest } from "./nearest.ts";
import type { Check } from "./types.ts";

/** Events and variants of the plan that no row has: often a name written otherwise in the log. */
export function neverOccurs(plan: Plan, reduction: Reduction): Check | null {
  const { missingEvents, missingVariants, events } = reduction.facts;
  const planEvents = eventsOf(plan);
  const missing = [
    ...missingEvents.map((name) => judge("event", name, events, planEvents)),
    ...absentVariants(plan, reduction),
  ];
  const what = planEvents.length === 0 ? "Every variant" : "Every event and variant";
  const all = passed("names", `${what} that the plan names occurs in the log.`, {});
  return asCheck("never-occurs", missing.length === 0 ? [all] : missing, {
    events: missingEvents,
    variants: missingVariants,
  });
}

/** The variants of the plan that no row names, each with the nearest that does occur. */
export function absentVariants(plan: Plan, { facts }: Reduction): Finding[] {
  const named = plan.variants.map((variant) => variant.name);
  return facts.missingVariants.map((name) => judge("variant", name, facts.variants, named));
}

function judge(
  kind: "event" | "variant",
  name: string,
  seen: readonly ValueCount[],
  inPlan: readonly string[],
): Finding {
  const values = seen.map(({ value }) => value);
  // a name that the plan uses elsewhere is hardly the one meant here
  const others = values.filter((value) => !inPlan.includes(value));
  const near = nearest(name, others.length > 0 ? others : values);
  const hint = near === null ? `No row names any ${kind}.` : `The nearest that does occur is ${quoted(near)}.`;
  return {
    about: `${kind} ${name}`,
    result: "caution",
    strong: false,
    sentence: `No row of the log has the ${kind} ${quoted(name)}. ${hint}`,
    remedy: `If the log writes it otherwise, correct the name in the plan; if such rows should exist, find out why the log lacks them.`,
    figures: { kind, name, ...(near === null ? {} : { nearest: near }) },
  };
}

function eventsOf(plan: Plan): string[] {
  const parts = plan.metrics.flatMap((metric) => [metric.of, ...(metric.per === null ? [] : [metric.per])]);
  const named = [plan.enrolment.event, ...parts.map((part) => part.event)].filter((event) => event !== null);
  return [...new Set(named)];
}
