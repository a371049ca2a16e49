import type { Level, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { list, plural, quoted } from "../words/index.ts";
import { byGroup, type Grouping } from "./by-group.ts";
import { asCheck } from "./finding.ts";
import type { Check } from "./types.ts";

/** Do the units of every level of a subgroup column split alike? A fault in one country shows. Parts: one a column. */
export function allocationByLevel(plan: Plan, reduction: Reduction): Check | null {
  return asCheck(
    "allocation-by-level",
    levelGroupings(plan, reduction).flatMap((grouping) => byGroup(plan, reduction, grouping)),
    {},
  );
}

/** Each subgroup column of the plan as a grouping. */
export function levelGroupings(plan: Plan, { facts }: Reduction): Grouping[] {
  return facts.subgroups.map(({ column, levels }, s) => {
    const name = (place: number) => levelInWords(levels[place]?.level);
    const at = (places: readonly number[]) => `where ${quoted(column)} is ${list(places.map(name), "or")}`;
    return {
      about: (stage) => (stage === "enrolled" ? column : `${column}, counted`),
      groups: (facts.soundness.levels[s] ?? []).map((group, place) => ({ key: name(place), ended: group.ended })),
      everywhere: `for every ${quoted(column)}`,
      at,
      elsewhere: "elsewhere",
      remedy: (places) =>
        `Find out how ${plan.unitCalled.many} were given a variant ${at(places)}, and whether their rows arrive. If it cannot be mended, leave these ${plan.unitCalled.many} out by a filter (when: at-enrolment), and say so.`,
    };
  });
}

/** A value stands in quotes; what is none does not. */
function levelInWords(level: Level | undefined): string {
  switch (level?.kind) {
    case "value":
      return quoted(level.text);
    case "rest":
      return `one of ${plural(level.levels, "rarer value", "rarer values")}`;
    case "missing":
      return "missing";
    case undefined:
      throw new Error("a level that the engine did not name");
  }
}
