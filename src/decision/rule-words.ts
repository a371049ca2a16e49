import type { Metric, Part, Plan } from "../plan/types.ts";
import { list, planPercent, plural, quoted } from "../words/index.ts";
import { controlOf } from "./effects.ts";
import { counts, goodWord, ruleInWords } from "./measure.ts";
import { anyIsEnough } from "./rule.ts";
import { ruleOf } from "./zones.ts";

/** What the plan asks of a metric: 'at least 5% more visitors with at least one "booking" row', "at most 0.1 s higher". */
export function askedOf(metric: Metric, plan: Plan): string {
  if (metric.role === "secondary") return "nothing: it does not decide";
  const rule = ruleOf(metric);
  if (rule === null) return `any proven gain: ${ofWhat(metric, plan, goodWord(metric))}`;
  const least = metric.role === "guardrail" ? "at most" : "at least";
  return `${least} ${ofWhat(metric, plan, ruleInWords(metric, rule))}`;
}

/** "5% more" of what is counted; of a level or a share nothing need be added to "5% higher". */
function ofWhat(metric: Metric, { unitCalled }: Plan, amount: string): string {
  if (!counts(metric) || !/(more|fewer)$/.test(amount)) return amount;
  const rows = rowsOf(metric.of);
  if (metric.summary === "proportion") return `${amount} ${unitCalled.many} with at least one ${rows} row`;
  const what = metric.of.aggregate.kind === "days" ? `days with a ${rows} row` : `${rows} rows`;
  return `${amount} ${what} for each ${unitCalled.one}`;
}

function rowsOf({ event, where }: Part): string {
  if (event !== null) return quoted(event);
  return where.length === 0 ? "counted" : `matching (${list(where.map(({ column }) => quoted(column)))})`;
}

/** The plan's rule in sentences: when a variant is adopted, when it is turned down, and how sure that has to be. */
export function ruleSentences(plan: Plan): string[] {
  const primaries = plan.metrics.filter(({ role }) => role === "primary");
  const guardrails = plan.metrics.filter(({ role }) => role === "guardrail");
  return [adopted(plan, primaries, guardrails), turnedDown(plan, primaries, guardrails), certainty(plan)];
}

function adopted(plan: Plan, primaries: readonly Metric[], guardrails: readonly Metric[]): string {
  const others = plan.variants.filter(({ isControl }) => !isControl).map(({ name }) => quoted(name));
  const any = anyIsEnough(plan);
  const by = plan.decision.adoptWhen === "shown-worthwhile" ? ", by at least what is asked for" : "";
  const better = `shown to be better than with ${quoted(controlOf(plan).name)}${by}`;
  const verb = any || primaries.length === 1 ? "is" : "are each";
  const none = any ? ", and none of them is shown to be worse" : "";
  const one = guardrails.length === 1;
  const held =
    guardrails.length === 0
      ? ""
      : `, and ${names(guardrails)} ${one ? "is" : "are"} shown to stay within ${one ? "its limit" : "their limits"}`;
  return `${list(others, "or")} is adopted when ${names(primaries, any ? "or" : "and")} ${verb} ${better}${none}${held}.`;
}

function turnedDown(plan: Plan, primaries: readonly Metric[], guardrails: readonly Metric[]): string {
  const any = anyIsEnough(plan);
  const which = primaries.length === 1 ? names(primaries) : "one of them";
  const less = any
    ? ", or when all are shown to gain less than what is asked for"
    : " or to gain less than what is asked for";
  const asked = primaries.some((metric) => ruleOf(metric) !== null) ? less : "";
  const limit = guardrails.length === 0 ? "" : ", or when a limit is shown to be passed";
  return `It is turned down when ${which} is shown to be worse${asked}${limit}. Otherwise the test has not settled it.`;
}

/** What "shown" means. */
function certainty(plan: Plan): string {
  const { decision, variants } = plan;
  const several = variants.length > 2 ? `, for all ${plural(variants.length - 1, "variant", "variants")} at once` : "";
  const shared = anyIsEnough(plan) ? "; the error is shared out over the measures of which one is enough" : "";
  return `Shown means: by the whole of a ${planPercent(decision.confidence)} interval${several}${shared}.`;
}

const names = (metrics: readonly Metric[], word?: string) =>
  list(
    metrics.map(({ name }) => name),
    word,
  );
