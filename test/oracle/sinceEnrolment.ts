import type { Metric, Part, Plan } from "../../src/plan/types.ts";
import { DAY_US, partMatches } from "./span.ts";
import type { OracleSince, Row, UnitValue } from "./types.ts";
import { followUpEnd, type Unit } from "./units.ts";

const ONE = 1_000_000_000n;

/**
 * A metric by day since enrolment: every unit followed to the end, with what it did on each whole day of follow-up; null
 * where that is not told.
 * @param values the units' values of the whole follow-up, after the cap
 */
export function sinceOf(
  plan: Plan,
  metric: Metric,
  rowsOf: (unit: string) => readonly Row[],
  values: readonly UnitValue[],
  analysed: readonly Unit[],
  cap: bigint | null,
  end: bigint | null,
): OracleSince | null {
  const days = Math.floor(plan.followUp?.days ?? 0);
  const parts = metric.per === null ? [metric.of] : [metric.of, metric.per];
  const adds = ({ aggregate }: Part) => ["count", "sum", "days"].includes(aggregate.kind);
  const isTold = metric.summary !== "quantile" && (metric.summary === "proportion" || parts.every(adds));
  if (days < 2 || end === null || metric.role === "secondary" || !isTold) return null;
  const units = analysed.flatMap((unit) => {
    const { enrolledUs } = unit;
    const value = values.find((one) => one.unit === unit.unit);
    if (enrolledUs === null || value === undefined || followUpEnd(plan, enrolledUs) > end) return [];
    const own = rowsOf(unit.unit);
    const perDay = Array.from({ length: days }, (_, day) => {
      const from = enrolledUs + BigInt(day) * DAY_US;
      const rows = own.filter(({ us }) => us !== null && us >= from && us < from + DAY_US);
      return parts.map((part) => taken(metric, part, rows));
    });
    const of = perDay.map(([first = 0n]) => first);
    const per = metric.per === null ? null : perDay.map(([, second = 0n]) => second);
    return [{ unit: unit.unit, variant: value.variant, of: cap === null ? of : heldDown(of, cap), per }];
  });
  return { days, units };
}

function taken({ summary }: Metric, part: Part, rows: readonly Row[]): bigint {
  const own = rows.filter((row) => partMatches(part, row));
  const { aggregate } = part;
  if (summary === "proportion" || aggregate.kind === "days") return own.length > 0 ? ONE : 0n;
  if (!("column" in aggregate)) return BigInt(own.length) * ONE;
  return own.reduce((sum, row) => sum + (row.number(aggregate.column) ?? 0n), 0n);
}

/** What each day adds to the total so far, held down to the cap. */
function heldDown(days: readonly bigint[], cap: bigint): bigint[] {
  let total = 0n;
  return days.map((value) => {
    const before = total < cap ? total : cap;
    total += value;
    return (total < cap ? total : cap) - before;
  });
}
