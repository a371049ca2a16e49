import type { AccrualDay } from "../../decision/index.ts";
import type { Plan } from "../../plan/types.ts";
import { count, type Day, dateSpan, quoted } from "../../words/index.ts";
import type { AccrualMark } from "../charts/accrual.ts";
import { incidentDays } from "../incidents.ts";

/** An incident of the plan beside the units that enrolled on its days. */
export interface IncidentMark {
  /** Its place in the plan: a, b, ... */
  readonly letter: string;
  readonly name: string;
  /** "7 to 9 March 2026". */
  readonly when: string;
  /** Days since 1970-01-01, local; both are touched. */
  readonly first: number;
  readonly last: number;
  /** How many units were in before its first day and after its last; null where that is before the first day shown. */
  readonly from: number | null;
  readonly to: number | null;
}

/**
 * The plan's incidents on an axis of units enrolled, in plan order.
 * @param days the days shown
 * @param since the first day on which somebody counted enrolled: before it there were none
 */
export function incidentMarks(plan: Plan, days: readonly AccrualDay[], since: number | undefined): IncidentMark[] {
  const upTo = (day: number): number | null => {
    const units = days.findLast((shown) => shown.day <= day)?.units;
    return units ?? (since !== undefined && day < since ? 0 : null);
  };
  return incidentDays(plan).map(({ name, ...at }, i) => {
    const [first, last] = [numberOf(at.first), numberOf(at.last)];
    const when = dateSpan(at.first, at.last);
    return { letter: letterOf(i), name, when, first, last, from: upTo(first - 1), to: upTo(last) };
  });
}

/** Those that have a place in the drawing; one that began before the first day shown begins with it. */
export function drawnMarks(marks: readonly IncidentMark[], days: readonly AccrualDay[]): AccrualMark[] {
  const start = days[0]?.units ?? 0;
  return marks.flatMap(({ letter, from, to }) =>
    to === null ? [] : [{ letter, from: from ?? start, to, isBegun: from === null }],
  );
}

/** What the marks are and whose; empty without incidents. */
export function marksReading(marks: readonly IncidentMark[], { unitCalled: { many } }: Plan): string {
  if (marks.length === 0) return "";
  const uprights = marks.some(({ to }) => to !== null)
    ? ` Dotted upright with a letter: so many ${many} were in before the first day of an incident; the line at its top spans those enrolled on its days.`
    : "";
  return `${uprights} ${namesOf(marks)}`;
}

/** "Incidents: a, "strike", 7 to 9 March 2026; b, ...". */
export function namesOf(marks: readonly IncidentMark[]): string {
  if (marks.length === 0) return "";
  const each = marks.map(
    ({ letter, name, when, to }) =>
      `${letter}, ${quoted(name)}, ${when}${to === null ? ", before the first day shown" : ""}`,
  );
  return `${marks.length === 1 ? "Incident" : "Incidents"}: ${each.join("; ")}.`;
}

/** For those who cannot see where the marks stand; empty without any. */
export function marksInWords(marks: readonly IncidentMark[], { unitCalled: { one, many } }: Plan): string {
  const each = marks.flatMap(({ letter, name, when, from, to }) => {
    if (to === null) return [];
    const place =
      from === null
        ? `begun before the first day shown, up to ${count(to)} ${many}`
        : from === to
          ? `at ${count(from)} ${many}, since no ${one} shown here was enrolled then`
          : `from ${count(from)} to ${count(to)} ${many}`;
    return [`${letter}, ${quoted(name)}, ${when}, ${place}`];
  });
  return each.length === 0 ? "" : ` Marked: ${each.join("; ")}.`;
}

/** The letters of the incidents that touch a day: "a, b". */
export function lettersOn(marks: readonly IncidentMark[], day: number): string {
  return marks
    .filter(({ first, last }) => first <= day && day <= last)
    .map(({ letter }) => letter)
    .join(", ");
}

const LETTERS = "abcdefghijklmnopqrstuvwxyz";

/** a to z, then a2 to z2. */
function letterOf(i: number): string {
  const round = Math.floor(i / LETTERS.length);
  return `${LETTERS.charAt(i % LETTERS.length)}${round === 0 ? "" : round + 1}`;
}

const numberOf = ({ year, month, day }: Day): number => Date.UTC(year, month - 1, day) / 86_400_000;
