import type { Plan } from "../plan/types.ts";

/**
 * The ledger's lines in the reader's words (DESIGN 7). A filter's name is the plan's, so it stands in quotes; an id that
 * is none of ours is our mistake.
 */
export function rowLine(id: string, plan: Plan): string {
  const filter = afterColon(id, "filter:");
  if (filter !== null) return `removed by the filter "${filter}"`;
  const unitFilter = afterColon(id, "unit-filter:");
  const { one, many } = plan.unitCalled;
  if (unitFilter !== null) return `of ${many} removed by the filter "${unitFilter}"`;
  switch (id) {
    case "rejected":
      return "rejected: could not be read";
    case "duplicate":
      return "duplicates: a row with the same event id came before";
    case "unit-not-enrolled":
      return `of ${many} never enrolled`;
    case "unit-outside-enrolment":
      return `of ${many} first enrolled outside the planned dates`;
    case "unit-unknown-variant":
      return `of ${many} enrolled in a variant that the plan does not name`;
    case "unit-switched":
      return `of ${many} seen in two variants`;
    case "unit-follow-up":
      return `of ${many} not followed to the end`;
    case "before-enrolment":
      return `before the ${one} was enrolled`;
    case "after-follow-up":
      return "after the follow-up had ended";
    case "in-follow-up":
      return plan.followUp === null ? "from enrolment on: counted" : "within the follow-up: counted";
  }
  throw new Error(`the row ledger has a line "${id}" that the report has no words for`);
}

export function unitLine(id: string, plan: Plan): string {
  const filter = afterColon(id, "filter:");
  if (filter !== null) return `removed by the filter "${filter}"`;
  switch (id) {
    case "not-enrolled":
      return "never enrolled";
    case "outside-enrolment":
      return "first enrolled outside the planned dates";
    case "unknown-variant":
      return "enrolled in a variant that the plan does not name";
    case "switched":
      return "seen in two variants";
    case "follow-up":
      return plan.followUp === null ? "not followed to the end" : `not followed for ${days(plan.followUp.days)}`;
    case "analysed":
      return "counted";
  }
  throw new Error(`the unit ledger has a line "${id}" that the report has no words for`);
}

function days(n: number): string {
  return n === 1 ? "1 day" : `${n} days`;
}

function afterColon(id: string, prefix: string): string | null {
  return id.startsWith(prefix) ? id.slice(prefix.length) : null;
}
