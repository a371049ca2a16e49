import { describe, expect, it } from "vitest";
import type { BucketCells } from "../../src/cells/types.ts";
import { type BootstrapT, bootstrapRelative, bootstrapT } from "../../src/stats/bootstrap-t.ts";
import { gapOfX, tableOfArms } from "../../src/stats/bucket-cells.ts";
import { dealRows, drawRows, studentised, sumRows } from "../../src/stats/draws.ts";
import { generator, type Seed, wordsOf } from "../../src/stats/generator.ts";
import { dealtToVariant, randomisation } from "../../src/stats/randomisation.ts";
import { relative } from "../../src/stats/relative.ts";
import { isNotDrawn, type NotDrawn } from "../../src/stats/resampling.ts";
import { cellsOf, meanCells, resampled, type Unit } from "./buckets.ts";
import { present } from "./expect.ts";
import { levelFrom } from "./levels.ts";

const SEED: Seed = [1, 2, 3, 4];

function drawn<Found>(found: Found | NotDrawn): Found {
  if (isNotDrawn(found)) throw new Error(`not drawn: ${found.notDrawn}`);
  return found;
}

const interval = (cells: BucketCells, draws = 1000) =>
  drawn(bootstrapT(cells, { estimate: 0, standardError: 1 }, 0.05, draws, SEED, null));

/** Units with a long tail, the same for every run. */
function skewed(n: number, word: number): number[] {
  const next = generator([word, 2, 3, 4]);
  return Array.from({ length: n }, () => -Math.log((next() + 1) / 2 ** 32));
}

/** Difference and its variance of a mean, a ratio or an adjusted mean of some units. */
function comparedUnits(kind: BucketCells["kind"], units: readonly Unit[]) {
  const arms = ([0, 1] as const).map((is) => units.filter(([, isVariant]) => isVariant === is));
  const mean = (values: number[]) => values.reduce((a, b) => a + b, 0) / values.length;
  const covariance = (a: number[], b: number[]) =>
    a.reduce((sum, x, i) => sum + (x - mean(a)) * ((b[i] ?? 0) - mean(b)), 0) / (a.length - 1);
  const ys = arms.map((of) => of.map(([, , y]) => y));
  const xs = arms.map((of) => of.map(([, , , x]) => x));
  const both = [0, 1].map((arm) => [ys[arm] ?? [], xs[arm] ?? []] as const);
  const part = (pick: (y: number[], x: number[]) => number) =>
    both.reduce((sum, [y, x]) => sum + pick(y, x) / y.length, 0);
  const theta = part((y, x) => covariance(y, x)) / part((_, x) => covariance(x, x));
  const scores = both.map(([y, x]) => {
    const ratio = mean(y) / mean(x);
    return y.map((value, i) => {
      const other = x[i] ?? 0;
      return { mean: value, ratio: (value - ratio * other) / mean(x) + ratio, adjusted: value - theta * other }[kind];
    });
  });
  const [c = [], t = []] = scores;
  return { difference: mean(t) - mean(c), variance: covariance(c, c) / c.length + covariance(t, t) / t.length };
}

describe("T of a draw", () => {
  // From the units themselves, by the definitions of METHODS 1.
  it.each(resampled().bootstrap)("is that of the units in the buckets drawn: $kind", ({ kind, units, estimate }) => {
    const cells = cellsOf(kind, units, 64);
    const table = tableOfArms(cells);
    const held = [...new Set(units.map(([bucket]) => bucket))].sort((a, b) => a - b);
    const sums = new Float64Array(table.width);
    sumRows(table, Uint32Array.from(held.keys()), sums);
    const t = studentised(kind, sums.slice(), gapOfX(cells));
    const fill = wordsOf(SEED);
    for (let draw = 0; draw < 50; draw++) {
      const picks = new Uint32Array(held.length);
      drawRows(picks, held.length, fill);
      sumRows(table, picks, sums);
      const drawn = Array.from(picks).flatMap((row) => units.filter(([bucket]) => bucket === held[row]));
      const found = comparedUnits(kind, drawn);
      expect(t(sums)).toBeCloseTo((found.difference - estimate) / Math.sqrt(found.variance), 8);
    }
  });
});

describe("the bootstrap-t interval", () => {
  // 40,000 draws against 2,000,000: the quantiles of T differ by 0.016 or so, and by 0.05 once in a thousand.
  it.each(resampled().bootstrap)("has the ends of raw units drawn by bucket: $kind", (reference) => {
    const { kind, units, estimate, standardError } = reference;
    const found = drawn(bootstrapT(cellsOf(kind, units, 64), { estimate, standardError }, 0.05, 40_000, SEED, null));
    expect(Math.abs((estimate - found.high) / standardError - reference.low)).toBeLessThan(0.05);
    expect(Math.abs((estimate - found.low) / standardError - reference.high)).toBeLessThan(0.05);
    expect(found.undefinedDraws).toBe(0);
  });

  it("is the mirror image when the arms change places", () => {
    const [control, variant] = [skewed(900, 5), skewed(300, 6)];
    const [one, other] = [interval(meanCells(control, variant)), interval(meanCells(variant, control))];
    expect(other.low).toBeCloseTo(-one.high, 12);
    expect(other.high).toBeCloseTo(-one.low, 12);
  });

  it("has a relative interval that excludes 0 with it, and is Fieller's where the quantiles are those of z", () => {
    const [c, t] = [levelFrom(1000, 10, 4), levelFrom(800, 10.5, 5)];
    const of = (lowerQuantile: number, upperQuantile: number) =>
      present(bootstrapRelative(c, t, { lowerQuantile, upperQuantile }));
    expect(of(-1.96, 1.96)).toEqual(present(relative(c, t, 1.96)));
    // D / SE is 0.5 / sqrt(0.016 + 0.03125) = 2.30.
    expect(of(-1.5, 2.2).low).toBeGreaterThan(0);
    expect(of(-1.5, 2.4).low).toBeLessThan(0);
    expect(of(-1.5, 2.4).high).toBeLessThan(of(-1.96, 2.4).high ?? 0);
    // Quantiles on one side of 0: the interval lies on one side of the estimate, as the difference's does.
    expect(of(0.1, 2).high).toBeLessThan(of(0.1, 2).estimate);
    expect(of(0.1, 2).high).toBeGreaterThan(of(0.1, 2).low ?? 1);
  });

  it("repeats itself, and is another one from another seed", () => {
    const cells = meanCells(skewed(300, 5), skewed(300, 6));
    expect(interval(cells)).toEqual(interval(cells));
    const other = drawn(bootstrapT(cells, { estimate: 0, standardError: 1 }, 0.05, 1000, [4, 3, 2, 1], null));
    expect(other.low).not.toBe(interval(cells).low);
  });

  it("does not change with the unit of the values or where they start", () => {
    const [control, variant] = [skewed(400, 5), skewed(300, 6)];
    const moved = (values: number[]) => values.map((x) => 64 * x + 1000);
    const [one, other] = [interval(meanCells(control, variant)), interval(meanCells(moved(control), moved(variant)))];
    expect(other.low).toBeCloseTo(one.low, 8);
    expect(other.high).toBeCloseTo(one.high, 8);
  });

  it("draws the distribution at a sixteenth, a quarter and all of the units, nearer to normal as they grow", () => {
    const { drawn: pictures } = interval(meanCells(skewed(9000, 5), skewed(1000, 6)), 4000);
    expect(pictures.map(({ share }) => share)).toEqual([1 / 16, 1 / 4, 1]);
    const lean = pictures.map((picture) => {
      const { counts = [], below = 0, above = 0 } = picture.histogram ?? {};
      expect(counts.reduce((a, b) => a + b, below + above)).toBe(4000);
      const low = below + counts.slice(0, 12).reduce((a, b) => a + b);
      const high = above + counts.slice(28).reduce((a, b) => a + b);
      // Beyond -2 and beyond 2: the smaller arm's long tail puts T below -2 more often.
      return low - high;
    });
    // Halved by four times the units, but for chance: each count is good to 15 or so.
    expect(lean[0]).toBeGreaterThan((lean[1] ?? 0) + 30);
    expect(lean[1]).toBeGreaterThan(lean[2] ?? 0);
    expect(lean[2]).toBeGreaterThan(0);
  });

  it("is the same without its pictures, which cost draws of their own", () => {
    const cells = meanCells(skewed(400, 5), skewed(320, 6));
    const bare = bootstrapT(cells, { estimate: 0, standardError: 1 }, 0.05, 1000, SEED, null, false);
    expect(bare).toEqual({ ...interval(cells), drawn: [] });
  });

  it("has no picture where an arm would have under 20 units", () => {
    const has = ({ drawn: pictures }: BootstrapT) => pictures.map(({ histogram }) => histogram !== null);
    expect(has(interval(meanCells(skewed(400, 5), skewed(320, 6))))).toEqual([true, true, true]);
    expect(has(interval(meanCells(skewed(400, 5), skewed(319, 6))))).toEqual([false, true, true]);
    expect(has(interval(meanCells(skewed(400, 5), skewed(79, 6))))).toEqual([false, false, true]);
  });

  it("is not drawn under 20 units, or under 10 successes or failures, in an arm", () => {
    const of = (n: number, shares: Parameters<typeof bootstrapT>[5] = null) =>
      bootstrapT(meanCells(skewed(400, 5), skewed(n, 6)), { estimate: 0, standardError: 1 }, 0.05, 1000, SEED, shares);
    expect(of(19)).toEqual({ notDrawn: "few-units" });
    expect(isNotDrawn(of(20))).toBe(false);
    const counts = (successes: number) => ({ control: { successes: 50, n: 400 }, variant: { successes, n: 300 } });
    expect(of(300, counts(9))).toEqual({ notDrawn: "few-events" });
    expect(isNotDrawn(of(300, counts(10)))).toBe(false);
    expect(of(300, counts(291))).toEqual({ notDrawn: "few-events" });
  });

  // All but one unit of each arm are alike: a draw without both of these has no spread, (1 - 1/200)^200 squared, or 13%.
  it("is not shown where over 1% of the draws have no T, and counts those it leaves out", () => {
    const alike = (n: number, others: number) => Array.from({ length: n }, (_, i) => (i < n - others ? 1 : i));
    const cells = (others: number) => meanCells(alike(200, others), alike(200, others), 200);
    const of = (others: number) => bootstrapT(cells(others), { estimate: 0, standardError: 1 }, 0.05, 4000, SEED, null);
    expect(of(1)).toEqual({ notDrawn: "undefined-draws" });
    expect(of(0)).toEqual({ notDrawn: "no-spread" });
    // Five each, in the same five buckets: exp(-5) is 0.7%.
    expect(drawn(of(5)).undefinedDraws).toBeGreaterThan(5);
    expect(drawn(of(5)).undefinedDraws).toBeLessThanOrEqual(40);
  });
});

describe("the randomisation test", () => {
  it("comes to the share of all deals", () => {
    const { control, variant, p } = resampled().randomisation;
    const units = [control, variant].flatMap((values, arm) =>
      values.map((y, bucket): Unit => [bucket, arm === 0 ? 0 : 1, y, 0]),
    );
    const found = drawn(randomisation(cellsOf("mean", units, 22), 40_000, SEED, null));
    // Standard error sqrt(0.3 0.7 / 40,000) = 0.0023.
    expect(Math.abs(found.p - p)).toBeLessThan(0.009);
  });

  it("deals each choice of rows as often as any other, whatever was dealt before", () => {
    const order = Uint32Array.from({ length: 5 }, (_, row) => row);
    const counts = new Map<string, number>();
    const [words, fill] = [new Uint32Array(2), wordsOf(SEED)];
    let [before, again] = ["", 0];
    for (let deal = 0; deal < 20_000; deal++) {
      dealRows(order, words, fill);
      const choice = String(order.slice(0, 2).sort());
      counts.set(choice, (counts.get(choice) ?? 0) + 1);
      again += Number(choice === before);
      before = choice;
      expect(new Set(order).size).toBe(5);
    }
    // Ten choices, 2,000 each: Pearson's chi-square with 9 degrees of freedom is above 34 once in 10,000.
    expect(counts.size).toBe(10);
    expect([...counts.values()].reduce((sum, n) => sum + (n - 2000) ** 2 / 2000, 0)).toBeLessThan(34);
    // 2,000 again, standard deviation 42.
    expect(Math.abs(again - 2000)).toBeLessThan(170);
  });

  it("does not change when the arms change places", () => {
    // With other deals: the same within their chance, standard error 0.008 at most.
    const [control, variant] = [skewed(700, 5), skewed(650, 8)];
    const one = drawn(randomisation(meanCells(control, variant), 4000, SEED, null));
    const other = drawn(randomisation(meanCells(variant, control), 4000, SEED, null));
    expect(Math.abs(one.p - other.p)).toBeLessThan(0.04);
  });

  it("deals buckets in the shares of the units, at least one to each arm", () => {
    expect(dealtToVariant(9000, 1000, 1024)).toBe(102);
    expect(dealtToVariant(1000, 3000, 1000)).toBe(750);
    expect(dealtToVariant(1_000_000, 20, 1024)).toBe(1);
    expect(dealtToVariant(20, 1_000_000, 1024)).toBe(1023);
  });

  it("is never 0: a difference that no deal reaches has one over one more than the deals", () => {
    const cells = meanCells(
      skewed(500, 5),
      skewed(500, 6).map((x) => x + 5),
    );
    expect(drawn(randomisation(cells, 999, SEED, null)).p).toBe(1 / 1000);
  });

  it("finds what a ratio's and an adjusted contrast's arms differ by, not what their parts do", () => {
    const next = generator([7, 7, 7, 7]);
    const unit = (i: number): Unit => {
      const x = 1 + (next() % 7);
      return [i % 64, i % 3 === 0 ? 1 : 0, x * (1 + (next() % 3)), x];
    };
    const units = Array.from({ length: 1200 }, (_, i) => unit(i));
    // The variant has twice the denominators and twice the numerators: no other ratio.
    const doubled = units.map(
      ([bucket, arm, y, x]): Unit => [bucket, arm, arm === 1 ? 2 * y : y, arm === 1 ? 2 * x : x],
    );
    const p = (kind: "ratio" | "mean", of: Unit[]) => drawn(randomisation(cellsOf(kind, of, 64), 1000, SEED, null)).p;
    expect(p("ratio", doubled)).toBeGreaterThan(0.05);
    expect(p("mean", doubled)).toBeLessThan(0.01);
    // A value that follows x and is 0.5 higher with the variant: seen once x is taken out.
    const along = units.map(([bucket, arm, , x]): Unit => [bucket, arm, 10 * x + 0.5 * arm + (next() % 3), x]);
    const of = (kind: "adjusted" | "mean") => drawn(randomisation(cellsOf(kind, along, 64), 1000, SEED, null)).p;
    expect(of("adjusted")).toBeLessThan(0.01);
    expect(of("mean")).toBeGreaterThan(0.05);
  });

  it("is not dealt under 20 units, with few events, or without spread", () => {
    const of = (control: number[], variant: number[]) => randomisation(meanCells(control, variant), 100, SEED, null);
    expect(of(skewed(19, 5), skewed(100, 6))).toEqual({ notDrawn: "few-units" });
    expect(of(new Array(50).fill(2), new Array(50).fill(2))).toEqual({ notDrawn: "no-spread" });
    const shares = { control: { successes: 9, n: 100 }, variant: { successes: 20, n: 100 } };
    expect(randomisation(meanCells(skewed(100, 5), skewed(100, 6)), 100, SEED, shares)).toEqual({
      notDrawn: "few-events",
    });
  });
});
