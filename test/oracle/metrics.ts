import { createHash } from "node:crypto";
import { type ColumnTable, desc, from, op, escape as rowwise } from "arquero";
import type { Aggregate, Metric, Part, Plan } from "../../src/plan/types.ts";
import { rowAt } from "./ledger.ts";
import { ascending, nanoOf, readDecimal } from "./number.ts";
import { orderedArm, zFor } from "./quantile.ts";
import { sinceOf } from "./sinceEnrolment.ts";
import { DAY_US, partMatches } from "./span.ts";
import type { Clock } from "./time.ts";
import type { OracleMetric, Row, UnitValue } from "./types.ts";
import type { Unit } from "./units.ts";

const ONE = 1_000_000_000n;

/** What a part takes of one unit: its counted rows, and its value; null where there is none to take. */
interface Taken {
  readonly rows: number;
  readonly value: bigint | null;
}

/** Tables with `at` and `unit` of the rows of analysed units: in follow-up, and before enrolment. */
export interface RowTables {
  readonly counted: ColumnTable;
  readonly before: ColumnTable;
}

/** Rules 8 and 9 for one metric. */
export function metricOf(
  plan: Plan,
  metric: Metric,
  rows: readonly Row[],
  { counted, before: earlier }: RowTables,
  analysed: readonly Unit[],
  clock: Clock,
  end: bigint | null,
): Omit<OracleMetric, "ledger"> {
  const parts = metric.per === null ? [metric.of] : [metric.of, metric.per];
  const matched = parts.map((part) => new Set(matchedRows(part, rows, counted)));
  const numberless = parts.flatMap((part, place) =>
    [...(matched[place] ?? [])].filter((at) => lacksNumber(part, rowAt(rows, at))),
  );

  const of = takenOf(metric.of, rows, counted, clock);
  const per = metric.per === null ? null : takenOf(metric.per, rows, counted, clock);
  const covariate = covariateOf(metric, rows, earlier, analysed, clock);
  const before = analysed.flatMap((unit) => {
    const value = takenValue(metric, of.get(unit.unit));
    if (value === null) return [];
    return [unitValue(unit, value, per === null ? null : takenValue(metric, per.get(unit.unit)), covariate(unit))];
  });
  const cap = capOf(metric, before);
  const { quantile: q } = metric;
  const values = before.map((value) => (cap !== null && value.of > cap ? { ...value, of: cap } : value));
  const inFollowUp = counted.objects() as { at: number; unit: string }[];
  const rowsOf = (unit: string) => inFollowUp.filter((row) => row.unit === unit).map((row) => rowAt(rows, row.at));
  return {
    metric: metric.name,
    leftOut: byVariant(plan, (variant) => ofVariant(analysed, variant).length - ofVariant(before, variant).length),
    countedRows: new Set(matched.flatMap((set) => [...set])).size,
    countedWithoutNumber: new Set(numberless).size,
    cap:
      cap === null
        ? null
        : {
            value: cap,
            units: byVariant(plan, (variant) => ofVariant(before, variant).filter(({ of }) => of > cap).length),
          },
    values,
    since: sinceOf(plan, metric, rowsOf, values, analysed, cap, end),
    quantile:
      q === null
        ? null
        : plan.variants.map((_, at) => orderedArm(armValues(before, at), q, zFor(intervalsAtOnce(plan, metric)))),
  };
}

function matchedRows(part: Part, rows: readonly Row[], counted: ColumnTable): number[] {
  return counted
    .filter(rowwise((row: { at: number }) => partMatches(part, rowAt(rows, row.at))))
    .array("at") as number[];
}

function lacksNumber({ aggregate }: Part, row: Row): boolean {
  return "column" in aggregate && row.number(aggregate.column) === null;
}

function takenOf(part: Part, rows: readonly Row[], counted: ColumnTable, clock: Clock): Map<string, Taken> {
  const matched = from(
    matchedRows(part, rows, counted).map((at) => {
      const row = rowAt(rows, at);
      const value = "column" in part.aggregate ? row.number(part.aggregate.column) : null;
      const day = part.aggregate.kind === "days" && row.us !== null ? clock.day(row.us) : null;
      return { unit: row.unit, us: row.us, value, day };
    }),
    ["unit", "us", "value", "day"],
  );
  const all = matched.groupby("unit").count({ as: "rows" }).objects() as { unit: string; rows: number }[];
  const values = new Map(
    (valuesOf(part.aggregate, matched).objects() as { unit: string; value: bigint | number }[]).map((row) => [
      row.unit,
      row.value,
    ]),
  );
  const scaled = part.aggregate.kind === "count" || part.aggregate.kind === "days" ? ONE : 1n;
  return new Map(
    all.map(({ unit, rows: n }) => {
      const value = values.get(unit);
      return [unit, { rows: n, value: value === undefined ? null : BigInt(value) * scaled }];
    }),
  );
}

/** One row a unit that has a value, columns unit and value. */
function valuesOf(aggregate: Aggregate, matched: ColumnTable): ColumnTable {
  const numbers = matched.filter(rowwise((row: { value: bigint | null }) => row.value !== null));
  switch (aggregate.kind) {
    case "count":
      return matched.groupby("unit").rollup({ value: op.count() });
    case "days":
      return matched.groupby("unit").rollup({ value: op.distinct("day") });
    case "sum":
      return numbers.groupby("unit").rollup({ value: op.sum("value") });
    case "max":
      return numbers.groupby("unit").rollup({ value: op.max("value") });
    case "min":
      return numbers.groupby("unit").rollup({ value: op.min("value") });
    case "first":
      return foremost(numbers.orderby("us", "value"));
    case "last":
      return foremost(numbers.orderby(desc("us"), "value"));
  }
}

function foremost(ordered: ColumnTable): ColumnTable {
  return ordered
    .groupby("unit")
    .derive({ place: op.row_number() })
    .ungroup()
    .filter((row) => row.place === 1)
    .select("unit", "value");
}

/** In 10^-9; null where the unit is left out. */
function takenValue(metric: Metric, taken: Taken | undefined): bigint | null {
  if (metric.summary === "proportion") return taken === undefined ? 0n : ONE;
  if (taken !== undefined && taken.value !== null) return taken.value;
  // Rows without a number: a sum of nothing is 0; a largest, smallest, first or last is as without rows.
  if (taken !== undefined && metric.of.aggregate.kind === "sum") return 0n;
  return metric.withoutRows === "leave-out" ? null : 0n;
}

/**
 * A unit's covariate: a column's value on its enrolling row, or the metric's quantity in the days before enrolment, the
 * first instant inside and enrolment outside, 0 without rows or numbers.
 */
function covariateOf(
  { adjustFor, of, summary }: Metric,
  rows: readonly Row[],
  earlier: ColumnTable,
  analysed: readonly Unit[],
  clock: Clock,
): (unit: Unit) => bigint | null {
  if (adjustFor === null) return () => null;
  if (adjustFor.kind === "column") return ({ enrolling }) => enrolling?.number(adjustFor.column) ?? null;
  const from = new Map(
    analysed.map(({ unit, enrolledUs }) => [
      unit,
      (enrolledUs ?? 0n) - BigInt(Math.round(adjustFor.days * Number(DAY_US))),
    ]),
  );
  const inside = earlier.filter(
    rowwise((row: { at: number; unit: string }) => (rowAt(rows, row.at).us ?? 0n) >= (from.get(row.unit) ?? 0n)),
  );
  const taken = takenOf(of, rows, inside, clock);
  if (summary === "proportion") return ({ unit }) => (taken.has(unit) ? ONE : 0n);
  return ({ unit }) => taken.get(unit)?.value ?? 0n;
}

function unitValue(unit: Unit, of: bigint, per: bigint | null, x: bigint | null): UnitValue {
  if (unit.variant === null) throw new Error(`an analysed unit has no variant: ${unit.unit}`);
  return { unit: unit.unit, variant: unit.variant, bucket: bucketOf(unit.unit), of, per, x };
}

/** First two bytes of md5, little-endian, modulo 1024 (DESIGN 5). */
function bucketOf(unit: string): number {
  return createHash("md5").update(unit, "utf8").digest().readUInt16LE(0) % 1024;
}

/** Null without a cap, and where no unit has a value to take a quantile of. */
function capOf({ cap }: Metric, values: readonly UnitValue[]): bigint | null {
  if (cap === null) return null;
  if (cap.kind === "at") return nanoOf(cap.at);
  if (values.length === 0) return null;
  return quantile(
    values.map(({ of }) => of),
    cap.q,
  );
}

/** Type 1 of Hyndman and Fan 1996: the ceil(n q)-th smallest, n q in exact decimals. */
export function quantile(values: readonly bigint[], q: string): bigint {
  const share = readDecimal(q);
  if (share === null || share.sign < 0) throw new Error(`not a quantile: ${q}`);
  const places = Math.max(0, share.digits.length - 1 - share.lead);
  const product =
    BigInt(values.length) * BigInt(share.digits || "0") * 10n ** BigInt(places + share.lead - share.digits.length + 1);
  const divisor = 10n ** BigInt(places);
  const place = Math.max(1, Number((product + divisor - 1n) / divisor));
  const found = [...values].sort(ascending)[place - 1];
  if (found === undefined) throw new Error(`no ${place}-th smallest of ${values.length} values`);
  return found;
}

/** What decides is held for all variants at once, a secondary metric by itself. */
export const intervalsAtOnce = (plan: Plan, { role }: Metric): number =>
  role === "secondary" ? 1 : plan.variants.length - 1;

export const armValues = (values: readonly UnitValue[], variant: number): bigint[] =>
  ofVariant(values, variant).map(({ of }) => of);

export const byVariant = (plan: Plan, count: (variant: number) => number): number[] =>
  plan.variants.map((_, at) => count(at));

export function ofVariant<T extends { readonly variant: number | null }>(items: readonly T[], variant: number): T[] {
  return items.filter((item) => item.variant === variant);
}
