import type { TopLevelSpec } from "vega-lite";
import type { Histogram } from "../../stats/index.ts";
import { area, inPixels, letters, line, type Point, strokes } from "./pixels.ts";
import { theme } from "./theme.ts";

/** One size at which the distribution of the studentised difference was drawn. */
export interface SamplingRow {
  /** "at 1/16 of the size": words of ours, for they stand in the drawing. */
  readonly label: string;
  readonly histogram: Histogram;
  /** How much of it lies beyond the critical values: "2.9%". */
  readonly below: string;
  readonly above: string;
}

interface Density {
  readonly at: number;
  readonly density: number;
}

/** A narrow screen shows it at its own size, so that its letters stay legible. */
const WIDTH = 340;
const ROW = 78;
const HEAD = 20;
const FOOT = 22;
/** The axis goes from -REACH to REACH, as the histograms do. */
const REACH = 5;
const CURVE_STEP = 0.125;
const TICKS = [-4, -2, 0, 2, 4];
/** Of a row's height, what the highest curve takes: its label stands beside the top. */
const FULL = 0.9;

/**
 * The drawn distributions, the smallest size on top: each a stepped outline over the normal curve, dark beyond the critical
 * values, all over one axis.
 * @param critical above 0
 * @param label writes a number of the axis
 */
export function sampling(
  rows: readonly SamplingRow[],
  critical: number,
  label: (value: number) => string,
): TopLevelSpec {
  const height = HEAD + rows.length * ROW + FOOT;
  const outlines = rows.map(({ histogram }) => outline(histogram));
  const curve = normalCurve();
  const highest = Math.max(...[curve, ...outlines].flat().map(({ density }) => density));
  const bases = rows.map((_, row) => HEAD + (row + 1) * ROW);
  const last = HEAD + rows.length * ROW;

  const place = (points: readonly Density[], row: number, group = row): Point[] =>
    points.map(({ at, density }) => {
      const base = bases[row] ?? 0;
      return { x: placed(at), y: base - (density / highest) * FULL * ROW, base, group };
    });
  const tails = outlines.flatMap((points, row) =>
    [-critical, critical].flatMap((limit, side) => place(beyond(points, limit), row, 2 * row + side)),
  );
  return inPixels(WIDTH, height, [
    area(tails),
    strokes([1, 0], theme.line, [
      ...bases.map((y) => ({ x: 0, y, toX: WIDTH, toY: y })),
      ...TICKS.map((at) => ({ x: placed(at), y: last, toX: placed(at), toY: last + 4 })),
    ]),
    strokes(
      [2, 2],
      theme.line,
      [-critical, critical].map((at) => ({ x: placed(at), y: HEAD - 3, toX: placed(at), toY: last })),
    ),
    line(
      [4, 2],
      theme.quiet,
      rows.flatMap((_, row) => place(curve, row)),
    ),
    line(
      [1, 0],
      theme.ink,
      outlines.flatMap((points, row) => place(points, row)),
    ),
    letters("center", theme.quiet, [
      ...[-critical, critical].map((at) => ({ x: placed(at), y: HEAD - 7, text: label(at) })),
      ...TICKS.map((at) => ({ x: placed(at), y: last + 17, text: label(at) })),
    ]),
    letters(
      "left",
      theme.ink,
      rows.flatMap(({ label: size, below }, row) => [
        { x: 0, y: (bases[row] ?? 0) - ROW + 18, text: size },
        { x: 0, y: (bases[row] ?? 0) - 9, text: below },
      ]),
    ),
    letters(
      "right",
      theme.ink,
      rows.map(({ above }, row) => ({ x: WIDTH, y: (bases[row] ?? 0) - 9, text: above })),
    ),
  ]);
}

/** Where a value of T lies on the drawing. */
function placed(at: number): number {
  return ((Math.min(REACH, Math.max(-REACH, at)) + REACH) / (2 * REACH)) * WIDTH;
}

/** The upper edge of the bins, as densities: two points a bin. */
function outline({ from, width, counts, below, above }: Histogram): Density[] {
  const all = counts.reduce((sum, n) => sum + n, below + above);
  return counts.flatMap((n, bin) => {
    const density = n / (all * width);
    return [
      { at: from + bin * width, density },
      { at: from + (bin + 1) * width, density },
    ];
  });
}

function normalCurve(): Density[] {
  return Array.from({ length: (2 * REACH) / CURVE_STEP + 1 }, (_, i) => {
    const at = -REACH + i * CURVE_STEP;
    return { at, density: Math.exp((-at * at) / 2) / Math.sqrt(2 * Math.PI) };
  });
}

/** The part of an outline beyond a limit, cut at it. */
function beyond(points: readonly Density[], limit: number): Density[] {
  if (limit > 0) {
    const inside = points.findLast(({ at }) => at < limit);
    const cut = inside === undefined ? [] : [{ at: limit, density: inside.density }];
    return [...cut, ...points.filter(({ at }) => at >= limit)];
  }
  const inside = points.find(({ at }) => at > limit);
  const cut = inside === undefined ? [] : [{ at: limit, density: inside.density }];
  return [...points.filter(({ at }) => at <= limit), ...cut];
}
