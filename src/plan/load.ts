import { buildPlan } from "./build.ts";
import { columnMentions } from "./columns.ts";
import { ruleProblems } from "./rules/index.ts";
import { LATER, type Later, laterProblems } from "./rules/later.ts";
import { items, type Loose, mapping } from "./rules/loose.ts";
import { planSchema } from "./schema.ts";
import { correctKeys, shapeProblems } from "./shape.ts";
import type { PlanSource } from "./source.ts";
import type { Plan, Problem } from "./types.ts";
import { plainData, readYaml, type YamlText } from "./yaml.ts";

export type LoadedPlan =
  | { readonly plan: Plan; readonly source: PlanSource }
  | { readonly problems: readonly Problem[]; readonly source: PlanSource };

/**
 * Reads a plan. Either the plan, checked and with its defaults, or everything that is wrong with it; in both cases the
 * source, which places problems in the text and names the files of the log as far as they can be read.
 *
 * @param options.later what is refused as not built yet; another list than the program's is for tests
 */
export function loadPlan(text: string, { later = LATER }: { readonly later?: readonly Later[] } = {}): LoadedPlan {
  const { yaml, problems, isBroken } = readYaml(text);
  if (isBroken) return { problems, source: { yaml, mentions: [], log: [], lists: [] } };

  const misspelt = correctKeys(yaml);
  const { value, problems: faults } = plainData(yaml);
  const plan = mapping(value);
  const source = planSource(yaml, plan ?? {});
  if (plan === null) return { problems: [...problems, notAPlan(value)], source };

  const read = [...problems, ...misspelt, ...faults];
  const told = new Set(faults.filter(({ at }) => at === "value").map(({ path }) => JSON.stringify(path)));
  const checked = [...shapeProblems(plan, yaml), ...ruleProblems(plan, yaml), ...laterProblems(plan, later)];
  const all = [...read, ...checked.filter(({ path }) => !told.has(JSON.stringify(path)))];
  if (all.length > 0) return { problems: all, source };
  return { plan: buildPlan(planSchema.parse(plan), source), source };
}

function planSource(yaml: YamlText, plan: Loose): PlanSource {
  const log = Array.isArray(plan.log) ? plan.log : [];
  return {
    yaml,
    mentions: columnMentions(yaml),
    log: log.map((entry: unknown) => ({ files: [mapping(entry)?.files].flat().filter(isText) })),
    lists: items(plan, "filters").flatMap(({ path, data }) => {
      const file = data["listed-in"];
      return isText(file) ? [{ filter: Number(path[1]), file }] : [];
    }),
  };
}

function notAPlan(value: unknown): Problem {
  const what = value === null || value === undefined ? "The plan is empty." : "This is no plan.";
  return {
    path: [],
    at: "value",
    message: `${what} Expected keys such as experiment:, question:, log:, variants: and metrics:.`,
  };
}

function isText(value: unknown): value is string {
  return typeof value === "string" && value.trim() !== "";
}
