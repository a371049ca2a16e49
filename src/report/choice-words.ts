import type { ChoiceName } from "../decision/index.ts";
import type { Metric, Plan } from "../plan/types.ts";
import { quoted } from "../words/index.ts";

/** A choice in words, as one reads it in a list: "no cap", "without visitors enrolled on the first day". */
export function choiceText(choice: ChoiceName, metric: Metric, plan: Plan): string {
  const { one, many } = plan.unitCalled;
  if (isIncident(choice)) return `without ${many} enrolled during ${quoted(choice.slice(INCIDENT.length))}`;
  switch (choice) {
    case "as-planned":
      return "as planned";
    case "unadjusted":
      return "not adjusted";
    case "no-cap":
      return "no cap";
    case "cap-0.99":
    case "cap-0.999":
      return `cap at the ${choice === "cap-0.99" ? "99%" : "99.9%"} quantile`;
    case "without-largest":
      return metric.summary === "ratio-of-totals"
        ? `without the ${one} of each group that moves the ratio most`
        : `without the most extreme ${one} of each group`;
    case "other-way-in-two-variants":
      return plan.enrolment.inTwoVariants === "first"
        ? `without ${many} seen with two variants`
        : `${many} seen with two variants kept where first enrolled`;
    case "any-follow-up":
      return `${many} not followed to the end kept`;
    case "without-first-day":
      return `without ${many} enrolled on the first day`;
    case "normal":
      return "normal interval";
    case "welch":
      return "Welch\u2019s t interval";
    case "score":
      return "score interval";
    case "skew-corrected":
      return "skew-corrected interval";
    case "bootstrap-t":
      return "bootstrap-t interval";
    case "randomisation":
      return "randomisation test";
    case "log":
      return "logarithm of 1 + the value";
    default:
      return unknown(choice);
  }
}

const INCIDENT = "without-incident:";

function isIncident(choice: ChoiceName): choice is ChoiceName & `without-incident:${string}` {
  return choice.startsWith(INCIDENT);
}

/** Choices that a reader would look for, and that are not listed: they would change nothing, or leave nothing. */
export function unchanged(metric: Metric, plan: Plan, listed: readonly ChoiceName[]): ChoiceName[] {
  const hasCaps = metric.summary === "mean" || metric.summary === "ratio-of-totals";
  const hasTime = plan.log.every(({ columns }) => columns.time !== null);
  const own = metric.cap?.kind === "quantile" ? Number(metric.cap.q) : null;
  const looked: readonly (readonly [ChoiceName, boolean])[] = [
    ["no-cap", hasCaps && metric.cap !== null],
    ["cap-0.99", hasCaps && own !== 0.99],
    ["cap-0.999", hasCaps && own !== 0.999],
    ["other-way-in-two-variants", true],
    ["any-follow-up", plan.followUp?.incomplete === "exclude"],
    ["without-first-day", hasTime],
    ...plan.incidents.map(({ name }) => [`without-incident:${name}`, true] as const),
  ];
  return looked.flatMap(([choice, isFit]) => (isFit && !listed.includes(choice) ? [choice] : []));
}

function unknown(choice: never): never {
  throw new Error(`no words for the choice ${String(choice)}`);
}
