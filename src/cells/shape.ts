import type { SizeTable } from "../engine/types.ts";

/** How the values of one arm lie: units by size, 0 apart. */
export interface Shape {
  readonly units: number;
  readonly zero: number;
  /** Ascending and without overlap, those with a unit; above 0 they hold from <= x < to, below it from < x <= to. */
  readonly bins: readonly Bin[];
}
export interface Bin {
  readonly from: number;
  readonly to: number;
  readonly units: number;
}

/**
 * One arm's shape from the counts by size: four bins to each doubling, of whole numbers no bin narrower than 1.
 * @param isWhole all values are whole numbers: 1, 2 and 3 then have one bin each, and each bin from 4 to 8 too
 */
export function shape(table: SizeTable, variant: number, isWhole: boolean): Shape {
  let units = 0;
  let zero = 0;
  const bins = new Map<number, Bin>();
  for (const [row, n] of table.units.entries()) {
    if (table.variant[row] !== variant) continue;
    units += n;
    const quarter = table.quarter[row] ?? null;
    if (quarter === null) {
      zero += n;
      continue;
    }
    const [least, most] = edges(quarter, isWhole);
    const [from, to] = table.sign[row] === -1 ? [-most, -least] : [least, most];
    bins.set(from, { from, to, units: n + (bins.get(from)?.units ?? 0) });
  }
  return { units, zero, bins: [...bins.values()].sort((a, b) => a.from - b.from) };
}

function edges(quarter: number, isWhole: boolean): readonly [number, number] {
  const power = Math.floor(quarter / 4);
  const steps = isWhole ? Math.min(4, 2 ** Math.max(0, power)) : 4;
  const step = Math.floor(((quarter - 4 * power) * steps) / 4);
  return [2 ** power * (1 + step / steps), 2 ** power * (1 + (step + 1) / steps)];
}

/** How many units have a value farther from 0 than an edge, on that side of 0. */
export function beyond({ bins }: Shape, edge: number): number {
  return bins.reduce((sum, { from, to, units }) => sum + ((edge > 0 ? from >= edge : to <= edge) ? units : 0), 0);
}
