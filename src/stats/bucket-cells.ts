import type { BucketCells, BucketSums, PairSums } from "../cells/types.ts";

/**
 * Cells as one table for the draws, row by row, without the buckets that have no unit.
 * An arm's columns: mean: n, sum of d, of d^2. ratio and adjusted: n, sums of d, x, d^2, d x, x^2. d is the value less its
 * mean, or y - R x; for adjusted y and x are both less their means.
 */
export interface DrawTable {
  readonly kind: BucketCells["kind"];
  readonly rows: number;
  readonly width: number;
  readonly cells: Float64Array;
}

/** Both arms side by side, control first, each centred on its own level: the truth of draws with replacement is then 0. */
export function tableOfArms(cells: BucketCells): DrawTable {
  const [control, variant] = columnsOf(cells);
  return interleaved(cells.kind, [
    ...centred(cells.kind, control, totals(control)),
    ...centred(cells.kind, variant, totals(variant)),
  ]);
}

/** Both arms added up, centred on their common level: what the buckets hold whichever arm they are dealt to. */
export function tableOfBoth(cells: BucketCells): DrawTable {
  const [control, variant] = columnsOf(cells);
  const both = control.map((column, c) => column.map((sum, i) => sum + at(variant[c] ?? column, i)));
  return interleaved(cells.kind, centred(cells.kind, both, totals(both)));
}

/** The sums over all buckets of each arm, control first, centred as in `tableOfBoth`. */
export function armsAboutBoth(cells: BucketCells): Float64Array {
  const [control, variant] = columnsOf(cells);
  const both = totals(control).map((sum, c) => sum + (totals(variant)[c] ?? 0));
  const own = [...centred(cells.kind, control, both), ...centred(cells.kind, variant, both)];
  return Float64Array.from(own, total);
}

/** variant's mean of x minus control's, in the units of the sums; 0 but for adjusted. */
export function gapOfX(cells: BucketCells): number {
  if (cells.kind !== "adjusted") return 0;
  const [control, variant] = columnsOf(cells).map(totals) as [number[], number[]];
  return (variant[2] ?? 0) / (variant[0] ?? 1) - (control[2] ?? 0) / (control[0] ?? 1);
}

function columnsOf(cells: BucketCells): [control: Float64Array[], variant: Float64Array[]] {
  if (cells.kind !== "mean") return pairsOf(cells);
  return [columnsOfOne(cells.control), columnsOfOne(cells.variant)];
}

function columnsOfOne({ n, s1, s2 }: BucketSums): Float64Array[] {
  return [n, s1, s2];
}

/** Sums in the values' own units for a ratio, whose level is not free of the pivots; else as they are. */
function pairsOf(
  cells: Extract<BucketCells, { readonly kind: "ratio" | "adjusted" }>,
): [Float64Array[], Float64Array[]] {
  const [py, px] = cells.kind === "ratio" ? cells.pivots : [0, 0];
  const [sy, sx] = cells.scales;
  const own = ({ n, y, x, yy, yx, xx }: PairSums) => [
    n,
    n.map((units, i) => units * py + sy * at(y, i)),
    n.map((units, i) => units * px + sx * at(x, i)),
    n.map((units, i) => units * py * py + 2 * py * sy * at(y, i) + sy * sy * at(yy, i)),
    n.map((units, i) => units * py * px + py * sx * at(x, i) + px * sy * at(y, i) + sy * sx * at(yx, i)),
    n.map((units, i) => units * px * px + 2 * px * sx * at(x, i) + sx * sx * at(xx, i)),
  ];
  return [own(cells.control), own(cells.variant)];
}

function totals(columns: readonly Float64Array[]): number[] {
  return columns.map(total);
}

function centred(kind: BucketCells["kind"], columns: readonly Float64Array[], sums: readonly number[]): Float64Array[] {
  const [units = 0, ofY = 0, ofX = 0] = sums;
  if (kind === "mean") {
    const [n, s1, s2] = columns as [Float64Array, Float64Array, Float64Array];
    const mean = units === 0 ? 0 : ofY / units;
    return [n, shifted(n, s1, mean), shiftedSquares(n, s1, s2, mean)];
  }
  const [n, y, x, yy, yx, xx] = columns as [
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  if (kind === "adjusted") {
    const [meanY, meanX] = units === 0 ? [0, 0] : [ofY / units, ofX / units];
    const products = yx.map((product, i) => product - meanX * at(y, i) - meanY * at(x, i) + at(n, i) * meanY * meanX);
    return [
      n,
      shifted(n, y, meanY),
      shifted(n, x, meanX),
      shiftedSquares(n, y, yy, meanY),
      products,
      shiftedSquares(n, x, xx, meanX),
    ];
  }
  const ratio = ofX === 0 ? 0 : ofY / ofX;
  return [
    n,
    y.map((sum, i) => sum - ratio * at(x, i)),
    x,
    yy.map((sum, i) => Math.max(0, sum - 2 * ratio * at(yx, i) + ratio * ratio * at(xx, i))),
    yx.map((sum, i) => sum - ratio * at(xx, i)),
    xx,
  ];
}

function shifted(n: Float64Array, sums: Float64Array, by: number): Float64Array {
  return sums.map((sum, i) => sum - at(n, i) * by);
}

function shiftedSquares(n: Float64Array, sums: Float64Array, squares: Float64Array, by: number): Float64Array {
  return squares.map((square, i) => Math.max(0, square - 2 * by * at(sums, i) + at(n, i) * by * by));
}

function interleaved(kind: BucketCells["kind"], columns: readonly Float64Array[]): DrawTable {
  const width = columns.length;
  // The first column of each arm holds its units.
  const units = columns.filter((_, c) => c % (kind === "mean" ? 3 : 6) === 0);
  const kept = Array.from((units[0] ?? new Float64Array()).keys()).filter((i) => units.some((n) => at(n, i) > 0));
  const cells = new Float64Array(kept.length * width);
  kept.forEach((bucket, row) => {
    columns.forEach((column, c) => {
      cells[row * width + c] = at(column, bucket);
    });
  });
  return { kind, rows: kept.length, width, cells };
}

function total(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0);
}

function at(values: Float64Array, i: number): number {
  return values[i] ?? 0;
}
