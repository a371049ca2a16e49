import { buildPlan } from "./build.ts";
import { columnMentions } from "./columns.ts";
import { planSchema } from "./schema.ts";
import type { PlanSource } from "./source.ts";
import type { Plan, Problem } from "./types.ts";
import { plainData, readYaml } from "./yaml.ts";

/**
 * Reads a plan. Either the plan, checked and with its defaults, or everything that is wrong with it; in both cases the
 * source, which places problems in the text and names the files of the log as far as they can be read.
 */
export function loadPlan(
  text: string,
):
  | { readonly plan: Plan; readonly source: PlanSource }
  | { readonly problems: readonly Problem[]; readonly source: PlanSource } {
  const { yaml, problems } = readYaml(text);
  const { value, problems: dataProblems } = plainData(yaml);
  const source: PlanSource = { yaml, mentions: columnMentions(yaml), log: [], lists: [] };
  const checked = planSchema.safeParse(value);
  const all = [...problems, ...dataProblems];
  if (!checked.success) {
    return {
      problems: [
        ...all,
        ...checked.error.issues.map((i) => ({ path: i.path as string[], at: "value" as const, message: i.message })),
      ],
      source,
    };
  }
  if (all.length > 0) return { problems: all, source };
  return { plan: buildPlan(checked.data, source), source };
}
