import type { Problem } from "../types.ts";
import { afterwards, type Item, items, type Loose, mapping } from "./loose.ts";
import { summaryRules } from "./summaries.ts";

/** What the role of a metric asks for and allows, and what its summary does. */
export function metricRules(plan: Loose): readonly Problem[] {
  const metrics = items(plan, "metrics");
  const adoptWhen = mapping(plan.decision)?.["adopt-when"];
  return [
    ...noPrimary(metrics),
    ...metrics.flatMap((metric) => [
      ...ofOneRole(metric),
      ...margin(metric),
      ...(adoptWhen === "shown-worthwhile" ? worthwhileAskedFor(metric) : []),
      ...summaryRules(metric),
    ]),
    ...afterwards(plan).flatMap(summaryRules),
  ];
}

const ROLES = ["primary", "secondary", "guardrail"];

function noPrimary(metrics: readonly Item[]): readonly Problem[] {
  // a role that could not be read may have been meant as primary
  const mayDecide = metrics.some(
    ({ data }) => data.role === "primary" || (data.role !== undefined && !isRole(data.role)),
  );
  if (metrics.length === 0 || mayDecide) return [];
  const message = "No metric decides. Write role: primary at the one that does.";
  return [{ path: ["metrics"], at: "key", message }];
}

function ofOneRole({ path, data }: Item): readonly Problem[] {
  const role = data.role ?? "secondary";
  if (!isRole(role)) return [];
  const problems: Problem[] = [];
  if ("worthwhile" in data && role !== "primary") {
    const instead = role === "guardrail" ? "A guardrail has a margin." : "Write role: primary, or remove it.";
    const message = `worthwhile is for primary metrics; this one is ${role}. ${instead}`;
    problems.push({ path: [...path, "worthwhile"], at: "key", message });
  }
  if ("margin" in data && role !== "guardrail") {
    const message = `margin is for guardrails; this metric is ${role}. Write role: guardrail, or remove it.`;
    problems.push({ path: [...path, "margin"], at: "key", message });
  }
  return problems;
}

function margin({ path, data }: Item): readonly Problem[] {
  if (data.role !== "guardrail" || "margin" in data) return [];
  const message = "A guardrail needs a margin, the largest harm tolerated. Add one, such as margin: {relative: 5%}.";
  return [{ path, at: "key", message }];
}

function worthwhileAskedFor({ path, data }: Item): readonly Problem[] {
  if (data.role !== "primary" || "worthwhile" in data) return [];
  const message =
    "The decision asks for shown-worthwhile, so a primary metric needs worthwhile. Add it, such as worthwhile: {relative: 5%}.";
  return [{ path, at: "key", message }];
}

function isRole(role: unknown): boolean {
  return ROLES.some((known) => known === role);
}
