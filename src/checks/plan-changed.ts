import type { PlanChange } from "../plan/index.ts";
import { plural } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import type { Check, CheckPart } from "./types.ts";

/**
 * Was the plan changed once a result had been seen? Of a rerun only.
 * @param changes since the first report; texts without effect on any number are not among what is judged
 */
export function planChanged(changes: readonly PlanChange[]): Check | null {
  const judged = changes.filter(({ counts }) => counts);
  const rule = judged.filter(({ decides }) => decides);
  const figures = { changes: judged.length, ofTheRule: rule.length };
  if (judged.length === 0) {
    return asCheck("plan-changed", [passed("the plan", "The plan counts and decides as in the first run.", {})], figures);
  }
  const findings = [...rule, ...judged.filter(({ decides }) => !decides)].map(finding);
  return asCheck("plan-changed", [...overall(findings, rule.length), ...findings.slice(rule.length > 0 ? 1 : 0)], figures);
}

/** The part that the whole check speaks with: of the rule the first change, else how many there are. */
function overall(findings: readonly Finding[], rule: number): Finding[] {
  const [first] = findings;
  if (first === undefined) return [];
  if (rule > 0) {
    const more = rule === 1 ? "" : ` So ${rule === 2 ? "was" : "were"} ${plural(rule - 1, "other part", "other parts")} of it.`;
    return [{ ...first, sentence: first.sentence + more }];
  }
  return [
    {
      about: "the plan",
      result: "caution",
      strong: false,
      sentence: `The plan was changed after a result had been seen (${plural(findings.length, "change", "changes")}; both versions: section 2). The rule itself is the one of the first run.`,
      remedy: "Say in the plan why. Section 2 shows what each change moved.",
      figures: {},
    },
  ];
}

function finding(change: PlanChange): Finding {
  const { before, after } = change;
  const figures: CheckPart["figures"] = { before, after, decides: change.decides };
  if (!change.decides) {
    return { about: change.place, result: "caution", strong: false, sentence: wording(change), remedy: "", figures };
  }
  return {
    about: change.place,
    result: "caution",
    strong: true,
    sentence: `The rule was changed after a result had been seen: ${wording(change)}`,
    remedy:
      "Judge the result by the first rule too: its report is kept in history/. A rule that was written with the result in sight cannot prove it.",
    figures,
  };
}

/** '"metrics, Booked: worthwhile" was {relative: 5%}, is {relative: 3%}.' */
function wording({ place, kind, before, after }: PlanChange): string {
  switch (kind) {
    case "added":
      return `"${place}" was added: ${after ?? ""}.`;
    case "removed":
      return `"${place}" was removed: ${before ?? ""}.`;
    case "changed":
    case "moved":
      return `"${place}" was ${before ?? ""}, is ${after ?? ""}.`;
  }
}
