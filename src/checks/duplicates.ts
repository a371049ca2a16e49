import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, percent, plural } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { rowsOn } from "./ledger.ts";
import { byPAtMostCaution, byShare } from "./limits.ts";
import type { Check } from "./types.ts";
import { groupShares, ofDifference, perVariant } from "./words.ts";

/** Rows that came more than once, by their event-id: how many, in which arm, and whether the copies agree. */
export function duplicates(plan: Plan, reduction: Reduction): Check | null {
  if (!reduction.facts.hasEventId || reduction.rowsRead === 0) return null;
  const rows = ofRows(reduction);
  const findings = [rows, copies(plan, reduction), byArm(plan, reduction)].filter((finding) => finding !== null);
  const { copiesThatDiffer, copiesOfOtherUnits } = reduction.facts;
  return asCheck("duplicates", findings, { ...rows.figures, copiesThatDiffer, copiesOfOtherUnits });
}

/** The same for all variants together, before the end: a variant that makes people do more has more rows to come twice. */
export function duplicatesTogether(plan: Plan, reduction: Reduction): Check | null {
  if (!reduction.facts.hasEventId || reduction.rowsRead === 0) return null;
  const rows = ofRows(reduction);
  const findings = [rows, copies(plan, reduction)].filter((finding) => finding !== null);
  const { copiesThatDiffer, copiesOfOtherUnits } = reduction.facts;
  return asCheck("duplicates", findings, { ...rows.figures, copiesThatDiffer, copiesOfOtherUnits });
}

function ofRows(reduction: Reduction): Finding {
  const rows = rowsOn(reduction, "duplicate");
  const share = rows / reduction.rowsRead;
  const figures = { rows, share, ids: reduction.facts.duplicateIds };
  if (rows === 0) return passed("rows", "No row came twice.", figures);
  const sentence = `${plural(rows, "row", "rows")} of ${count(reduction.rowsRead)} (${percent(share)}) repeated an event-id and ${rows === 1 ? "was" : "were"} not counted again.`;
  const amount = byShare(share);
  if (amount === "little") return passed("rows", sentence, figures);
  const remedy =
    "Find out where the log writes a row twice; copies without an event-id cannot be recognised and would be counted.";
  return { about: "rows", result: "caution", strong: amount === "very-much", sentence, remedy, figures };
}

function copies(plan: Plan, reduction: Reduction): Finding | null {
  const { duplicateIds, copiesThatDiffer, copiesOfOtherUnits } = reduction.facts;
  if (duplicateIds === 0) return null;
  const figures = { copiesThatDiffer, copiesOfOtherUnits };
  if (copiesThatDiffer === 0 && copiesOfOtherUnits === 0) {
    return passed("copies", "The copies of each row agree in every column that the plan names.", figures);
  }
  const differing = `${plural(copiesThatDiffer, "event-id", "event-ids")} came more than once with different content`;
  const others = `${plural(copiesOfOtherUnits, "event-id", "event-ids")} came from more than one ${plan.unitCalled.one}`;
  const found = [copiesThatDiffer > 0 ? differing : "", copiesOfOtherUnits > 0 ? others : ""].filter(
    (text) => text !== "",
  );
  const remedy =
    copiesOfOtherUnits > 0
      ? `Check that the event-id is written once for each event and not used again: rows of other ${plan.unitCalled.many} may have been taken for copies.`
      : "Find out which of the copies is right; if the later one is, correct the log and run the report again.";
  return {
    about: "copies",
    result: "caution",
    strong: false,
    sentence: `${found.join(", and ")}; the first was counted.`,
    remedy,
    figures,
  };
}

function byArm(plan: Plan, reduction: Reduction): Finding | null {
  const { withDuplicate, enrolled } = reduction.facts;
  const p = armsAlike(withDuplicate, enrolled);
  if (p === null) return null;
  const { many } = plan.unitCalled;
  const figures = { units: perVariant(plan, withDuplicate), p };
  const sentence = `Enrolled ${many} with a repeated row: ${groupShares(plan, withDuplicate, enrolled)}. ${ofDifference(p)}`;
  if (byPAtMostCaution(p) === "pass") return passed("by variant", sentence, figures);
  const remedy = `Find out why rows of one group come twice more often; where copies lack an event-id, what ${many} of that group did is counted too often.`;
  return { about: "by variant", result: "caution", strong: false, sentence, remedy, figures };
}
