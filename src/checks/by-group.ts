import type { EndedUnits } from "../engine/soundnessTypes.ts";
import type { ByVariant, Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { pText } from "../words/index.ts";
import type { Finding } from "./finding.ts";
import { added, groupSteps, lineInWords, removedBy, type Step, stepRemedy } from "./flow.ts";
import { groupsAlike, groupsOff } from "./groups.ts";
import { byP } from "./limits.ts";
import type { Figure } from "./types.ts";
import { byChance, groups as groupsText, perVariant } from "./words.ts";

/** Units divided by something that chance does not know of: the day of enrolment, or a column's value. */
export interface Grouping {
  /** What a part is called: "enrolled"; 'country'. */
  readonly about: (stage: "enrolled" | "analysed") => string;
  readonly groups: readonly (EndedUnits & { readonly key: string })[];
  /** "on every day"; 'in every group by "country"'. */
  readonly everywhere: string;
  /** Some of the groups: "on 2 to 4 March 2026"; 'with "NO"'. */
  readonly at: (places: readonly number[]) => string;
  /** All others: "on all other days". */
  readonly elsewhere: string;
  /** What to do when these groups split otherwise at enrolment. */
  readonly remedy: (places: readonly number[]) => string;
}

/** Is the split the same in every group, of those enrolled and again of those analysed? No part where nothing can be compared. */
export function byGroup(plan: Plan, reduction: Reduction, grouping: Grouping): Finding[] {
  const steps = grouping.groups.map((group) => groupSteps(reduction, group));
  const enrolled = grouping.groups.map(({ ended }) => added(ended));
  const analysed = grouping.groups.map(({ ended }) => ended.at(-1) ?? []);
  const first = judge(plan, grouping, "enrolled", enrolled, null);
  const isSame = enrolled.every((counts, i) => counts.every((units, v) => units === analysed[i]?.[v]));
  if (isSame) return first === null ? [] : [first];
  const broke = first?.result === "fail" ? null : breaking(steps, analysed);
  const second = judge(plan, grouping, "analysed", analysed, broke);
  return [first, second].filter((finding) => finding !== null);
}

/** One step of all groups. */
interface GroupsStep {
  readonly steps: readonly Step[];
}

function judge(
  plan: Plan,
  grouping: Grouping,
  stage: "enrolled" | "analysed",
  counts: readonly ByVariant[],
  broke: GroupsStep | null,
): Finding | null {
  const test = groupsAlike(counts);
  if (test === null) return null;
  const { chiSquare, df, p } = test;
  const result = byP(p);
  const verb = stage === "enrolled" ? "enrolled" : "counted";
  const figures = { stage, chiSquare, df, p };
  if (result === "pass") {
    const sentence = `Of those ${verb}, the split is the same ${grouping.everywhere}, as far as chance goes (${pText(p)}).`;
    return { about: grouping.about(stage), result, strong: false, sentence, remedy: "", figures };
  }
  const off = groupsOff(plan, counts);
  const others = added(counts.filter((_, i) => !off.includes(i)));
  const here = added(counts.filter((_, i) => off.includes(i)));
  const rest = off.length === counts.length ? "" : `, ${grouping.elsewhere} ${groupsText(plan, others)}`;
  const named = `The split is not the same ${grouping.everywhere}: ${grouping.at(off)} ${verb} were ${groupsText(plan, here)}${rest}.`;
  const step = broke?.steps[0];
  const where = broke === null || step === undefined ? "" : ` ${brokenHere(plan, grouping, broke, off)}`;
  return {
    about: grouping.about(stage),
    result,
    strong: false,
    sentence: `${named} ${byChance("so large a difference", p)}${where}`,
    remedy: step === undefined ? grouping.remedy(off) : stepRemedy(plan, step),
    figures: {
      ...figures,
      off: off.map((i) => grouping.groups[i]?.key ?? ""),
      ...(step === undefined ? {} : { brokenAt: step.line }),
      counts: Object.fromEntries(
        grouping.groups.map(({ key }, i): [string, Figure] => [key, perVariant(plan, counts[i] ?? [])]),
      ),
    },
  };
}

/** The first step after which the groups differ as much as at the end. */
function breaking(all: readonly (readonly Step[])[], atTheEnd: readonly ByVariant[]): GroupsStep | null {
  const test = groupsAlike(atTheEnd);
  if (test === null || byP(test.p) === "pass") return null;
  const asBad = (counts: readonly ByVariant[]) => {
    const found = groupsAlike(counts);
    return found !== null && (byP(found.p) === "fail" || byP(found.p) === byP(test.p));
  };
  for (const k of (all[0] ?? []).keys()) {
    const steps = all.flatMap((own) => own.slice(k, k + 1));
    if (asBad(steps.map(({ before }) => before))) return null;
    if (asBad(steps.map(({ after }) => after))) return { steps };
  }
  return null;
}

function brokenHere(plan: Plan, grouping: Grouping, { steps }: GroupsStep, off: readonly number[]): string {
  const line = steps[0]?.line ?? "";
  const removed = added(steps.filter((_, i) => off.includes(i)).map(removedBy));
  return `Where it broke: ${lineInWords(plan, line)} removed ${groupsText(plan, removed)} ${grouping.at(off)}.`;
}
