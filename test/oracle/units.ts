import { type ColumnTable, op, escape as rowwise } from "arquero";
import type { Filter, Incident, Plan } from "../../src/plan/types.ts";
import { rowAt, type SettledRow } from "./ledger.ts";
import { DAY_US } from "./span.ts";
import type { Lists, Row } from "./types.ts";
import { holds } from "./where.ts";

/** One seen unit. What comes of its enrolling row is null where it has none. */
export interface Unit {
  readonly unit: string;
  readonly line: string;
  readonly enrolling: Row | null;
  /** Place in the plan's variants; -1 for one that the plan lacks; null where it is not enrolled. */
  readonly variant: number | null;
  readonly enrolledUs: bigint | null;
  readonly switched: boolean;
}

/** Rules 5 and 6: every unit with a surviving row, and the line that it ends on. */
export function seeUnits(
  plan: Plan,
  rows: readonly Row[],
  settled: ColumnTable,
  end: bigint | null,
  lists: Lists,
): Unit[] {
  const surviving = settled.filter((row) => row.line === null);
  const seen = surviving.groupby("unit").rollup({ all: op.array_agg("at") });
  const enrolled = surviving
    .filter(rowwise((row: SettledRow) => enrols(plan, rowAt(rows, row.at))))
    .groupby("unit")
    .rollup({ first: op.min("rank") })
    .join(settled, ["first", "rank"], [["unit"], ["at"]]);
  const units = seen.join_left(enrolled, "unit", [["unit", "all"], ["at"]]).objects();
  return (units as { unit: string; all: number[]; at: number | undefined }[]).map(({ unit, all, at }) => {
    const enrolling = at === undefined ? null : rowAt(rows, at);
    const unitRows = all.map((place) => rowAt(rows, place));
    const switched =
      new Set(unitRows.map((row) => row.variantIndex).filter((index) => index !== null && index >= 0)).size > 1;
    return {
      unit,
      enrolling,
      variant: enrolling?.variantIndex ?? null,
      enrolledUs: enrolling?.us ?? null,
      switched,
      line: unitLine(plan, { unit, enrolling, rows: unitRows, switched, end, lists }),
    };
  });
}

/** An enrolling row names a variant, the plan's or another, and has the enrolment event where one is given. */
export function enrols(plan: Plan, row: Row): boolean {
  return row.variant !== null && (plan.enrolment.event === null || row.event === plan.enrolment.event);
}

interface Known {
  readonly unit: string;
  readonly enrolling: Row | null;
  readonly rows: readonly Row[];
  readonly switched: boolean;
  readonly end: bigint | null;
  readonly lists: Lists;
}

function unitLine(plan: Plan, known: Known): string {
  const { enrolling } = known;
  if (enrolling === null) return "not-enrolled";
  if (isOutside(plan, enrolling.us)) return "outside-enrolment";
  if (enrolling.variantIndex === -1) return "unknown-variant";
  if (plan.enrolment.inTwoVariants === "exclude" && known.switched) return "switched";
  const filter = plan.filters.find((candidate) => dropsUnit(candidate, enrolling, known));
  if (filter !== undefined) return `filter:${filter.name}`;
  if (isUnfollowed(plan, enrolling.us, known.end)) return "follow-up";
  return "analysed";
}

/** Whether a unit's enrolling row falls into an incident; from is inside, before is not. */
export function isIn({ fromUs, beforeUs, where }: Incident, { enrolling, enrolledUs }: Unit): boolean {
  if (enrolling === null || enrolledUs === null) return false;
  return enrolledUs >= fromUs && enrolledUs < beforeUs && holds(where, enrolling.cell);
}

/** From is inside, before is not. */
function isOutside({ enrolment }: Plan, us: bigint | null): boolean {
  if (us === null) return false;
  return (
    (enrolment.fromUs !== null && us < enrolment.fromUs) || (enrolment.beforeUs !== null && us >= enrolment.beforeUs)
  );
}

function dropsUnit(filter: Filter, enrolling: Row, known: Known): boolean {
  if (filter.drop === "rows") return false;
  if ("listedIn" in filter) {
    const list = known.lists.get(filter.listedIn);
    if (list === undefined) throw new Error(`the list ${filter.listedIn} was not read`);
    return list.has(known.unit);
  }
  const looked = filter.when === "ever" ? known.rows : [enrolling];
  return looked.some((row) => holds(filter.where, row.cell));
}

function isUnfollowed(plan: Plan, enrolledUs: bigint | null, end: bigint | null): boolean {
  if (plan.followUp === null || plan.followUp.incomplete === "keep" || enrolledUs === null || end === null)
    return false;
  return followUpEnd(plan, enrolledUs) > end;
}

/** First instant that no longer counts. */
export function followUpEnd(plan: Plan, enrolledUs: bigint): bigint {
  if (plan.followUp === null) throw new Error("the plan has no follow-up");
  return enrolledUs + BigInt(Math.round(plan.followUp.days * Number(DAY_US)));
}

/** Every unit line of the plan, in order, also those that stand at 0. */
export function unitLineIds(plan: Plan): string[] {
  return [
    "not-enrolled",
    "outside-enrolment",
    "unknown-variant",
    ...(plan.enrolment.inTwoVariants === "exclude" ? ["switched"] : []),
    ...plan.filters.filter(({ drop }) => drop === "units").map(({ name }) => `filter:${name}`),
    ...(plan.followUp === null ? [] : ["follow-up"]),
    "analysed",
  ];
}

/** The row lines, in order. */
export function rowLineIds(plan: Plan): string[] {
  return [
    "rejected",
    "duplicate",
    ...plan.filters.filter(({ drop }) => drop === "rows").map(({ name }) => `filter:${name}`),
    ...unitLineIds(plan)
      .filter((id) => id !== "analysed")
      .map((id) => `unit-${id}`),
    "before-enrolment",
    "after-follow-up",
    "in-follow-up",
  ];
}
