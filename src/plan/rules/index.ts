import type { Problem } from "../types.ts";
import type { YamlText } from "../yaml.ts";
import { decisionRules } from "./decision.ts";
import { enrolmentRules } from "./enrolment.ts";
import { exactRules } from "./exact.ts";
import { filterRules } from "./filters.ts";
import { incidentRules } from "./incidents.ts";
import { logRules } from "./log.ts";
import { lookRules } from "./looks.ts";
import type { Loose } from "./loose.ts";
import { metricRules } from "./metrics.ts";
import { nameRules } from "./names.ts";
import { subgroupRules } from "./subgroups.ts";
import { variantRules } from "./variants.ts";

/** All rules about what only several keys together can show; one more is one more line here. */
const RULES: readonly ((plan: Loose, yaml: YamlText) => readonly Problem[])[] = [
  logRules,
  enrolmentRules,
  variantRules,
  metricRules,
  exactRules,
  filterRules,
  subgroupRules,
  nameRules,
  decisionRules,
  incidentRules,
  lookRules,
];

export function ruleProblems(plan: Loose, yaml: YamlText): readonly Problem[] {
  return RULES.flatMap((rule) => rule(plan, yaml));
}
