import type { Problem } from "../types.ts";
import { periodProblems } from "./enrolment.ts";
import { items, type Loose } from "./loose.ts";

/** When each incident was. */
export function incidentRules(plan: Loose): readonly Problem[] {
  const empty = (from: string) => `The incident would have no length: from (${from}) is not before this.`;
  return items(plan, "incidents").flatMap(({ path, data }) => periodProblems(plan, path, data, empty));
}
