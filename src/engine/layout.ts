import type { Filter, Incident, Part, Plan, Where } from "../plan/types.ts";
import type { FileGroup } from "./source.ts";

/**
 * What the stages need to know of a plan, worked out once: which columns are read, which conditions are tested while
 * reading, and where their answers stand.
 */
export interface Layout {
  /**
   * The columns to read as text (c-th is x<c>). The first `ordered` of them, which the plan names, end the canonical order;
   * those up to `kept`, which only subgroups asked afterwards name, break what ties are left.
   */
  readonly columns: readonly string[];
  readonly ordered: number;
  readonly kept: number;
  /** Per column: whether its values must be numbers, which then stand as v<c>. */
  readonly numeric: readonly boolean[];
  /**
   * Per column: where it is nothing but the unit's, the event's or the event id's in every file that has it, the role and
   * the entries of the log where it is so; it need not be stored twice. Else null.
   */
  readonly standIns: readonly (StandIn | null)[];
  /** Columns whose value at enrolment is a covariate. */
  readonly covariateColumns: readonly number[];
  /** Columns whose value at enrolment divides the units, in plan order; then those asked afterwards. */
  readonly subgroupColumns: readonly number[];
  readonly hasTime: boolean;
  readonly hasEventId: boolean;
  /** Distinct conditions of metric parts (m<i>). */
  readonly matches: readonly Pick<Part, "event" | "where">[];
  readonly parts: readonly PartLayout[];
  readonly rowFilters: readonly Extract<Filter, { drop: "rows" }>[];
  /** In plan order. A flag is a condition tested while reading (w<i>). */
  readonly unitFilters: readonly UnitFilterLayout[];
  readonly flags: readonly Where[];
  /** In plan order; a flag is a condition on the enrolling row, null where the incident was everywhere. */
  readonly incidents: readonly IncidentLayout[];
}
export type IncidentLayout = Pick<Incident, "name" | "fromUs" | "beforeUs"> & { readonly flag: number | null };

export interface StandIn {
  readonly role: "unit" | "event" | "event_id";
  readonly sources: readonly number[];
}

export interface PartLayout {
  readonly metric: number;
  /** The metric's quantity, a ratio's denominator, or the quantity in the days before enrolment (a covariate). */
  readonly side: "of" | "per" | "before";
  readonly match: number;
  readonly part: Part;
  /** Index into `columns` of the value, null for count and days. */
  readonly value: number | null;
}

export type UnitFilterLayout =
  | { readonly name: string; readonly kind: "at-enrolment" | "ever"; readonly flag: number }
  | { readonly name: string; readonly kind: "listed"; readonly list: number; readonly listedIn: string };

/** @param groups the files as they were opened: which columns they have */
export function layout(plan: Plan, groups: readonly Pick<FileGroup, "source" | "columns">[]): Layout {
  const parts = plan.metrics.flatMap((metric, index) => [
    { metric: index, side: "of" as const, part: metric.of },
    ...(metric.per === null ? [] : [{ metric: index, side: "per" as const, part: metric.per }]),
    ...(metric.adjustFor?.kind === "days-before" ? [{ metric: index, side: "before" as const, part: metric.of }] : []),
  ]);
  const conditions = [
    ...parts.map(({ part }) => part.where),
    ...plan.filters.flatMap((filter) => ("where" in filter ? [filter.where] : [])),
    ...plan.incidents.map((incident) => incident.where),
  ];
  const tested = conditions.flatMap((tests) => tests.map((test) => test.column));
  const kept = [...new Set([...plan.columns, ...plan.askedAfterwards.subgroups])];
  const columns = [...new Set([...kept, ...plan.numericColumns, ...tested])];
  const matches = distinct(parts.map(({ part }) => ({ event: part.event, where: part.where })));
  const flags: Where[] = [];
  let lists = 0;
  const unitFilters = plan.filters.flatMap((filter): UnitFilterLayout[] => {
    if (filter.drop === "rows") return [];
    if ("listedIn" in filter) {
      return [{ name: filter.name, kind: "listed", list: lists++, listedIn: filter.listedIn }];
    }
    flags.push(filter.where);
    return [{ name: filter.name, kind: filter.when, flag: flags.length - 1 }];
  });
  const incidents = plan.incidents.map(({ name, fromUs, beforeUs, where }): IncidentLayout => {
    const flag = where.length === 0 ? null : flags.push(where) - 1;
    return { name, fromUs, beforeUs, flag };
  });
  return {
    columns,
    ordered: plan.columns.length,
    kept: kept.length,
    numeric: columns.map((column) => plan.numericColumns.includes(column)),
    covariateColumns: [
      ...new Set(
        plan.metrics.flatMap((metric) =>
          metric.adjustFor?.kind === "column" ? [columns.indexOf(metric.adjustFor.column)] : [],
        ),
      ),
    ],
    subgroupColumns: [...plan.subgroups, ...plan.askedAfterwards.subgroups].map((column) => columns.indexOf(column)),
    standIns: columns.map((column) => (plan.numericColumns.includes(column) ? null : standIn(plan, groups, column))),
    hasTime: plan.log.every((source) => source.columns.time !== null),
    hasEventId: plan.log.some((source) => source.columns.eventId !== null),
    matches,
    parts: parts.map(({ metric, side, part }) => ({
      metric,
      side,
      part,
      match: matches.findIndex((match) => same(match, part)),
      value: "column" in part.aggregate ? columns.indexOf(part.aggregate.column) : null,
    })),
    rowFilters: plan.filters.filter((filter) => filter.drop === "rows"),
    unitFilters,
    flags,
    incidents,
  };
}

function standIn(plan: Plan, groups: readonly Pick<FileGroup, "source" | "columns">[], column: string): StandIn | null {
  const having = groups.filter((group) => group.columns.includes(column));
  const roles = having.map((group) => {
    const ours = plan.log[group.source]?.columns;
    if (ours?.unit === column) return "unit";
    if (ours?.event === column) return "event";
    return ours?.eventId === column ? "event_id" : null;
  });
  const [role = null] = roles;
  if (role === null || roles.some((other) => other !== role)) return null;
  return { role, sources: [...new Set(having.map((group) => group.source))] };
}

type Condition = Pick<Part, "event" | "where">;

const same = (a: Condition, b: Condition) => a.event === b.event && JSON.stringify(a.where) === JSON.stringify(b.where);

function distinct(conditions: readonly Condition[]): Condition[] {
  return conditions.filter((condition, i) => conditions.findIndex((other) => same(other, condition)) === i);
}

/** The ids of the unit lines, in the order in which they are decided; a unit's `line` is an index into them. */
export function unitLineIds(plan: Plan): string[] {
  return [
    "not-enrolled",
    "outside-enrolment",
    "unknown-variant",
    ...(plan.enrolment.inTwoVariants === "exclude" ? ["switched"] : []),
    ...plan.filters.filter((filter) => filter.drop === "units").map((filter) => `filter:${filter.name}`),
    ...(plan.followUp === null ? [] : ["follow-up"]),
    "analysed",
  ];
}

/** A row's `fate` while it is not yet known what becomes of its unit. */
export const FATE = { seen: 0, rejected: 1, duplicate: 2, firstFilter: 3 } as const;
