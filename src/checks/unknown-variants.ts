import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, list, percent, plural, quoted } from "../words/index.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { sum, unitsOn } from "./ledger.ts";
import { byShare } from "./limits.ts";
import { nearest } from "./nearest.ts";
import type { Check } from "./types.ts";
import { units } from "./words.ts";

const NAMES_SHOWN = 5;

/** Units enrolled in a variant that the plan lacks, as a share of all units with an enrolling row. */
export function unknownVariants(plan: Plan, reduction: Reduction): Check | null {
  const unknown = unitsOn(reduction, "unknown-variant").units;
  const enrolling = unknown + sum(reduction.facts.enrolled);
  if (enrolling === 0) return null;
  const finding = judge(plan, reduction, unknown, enrolling);
  return asCheck("unknown-variants", [finding], finding.figures);
}

function judge(plan: Plan, reduction: Reduction, unknown: number, enrolling: number): Finding {
  const share = unknown / enrolling;
  const known = plan.variants.map((variant) => variant.name);
  const names = reduction.facts.variants
    .filter(({ value }) => !known.includes(value))
    .slice(0, NAMES_SHOWN)
    .map(({ value, rows }) => ({ value, rows, nearest: nearest(value, known) }));
  const figures = { units: unknown, share, names };
  if (unknown === 0)
    return passed("units", `No ${plan.unitCalled.one} was enrolled in a variant that the plan lacks.`, figures);

  const seen = names.map(
    ({ value, rows, nearest: near }) =>
      `${quoted(value)} (${plural(rows, "row", "rows")}${near === null ? "" : `; nearest in the plan: ${quoted(near)}`})`,
  );
  const naming = seen.length === 0 ? "" : `: ${list(seen)}`;
  const sentence = `${units(plan, unknown)} of ${count(enrolling)} (${percent(share)}) ${unknown === 1 ? "was" : "were"} enrolled in a variant that the plan lacks${naming}.`;
  const amount = byShare(share);
  if (amount === "little") return passed("units", sentence, figures);
  const remedy = `If such a name is one of the plan's variants written otherwise, correct the plan or the log: these ${plan.unitCalled.many} are not counted.`;
  return { about: "units", result: "caution", strong: amount === "very-much", sentence, remedy, figures };
}
