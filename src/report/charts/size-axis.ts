import type { TopLevelSpec } from "vega-lite";
import { inPixels, type Letters, letters, strokes } from "./pixels.ts";
import { theme } from "./theme.ts";

/** The axis that all arms share: by ratios on either side of 0, which has a column of its own between them. */
export interface SizeAxis {
  /** log2 of the sizes at which a side begins and ends. */
  readonly least: number;
  readonly most: number;
  readonly below: boolean;
  readonly above: boolean;
  /** The highest outline, as a share of units a doubling. */
  readonly highest: number;
  readonly isWhole: boolean;
}

export const WIDTH = 340;
/** Zero's column, in which the lower picture has its scale. */
const GAP = 72;
export const FOOT = 22;
const LETTER = 7;

/** The axis alone, under the strips. */
export function sizeScale(axis: SizeAxis, label: (value: number) => string): TopLevelSpec {
  return inPixels(WIDTH, FOOT, ticked(axis, 0, label, true));
}

export function ticked(axis: SizeAxis, base: number, label: (value: number) => string, hasZero = false) {
  const ticks = ticksOf(axis, label);
  const zero: Letters[] = hasZero ? [{ x: middle(axis), y: base + 17, text: "0" }] : [];
  return [
    strokes([1, 0], theme.line, [
      ...sides(axis).map(({ from, to }) => ({ x: from, y: base, toX: to, toY: base })),
      ...ticks.map(({ x }) => ({ x, y: base, toX: x, toY: base + 4 })),
    ]),
    letters("center", theme.quiet, [...zero, ...ticks.map(({ x, text }) => ({ x, y: base + 17, text }))]),
  ];
}

const CANDIDATES: readonly (readonly [multiples: readonly number[], every: number])[] = [
  [[1, 2, 5], 1],
  [[1, 5], 1],
  [[1], 1],
  [[1], 2],
  [[1], 3],
  [[1], 6],
];

/** As many round numbers as have room for their text. */
function ticksOf(axis: SizeAxis, label: (value: number) => string): Letters[] {
  const signs = [...(axis.below ? [-1] : []), ...(axis.above ? [1] : [])];
  for (const [multiples, every] of CANDIDATES) {
    const ticks = signs
      .flatMap((sign) =>
        decadesOf(axis, every).flatMap((decade) =>
          multiples.map((multiple) => sign * Number((multiple * 10 ** decade).toPrecision(1))),
        ),
      )
      .filter((value) => isOnAxis(value, axis))
      .map((value) => ({ x: tickPlace(value, axis), y: 0, text: label(value) }))
      .filter(isInside)
      .sort((a, b) => a.x - b.x);
    if (ticks.every((tick, i) => fits(tick, ticks[i + 1]))) return ticks;
  }
  return [];
}

function decadesOf({ least, most }: SizeAxis, every: number): number[] {
  const first = Math.floor(least * Math.log10(2));
  const last = Math.ceil(most * Math.log10(2));
  return Array.from({ length: last - first + 1 }, (_, i) => first + i).filter((decade) => decade % every === 0);
}

const halfOf = ({ text }: Letters) => (text.length * LETTER) / 2;

function isInside(tick: Letters): boolean {
  return tick.x + halfOf(tick) <= WIDTH && tick.x - halfOf(tick) >= 0;
}

function fits(tick: Letters, next: Letters | undefined): boolean {
  return next === undefined || next.x - tick.x > halfOf(tick) + halfOf(next) + 6;
}

function isOnAxis(value: number, { least, most, isWhole }: SizeAxis): boolean {
  const size = Math.log2(Math.abs(value));
  return size >= least && (isWhole ? size < most : size <= most);
}

/** A small whole number stands in the middle of its bin. */
function tickPlace(value: number, axis: SizeAxis): number {
  return placed(
    axis.isWhole && Math.abs(value) < 8 ? Math.sign(value) * Math.sqrt(value * value + Math.abs(value)) : value,
    axis,
  );
}

function sideWidth({ below, above }: SizeAxis): number {
  return (WIDTH - GAP) / (below && above ? 2 : 1);
}
/** Where zero's column has its middle. */
export function middle(axis: SizeAxis): number {
  return (axis.below ? sideWidth(axis) : 0) + GAP / 2;
}

export function sides(axis: SizeAxis): { readonly from: number; readonly to: number }[] {
  const zero = middle(axis);
  return [
    ...(axis.below ? [{ from: zero - GAP / 2 - sideWidth(axis), to: zero - GAP / 2 }] : []),
    ...(axis.above ? [{ from: zero + GAP / 2, to: zero + GAP / 2 + sideWidth(axis) }] : []),
  ];
}

/** Where a value that is not 0 stands. */
export function placed(value: number, axis: SizeAxis): number {
  const { least, most } = axis;
  const part = Math.min(1, Math.max(0, (Math.log2(Math.abs(value)) - least) / (most - least || 1)));
  return middle(axis) + Math.sign(value) * (GAP / 2 + part * sideWidth(axis));
}
