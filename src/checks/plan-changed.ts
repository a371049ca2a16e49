import { type Plan, type PlanChange, sealDifference, sealOf } from "../plan/index.ts";
import { list, plural } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import type { Check, CheckPart } from "./types.ts";

/**
 * Did the rule come before the result? Of a rerun: was the plan changed once a result had been seen; of a plan whose rule
 * was kept before the start: is it that rule.
 * @param changes since the first report, null in a first report; texts without effect on any number are not judged
 */
export function planChanged(plan: Plan, changes: readonly PlanChange[] | null): Check | null {
  // the next of the planned looks is no change of plan
  const judged = changes?.filter(({ counts, place }) => counts && place !== "looks: at") ?? [];
  const rule = judged.filter(({ decides }) => decides);
  const findings = [...rule, ...judged.filter(({ decides }) => !decides)].map(finding);
  const since =
    changes === null
      ? []
      : judged.length === 0
        ? [passed("the plan", "The plan counts and decides as in the first run.", {})]
        : [...overall(findings, rule.length), ...findings.slice(rule.length > 0 ? 1 : 0)];
  return asCheck("plan-changed", [...registered(plan), ...since], {
    changes: judged.length,
    ofTheRule: rule.length,
  });
}

/** The rule against the fingerprint that was kept before the start. */
function registered(plan: Plan): Finding[] {
  if (plan.registered === null) return [];
  const { on, where, fingerprint } = plan.registered;
  const kept = `kept on ${on}${where === null ? "" : ` (${where})`}`;
  const own = sealOf(plan).fingerprint;
  const differ = sealDifference(fingerprint, own);
  const figures = { kept: fingerprint, now: own };
  if (differ.length === 0) {
    return [passed("the rule kept before", `The rule is the one ${kept}: unchanged since.`, figures)];
  }
  return [
    {
      about: "the rule kept before",
      result: "caution",
      strong: true,
      sentence: `The rule is not the one ${kept}: it differs in ${list(differ)}.`,
      remedy: "Compare the plan with the one that was kept, and judge the result by that one.",
      figures,
    },
  ];
}

/** The part that the whole check speaks with: of the rule the first change, else how many there are. */
function overall(findings: readonly Finding[], rule: number): Finding[] {
  const [first] = findings;
  if (first === undefined) return [];
  if (rule > 0) {
    const more =
      rule === 1 ? "" : ` So ${rule === 2 ? "was" : "were"} ${plural(rule - 1, "other part", "other parts")} of it.`;
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
