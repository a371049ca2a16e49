import type { ByVariant, MetricLedger, Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { count, exact, percent, plural, quoted, rejectReason } from "../../words/index.ts";
import { NONE } from "../effect-text.ts";
import { rowLine, unitLine } from "../ledger.ts";

/** Section 4: the flow of units, the ledger of rows, and that of each metric's rows. */
export interface CountedSection {
  readonly one: string;
  readonly many: string;
  readonly variants: readonly string[];
  readonly units: readonly FlowLine[];
  readonly rows: readonly LedgerLine[];
  readonly rowsRead: string;
  readonly metrics: readonly MetricRows[];
  readonly rejectReasons: readonly { readonly reason: string; readonly rows: string }[];
  /** The file that lists each rejected row. */
  readonly rejectsFile: string;
  readonly filters: readonly { readonly name: string; readonly why: string }[];
}
export interface FlowLine {
  readonly kind: "total" | "left";
  readonly line: string;
  readonly byVariant: readonly string[];
  readonly all: string;
}
/** The ledger of one metric's rows. */
export interface MetricRows {
  readonly name: string;
  /** "12,650 of 13,204 rows counted", to be read while the table is closed. */
  readonly gist: string;
  /** 'sum of "fare"'; null where the metric takes no column. */
  readonly sumOf: string | null;
  readonly lines: readonly { readonly line: string; readonly rows: string; readonly sum: string | null }[];
  readonly all: { readonly rows: string; readonly sum: string | null };
}
export interface LedgerLine {
  readonly line: string;
  readonly rows: string;
  readonly share: string;
}

export function countedSection(
  plan: Plan,
  reduction: Omit<Reduction, "metrics" | "groups">,
  rejectsFile = "rejects.csv",
): CountedSection {
  return {
    one: plan.unitCalled.one,
    many: plan.unitCalled.many,
    variants: plan.variants.map(({ name }) => name),
    units: unitFlow(plan, reduction),
    rows: reduction.rowLines.map(({ id, rows }) => ({
      line: rowLine(id, plan),
      rows: count(rows),
      share: reduction.rowsRead === 0 ? NONE : percent(rows / reduction.rowsRead),
    })),
    rowsRead: count(reduction.rowsRead),
    metrics: reduction.metricLedgers.map((ledger) => metricRows(plan, ledger)),
    rejectReasons: reduction.rejectReasons.map(({ reason, rows }) => ({
      reason: rejectReason(reason, plan.unitCalled),
      rows: count(rows),
    })),
    rejectsFile,
    filters: plan.filters.map(({ name, why }) => ({ name, why: why ?? "the plan gives no reason" })),
  };
}

function metricRows(plan: Plan, { metric, lines }: MetricLedger): MetricRows {
  const planned = plan.metrics.find(({ name }) => name === metric);
  if (planned === undefined) throw new Error(`a ledger of ${metric}, which is no metric of the plan`);
  const { aggregate } = planned.of;
  const all = lines.reduce((sum, { rows }) => sum + rows, 0);
  const total = lines.reduce<bigint | null>((sum, line) => (line.sum === null ? sum : (sum ?? 0n) + line.sum), null);
  const counted = lines.at(-1)?.rows ?? 0;
  return {
    name: metric,
    gist: `${count(counted)} of ${plural(all, "row", "rows")} counted${planned.per === null ? "" : " (of what is divided)"}`,
    sumOf: "column" in aggregate ? `sum of ${quoted(aggregate.column)}` : null,
    lines: lines.map(({ id, rows, sum }) => ({
      line: rowLine(id, plan),
      rows: count(rows),
      sum: sum === null ? null : exact(sum),
    })),
    all: { rows: count(all), sum: total === null ? null : exact(total) },
  };
}

const BEFORE_ENROLMENT = ["not-enrolled", "outside-enrolment", "unknown-variant"];

/** As in the CONSORT flow diagram: seen, left before enrolment, enrolled, left after it and why, counted. */
function unitFlow(plan: Plan, { unitLines, unitsSeen }: Pick<Reduction, "unitLines" | "unitsSeen">): FlowLine[] {
  const before = unitLines.filter((line) => BEFORE_ENROLMENT.includes(line.id));
  const after = unitLines.filter((line) => !BEFORE_ENROLMENT.includes(line.id));
  const none = plan.variants.map(() => "");
  const left = ({ id, units, byVariant }: (typeof unitLines)[number]): FlowLine => ({
    kind: id === "analysed" ? "total" : "left",
    line: id === "analysed" ? "Counted" : unitLine(id, plan),
    byVariant: byVariant === null ? none : byVariant.map(count),
    all: count(units),
  });
  const enrolled = after.reduce(
    (sums, line) => added(sums, line.byVariant, line.id),
    plan.variants.map(() => 0),
  );
  return [
    { kind: "total", line: "Seen in the log", byVariant: none, all: count(unitsSeen) },
    ...before.map(left),
    {
      kind: "total",
      line: "Enrolled in a variant of the plan",
      byVariant: enrolled.map(count),
      all: count(enrolled.reduce((a, b) => a + b, 0)),
    },
    ...after.map(left),
  ];
}

function added(sums: readonly number[], counts: ByVariant | null, id: string): number[] {
  if (counts === null) throw new Error(`the ledger line ${id} comes after enrolment but is not counted by variant`);
  return sums.map((sum, v) => sum + (counts[v] ?? 0));
}
