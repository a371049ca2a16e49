import type { ByVariant, Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { count, percent } from "../../words/index.ts";
import { NONE } from "../effect-text.ts";
import { rowLine, unitLine } from "../ledger.ts";

/** Section 4: the flow of units and the ledger of rows. */
export interface CountedSection {
  readonly many: string;
  readonly variants: readonly string[];
  readonly units: readonly FlowLine[];
  readonly rows: readonly LedgerLine[];
  readonly rowsRead: string;
  readonly rejectReasons: readonly { readonly reason: string; readonly rows: string }[];
  readonly filters: readonly { readonly name: string; readonly why: string }[];
}
export interface FlowLine {
  readonly kind: "total" | "left";
  readonly line: string;
  readonly byVariant: readonly string[];
  readonly all: string;
}
export interface LedgerLine {
  readonly line: string;
  readonly rows: string;
  readonly share: string;
}

export function countedSection(plan: Plan, reduction: Reduction): CountedSection {
  return {
    many: plan.unitCalled.many,
    variants: plan.variants.map(({ name }) => name),
    units: unitFlow(plan, reduction),
    rows: reduction.rowLines.map(({ id, rows }) => ({
      line: rowLine(id, plan),
      rows: count(rows),
      share: reduction.rowsRead === 0 ? NONE : percent(rows / reduction.rowsRead),
    })),
    rowsRead: count(reduction.rowsRead),
    rejectReasons: reduction.rejectReasons.map(({ reason, rows }) => ({ reason, rows: count(rows) })),
    filters: plan.filters.map(({ name, why }) => ({ name, why: why ?? "the plan gives no reason" })),
  };
}

const BEFORE_ENROLMENT = ["not-enrolled", "outside-enrolment", "unknown-variant"];

/** As in the CONSORT flow diagram: seen, left before enrolment, enrolled, left after it and why, counted. */
function unitFlow(plan: Plan, { unitLines, unitsSeen }: Reduction): FlowLine[] {
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
