import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { count, list, percent, plural, rejectReason } from "../words/index.ts";
import { armsAlike } from "./arms.ts";
import { asCheck, type Finding, passed } from "./finding.ts";
import { rowsOn } from "./ledger.ts";
import { byP, byShare } from "./limits.ts";
import type { Check, CheckOutcome } from "./types.ts";
import { groupShares, ofDifference, perVariant } from "./words.ts";

const OUTCOME: Readonly<Record<ReturnType<typeof byShare>, CheckOutcome>> = {
  little: "pass",
  much: "caution",
  "very-much": "fail",
};
const REASONS_NAMED = 3;

/** Rows that could not be used: how many, and whether units of one arm have more of them. */
export function rejected(plan: Plan, reduction: Reduction): Check | null {
  if (reduction.rowsRead === 0) return null;
  const arms = byArm(plan, reduction);
  const whole = ofRows(plan, reduction);
  return asCheck("rejected", [whole, ...(arms === null ? [] : [arms])], whole.figures);
}

/** The same for all variants together, before the end: a variant that makes people do more has more rows to be rejected. */
export function rejectedTogether(plan: Plan, reduction: Reduction): Check | null {
  if (reduction.rowsRead === 0) return null;
  const whole = ofRows(plan, reduction, "check-rejects.csv");
  return asCheck("rejected", [whole], whole.figures);
}

function ofRows({ unitCalled }: Plan, reduction: Reduction, listedIn = "rejects.csv"): Finding {
  const rows = rowsOn(reduction, "rejected");
  const share = rows / reduction.rowsRead;
  const figures = { rows, share };
  if (rows === 0) return passed("rows", `All ${count(reduction.rowsRead)} rows could be read.`, figures);
  const reasons = reduction.rejectReasons
    .slice(0, REASONS_NAMED)
    .map(({ reason, rows: n }) => `${rejectReason(reason, unitCalled)} (${plural(n, "row", "rows")})`);
  const why = reasons.length === 0 ? "" : `, most often: ${list(reasons)}`;
  const sentence = `${plural(rows, "row", "rows")} of ${count(reduction.rowsRead)} (${percent(share)}) could not be used${why}.`;
  const result = OUTCOME[byShare(share)];
  if (result === "pass") return passed("rows", sentence, figures);
  const remedy = `Look at the rejected rows, each with file, line and reason, in ${listedIn}; mend what wrote them, and run this again.`;
  return { about: "rows", result, strong: false, sentence, remedy, figures };
}

function byArm(plan: Plan, reduction: Reduction): Finding | null {
  const { withRejected, enrolled } = reduction.facts;
  const p = armsAlike(withRejected, enrolled);
  if (p === null) return null;
  const { many } = plan.unitCalled;
  const figures = { units: perVariant(plan, withRejected), p };
  const counts = `Enrolled ${many} with a rejected row: ${groupShares(plan, withRejected, enrolled)}.`;
  const result = byP(p);
  const sentence = `${counts} ${ofDifference(p)}`;
  if (result === "pass") return passed("by variant", sentence, figures);
  const remedy = `Find out why rows of one group are damaged more often, with rejects.csv; until then what ${many} of that group did is missing more often.`;
  return { about: "by variant", result, strong: false, sentence, remedy, figures };
}
