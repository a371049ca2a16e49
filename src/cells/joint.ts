import { op, table } from "arquero";
import type { JointTable, MetricCells } from "../engine/types.ts";
import { partSums } from "./arms.ts";
import { joined } from "./sums.ts";
import type { CovariateArm, JointSums } from "./types.ts";

const ORDERS = ["10", "01", "20", "11", "02"] as const;
type Column = `${"high" | "low"}${(typeof ORDERS)[number]}`;
type JointRow = { readonly variant: number; readonly n: number; readonly totalY: bigint; readonly totalX: bigint } & {
  readonly [column in Column]: bigint;
};

/** Arquero adds bigint columns exactly. */
const SUMS = Object.fromEntries(
  ["n", "totalY", "totalX", ...ORDERS.flatMap((jk) => [`high${jk}`, `low${jk}`])].map((column) => [
    column,
    op.sum(column),
  ]),
);

/**
 * Joint sums of two values of each unit, rolled up over buckets to one entry a variant.
 * @param variants how many the plan has; a variant without such units gets sums of n 0
 * @returns index = variant in plan order
 */
export function jointSums(cells: JointTable, variants: number): JointSums[] {
  const { pivots, scales, ...columns } = cells;
  const rows = table(columns).groupby("variant").rollup(SUMS).objects() as JointRow[];
  const found = new Map(rows.map((row) => [row.variant, row]));
  return Array.from({ length: variants }, (_, variant) => {
    const row = found.get(variant);
    const sum = (jk: (typeof ORDERS)[number]) => (row === undefined ? 0n : joined(row[`high${jk}`], row[`low${jk}`]));
    return {
      n: row?.n ?? 0,
      pivots,
      scales,
      s10: sum("10"),
      s01: sum("01"),
      s20: sum("20"),
      s11: sum("11"),
      s02: sum("02"),
      totals: [row?.totalY ?? 0n, row?.totalX ?? 0n],
    };
  });
}

/** The arms of a metric that the plan adjusts for a covariate; index = variant in plan order. */
export function covariateArms(
  cells: Pick<MetricCells, "metric" | "of" | "covariate">,
  variants: number,
): CovariateArm[] {
  if (cells.covariate === null) throw new Error(`"${cells.metric}" came without the cells of its covariate`);
  const values = partSums(cells.of, variants);
  const covariates = partSums(cells.covariate.x, variants);
  return jointSums(cells.covariate.joint, variants).map((joint, variant) => {
    const [value, covariate] = [values[variant], covariates[variant]];
    if (value === undefined || covariate === undefined)
      throw new Error(`no sums of variant ${variant} among ${variants}`);
    return { value, covariate, joint };
  });
}
