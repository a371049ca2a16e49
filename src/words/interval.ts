import { fixed, withSign } from "./number.ts";

/** An estimate with its interval; an end that is null is unbounded or does not exist. */
export interface Interval {
  readonly estimate: number;
  readonly low: number | null;
  readonly high: number | null;
}

/** How values are written: shares as percent, shares as points (percent of all units), or amounts in a unit of measure. */
export type Scale =
  | { readonly kind: "percent" }
  | { readonly kind: "points" }
  /** `places` where the caller has chosen them: whole units of many. */
  | { readonly kind: "amount"; readonly unit: string | null; readonly places?: number };

/** The words for above and below: more and fewer of what is counted, higher and lower of a mean. */
export interface Comparative {
  readonly above: string;
  readonly below: string;
}
export const MORE: Comparative = { above: "more", below: "fewer" };
export const HIGHER: Comparative = { above: "higher", below: "lower" };

/** "+10.0%". `marks` are values that the digits must keep apart from estimate and ends: a worthwhile effect, a margin. */
export function signedEstimate(interval: Interval, scale: Scale, marks: readonly number[] = []): string {
  const write = writer(interval, scale, marks);
  return write.last(write.signed(interval.estimate));
}

/** "+6.5% to +13.7%". */
export function signedInterval(interval: Interval, scale: Scale, marks: readonly number[] = []): string {
  const { low, high } = interval;
  if (low === null && high === null) return "no interval";
  const write = writer(interval, scale, marks);
  const from = low === null ? "no lower limit" : write.signed(low);
  return high === null ? `${write.last(from)} and up` : `${from} to ${write.last(write.signed(high))}`;
}

/** "10.0% more", "1.2% fewer", "no difference". */
export function estimateInWords(
  interval: Interval,
  scale: Scale,
  words: Comparative,
  marks: readonly number[] = [],
): string {
  const write = writer(interval, scale, marks);
  return write.compared(interval.estimate, words);
}

/** The estimate's size alone: "10.0%", for "fell by 10.0%". */
export function estimateSize(interval: Interval, scale: Scale, marks: readonly number[] = []): string {
  const write = writer(interval, scale, marks);
  return write.last(write.size(interval.estimate));
}

/** "6.5% to 13.7% more", "6.0% fewer to 3.8% more", "9.4% to 2.7% fewer". */
export function intervalInWords(
  interval: Interval,
  scale: Scale,
  words: Comparative,
  marks: readonly number[] = [],
): string {
  const { low, high } = interval;
  const write = writer(interval, scale, marks);
  if (low === null && high === null) return "no interval";
  if (low === null) return high !== null && high < 0 ? atLeast(high) : `any amount ${words.below} to ${up(high)}`;
  if (high === null) return low > 0 ? atLeast(low) : `${up(low)} to any amount ${words.above}`;
  if (low === 0 && high === 0) return "no difference";
  if (low < 0 && high > 0) return `${up(low)} to ${up(high)}`;
  return `${write.size(low)} to ${write.last(write.size(high))} ${high > 0 ? words.above : words.below}`;

  function up(end: number | null): string {
    return end === null ? "" : write.compared(end, words);
  }
  function atLeast(end: number): string {
    return `at least ${up(end)}`;
  }
}

/**
 * For "fell by 3.1% (5.0% to 1.2%)": the sizes alone, in the order of the ends, where the whole interval lies on the
 * estimate's side; null where it does not, for then the sizes alone would mislead.
 */
export function intervalSizes(interval: Interval, scale: Scale, marks: readonly number[] = []): string | null {
  const { estimate, low, high } = interval;
  if (low === null || high === null || estimate === 0) return null;
  if (estimate > 0 ? low < 0 : high > 0) return null;
  const write = writer(interval, scale, marks);
  return `${write.size(low)} to ${write.last(write.size(high))}`;
}

/** One end of the interval, in the digits of the whole: "13.7% more". Null ends have no text. */
export function endInWords(
  interval: Interval,
  end: "low" | "high",
  scale: Scale,
  words: Comparative,
  marks: readonly number[] = [],
): string | null {
  const value = interval[end];
  return value === null ? null : writer(interval, scale, marks).compared(value, words);
}

/** The size of one end alone: "13.7%", for "a rise of more than 13.7%". Null ends have no text. */
export function endSize(
  interval: Interval,
  end: "low" | "high",
  scale: Scale,
  marks: readonly number[] = [],
): string | null {
  const value = interval[end];
  if (value === null) return null;
  const write = writer(interval, scale, marks);
  return write.last(write.size(value));
}

function writer(interval: Interval, scale: Scale, marks: readonly number[]) {
  const factor = scale.kind === "amount" ? 1 : 100;
  const decimals = (scale.kind === "amount" ? scale.places : undefined) ?? places(interval, factor, marks);
  const sign = scale.kind === "percent" ? "%" : "";
  const unit =
    scale.kind === "points"
      ? " percentage points"
      : scale.kind === "amount" && scale.unit !== null
        ? ` ${scale.unit}`
        : "";
  const size = (value: number) => fixed(Math.abs(value) * factor, decimals) + sign;
  const last = (text: string) => text + unit;
  return {
    size,
    last,
    signed: (value: number) => withSign(value, fixed(value * factor, decimals)) + sign,
    compared: (value: number, words: Comparative) =>
      value === 0 ? "no difference" : `${last(size(value))} ${value > 0 ? words.above : words.below}`,
  };
}

const MOST_PLACES = 12;

/**
 * Places after the point: two digits of half the interval's width count (percent has one place at least), and more
 * where estimate or end would otherwise be read as equal to each other, to zero or to a mark.
 */
function places({ estimate, low, high }: Interval, factor: number, marks: readonly number[]): number {
  const points = [low, estimate, high].filter((value) => value !== null).map((value) => value * factor);
  const from = Math.min(...points);
  const half = points.length === 1 ? Math.abs(from) / 100 : (Math.max(...points) - from) / (points.length - 1);
  const least = factor === 1 ? 0 : half >= 100 ? 0 : 1;
  const first = half === 0 ? least : Math.min(MOST_PLACES, Math.max(least, 1 - Math.floor(Math.log10(half))));
  const others = [0, ...marks.map((mark) => mark * factor)];
  const most = Math.min(MOST_PLACES, first + 5);
  let decimals = first;
  while (decimals < most && !toldApart(points, others, decimals, 10 ** -most)) decimals++;
  return decimals;
}

/** Values nearer than `resolution` are not held apart: that would take more places than a reader reads. */
function toldApart(points: readonly number[], marks: readonly number[], decimals: number, resolution: number): boolean {
  const read = points.map((point) => Number(point.toFixed(decimals)));
  const sameOrder = (value: number, shown: number, other: number, shownOther: number) =>
    Math.abs(value - other) < resolution || Math.sign(shown - shownOther) === Math.sign(value - other);
  return points.every((point, i) => {
    const shown = read[i] ?? 0;
    const next = points[i + 1];
    const apart = next === undefined || sameOrder(point, shown, next, read[i + 1] ?? 0);
    return apart && marks.every((mark) => sameOrder(point, shown, mark, mark));
  });
}
