import { describe, expect, it } from "vitest";
import { type BootstrapT, bootstrapT } from "../../src/stats/bootstrap-t.ts";
import type { BucketCells } from "../../src/stats/bucket-cells.ts";
import { generator, type Seed } from "../../src/stats/generator.ts";
import { randomisation } from "../../src/stats/randomisation.ts";
import { isNotDrawn, type NotDrawn } from "../../src/stats/resampling.ts";
import { cellsOf, meanCells, resampled, type Unit } from "./buckets.ts";

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

  it("does not change when the arms change places", () => {
    // With other deals: the same within their chance, standard error 0.008 at most.
    const [control, variant] = [skewed(700, 5), skewed(650, 8)];
    const one = drawn(randomisation(meanCells(control, variant), 4000, SEED, null));
    const other = drawn(randomisation(meanCells(variant, control), 4000, SEED, null));
    expect(Math.abs(one.p - other.p)).toBeLessThan(0.04);
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
