/** The bins of every picture of a drawn distribution: quarters from -5 to 5. */
const FROM = -5;
const WIDTH = 0.25;
const BINS = 40;

export interface Histogram {
  /** Left end of the first bin, width of each. */
  readonly from: number;
  readonly width: number;
  /** A bin holds its left end and not its right one. */
  readonly counts: readonly number[];
  readonly below: number;
  readonly above: number;
}

/** How many values fall in each of 40 bins from -5 to 5, below and above. */
export function histogram(values: Float64Array): Histogram {
  const counts = new Array<number>(BINS).fill(0);
  let [below, above] = [0, 0];
  for (const value of values) {
    const bin = Math.floor((value - FROM) / WIDTH);
    if (bin < 0) below++;
    else if (bin >= BINS) above++;
    else counts[bin] = (counts[bin] ?? 0) + 1;
  }
  return { from: FROM, width: WIDTH, counts, below, above };
}
