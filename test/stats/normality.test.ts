import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { arms, jointSums } from "../../src/cells/index.ts";
import type { Arm } from "../../src/cells/types.ts";
import { contrast, normality } from "../../src/stats/index.ts";
import { ratioTerm, shapedArm } from "../../src/stats/shaped-arm.ts";
import { pairTables, scoreTable } from "../cells/tables.ts";
import { metricOf } from "../checks/make.ts";
import { ratioArm, shareArm, sumsOf } from "./arms.ts";
import { expectWithin, present } from "./expect.ts";

const Z = 1.959963984540054;
const meanArm = (values: readonly number[]): Arm => ({ kind: "mean", sums: sumsOf(values) });
const mean = (values: readonly number[]) => values.reduce((a, b) => a + b, 0) / values.length;
const central = (values: readonly number[], k: number) => mean(values.map((x) => (x - mean(values)) ** k));

/** METHODS 3 written out for two means, from the units and from nothing of ours. */
function byHand(control: readonly number[], variant: readonly number[], g: [number, number], k: [number, number]) {
  const [nc, nt] = [control.length, variant.length];
  const [vc, vt] = [central(control, 2) / (nc - 1), central(variant, 2) / (nt - 1)];
  const all = vc + vt;
  const [wc, wt] = [vc / all, vt / all];
  const a = (g[1] * vt ** 1.5) / Math.sqrt(nt) / all ** 1.5 - (g[0] * vc ** 1.5) / Math.sqrt(nc) / all ** 1.5;
  const b = (k[1] * wt ** 2) / nt + (k[0] * wc ** 2) / nc;
  const e = wt ** 2 / nt + wc ** 2 / nc;
  const density = (x: number) => Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
  const departure = (x: number) =>
    density(x) *
    ((a * (2 * x * x + 1)) / 6 +
      x * ((b * (x * x - 3)) / 12 - (a * a * (x ** 4 + 2 * x * x - 3)) / 18 - (e * (x * x + 1)) / 4));
  return { skew: a, lowerTail: 0.025 + departure(-Z), upperTail: 0.025 - departure(Z) };
}

const CONTROL = Array.from({ length: 300 }, (_, i) => ((i * 37) % 101) ** 2 / 100);
const VARIANT = Array.from({ length: 90 }, (_, i) => ((i * 53) % 97) ** 3 / 9000);
const g1 = (values: readonly number[]) => central(values, 3) / central(values, 2) ** 1.5;
const g2 = (values: readonly number[]) => central(values, 4) / central(values, 2) ** 2 - 3;

describe("the normality of a contrast", () => {
  it("takes each arm's and the pooled moments of its units", () => {
    const { tails } = present(normality(meanArm(CONTROL), meanArm(VARIANT), Z, 0, 390));
    const pooled = (of: (values: readonly number[]) => number) => (300 * of(CONTROL) + 90 * of(VARIANT)) / 390;
    const own = byHand(CONTROL, VARIANT, [g1(CONTROL), g1(VARIANT)], [g2(CONTROL), g2(VARIANT)]);
    const both = byHand(CONTROL, VARIANT, [pooled(g1), pooled(g1)], [pooled(g2), pooled(g2)]);
    for (const tail of ["lowerTail", "upperTail"] as const) {
      expectWithin(tails.own[tail], own[tail], 1e-10);
      expectWithin(tails.pooled[tail], both[tail], 1e-10);
    }
    const off = ({ lowerTail, upperTail }: { lowerTail: number; upperTail: number }) =>
      Math.max(Math.abs(lowerTail - 0.025), Math.abs(upperTail - 0.025));
    const worse = off(own) > off(both) ? own : both;
    expectWithin(tails.skew, worse.skew, 1e-10);
    expectWithin(tails.reported.lowerTail, worse.lowerTail, 1e-10);
  });

  it("holds the largest unit's share of each arm's squares, and none for shares of units", () => {
    const { largest } = present(normality(meanArm(CONTROL), meanArm(VARIANT), Z, 0, 390));
    const share = (values: readonly number[]) =>
      Math.max(...values.map((x) => (x - mean(values)) ** 2)) / (values.length * central(values, 2));
    expectWithin(largest?.control?.ofSquares ?? 0, share(CONTROL), 1e-12);
    expectWithin(largest?.variant?.ofSquares ?? 0, share(VARIANT), 1e-12);
    expect(present(normality(shareArm(30, 900), shareArm(50, 300), Z, 0, 1200)).largest).toBeNull();
  });

  it("is absent without an arm's spread, and for quantiles", () => {
    const still = meanArm([2, 2, 2]);
    expect(normality(still, still, Z, 0, 6)).toEqual({ absent: "zero-variance" });
    expect(normality(meanArm([1]), meanArm([1, 2]), Z, 0, 3)).toEqual({ absent: "few-units" });
    expect(normality(meanArm([]), meanArm([1, 2]), Z, 0, 2)).toEqual({ absent: "no-units" });
    const quantile: Arm = { kind: "quantile", sums: sumsOf([1, 2]), q: "0.5", ordered: new Map() };
    expect(normality(quantile, quantile, Z, 0, 4)).toEqual({ absent: "not-for-quantiles" });
  });

  it("exists where one arm alone varies", () => {
    const found = present(normality(meanArm([2, 2, 2]), meanArm(VARIANT), Z, 0, 93));
    expect(found.largest?.control).toBeNull();
    expect(found.tails.own.lowerTail).toBeGreaterThan(0.025);
  });
});

describe("a ratio's term for its denominator", () => {
  const units = fc.array(fc.tuple(fc.integer({ min: -50, max: 500 }), fc.integer({ min: 1, max: 30 })), {
    minLength: 3,
    maxLength: 40,
  });
  const withJoint = (pairs: readonly (readonly [number, number])[]) => {
    const { of, x, joint } = pairTables(pairs.map(([a, b], i) => [0, i, a, b] as const));
    const arm = ratioArm(
      pairs.map(([a]) => a),
      pairs.map(([, b]) => b),
    ) as Extract<Arm, { kind: "ratio" }>;
    expect([of.n.length, x.n.length]).toEqual([pairs.length, pairs.length]);
    return { ...arm, joint: jointSums(joint, 1)[0] ?? null };
  };
  const byDefinition = (pairs: readonly (readonly [number, number])[]) => {
    const [a, b] = [pairs.map(([value]) => value), pairs.map(([, value]) => value)];
    const ratio = mean(a) / mean(b);
    const e = pairs.map(([x, y]) => x - ratio * y);
    const n = pairs.length;
    const covariance = e.reduce((sum, value, i) => sum + (value - mean(e)) * ((b[i] ?? 0) - mean(b)), 0) / (n - 1);
    return covariance / (n * mean(b) ** 2);
  };

  it("is the covariance of score and denominator, by joint sums and, where R is not 0, without", () => {
    fc.assert(
      fc.property(units, (pairs) => {
        const arm = withJoint(pairs);
        const expected = byDefinition(pairs);
        expect(ratioTerm(arm)).toBeCloseTo(expected, 9);
        const without = ratioTerm({ ...arm, joint: null });
        if (without !== null && Math.abs(mean(pairs.map(([a]) => a))) > 1) expect(without).toBeCloseTo(expected, 7);
      }),
    );
  });

  it("is known also where the ratio is 0, of which the score tells nothing", () => {
    const pairs = [
      [-30, 1],
      [10, 2],
      [20, 9],
    ] as const;
    const arm = withJoint(pairs);
    expect(ratioTerm({ ...arm, joint: null })).toBeNull();
    expect(ratioTerm(arm)).toBeCloseTo(byDefinition(pairs), 12);
    expect(present(shapedArm(arm)).ratio).toBe(ratioTerm(arm));
  });

  it("comes with the arms that are rolled up from an engine's cells", () => {
    const { of, x, joint } = pairTables([
      [0, 1, 3, 2],
      [0, 1, 5, 4],
      [0, 9, 1, 4],
    ]);
    const score = scoreTable([
      [0, 1, 0.5],
      [0, 1, 0.25],
      [0, 9, -0.75],
    ]);
    const [arm] = arms(metricOf({ name: "R", summary: "ratio-of-totals" }), { of, ratio: { per: x, score, joint } }, 1);
    expect(arm?.kind === "ratio" && arm.joint?.n).toBe(3);
  });
});

describe("a contrast that asks for the skew-corrected interval", () => {
  const [control, variant] = [meanArm(CONTROL), meanArm(VARIANT)];

  it("has it, with relative difference and p that agree about 0, and beside it what would count", () => {
    const plain = contrast(control, variant, Z);
    const found = contrast(control, variant, Z, { alike: 0.5 });
    const { corrected } = present(normality(control, variant, Z, 0.5, 390));
    expect(found.difference).toMatchObject({ method: "skew-corrected", low: corrected.low, high: corrected.high });
    expect(found.difference.p).toBe(corrected.p);
    expect(found.difference).toMatchObject({ estimate: plain.difference.estimate, z: plain.difference.z });
    expect(found.beside[0]).toEqual({
      method: plain.difference.method,
      low: plain.difference.low,
      high: plain.difference.high,
    });
    expect(found.critical).toBe(Z);
    const relativeEnds = present(found.relative);
    expect(Math.sign(relativeEnds.low ?? 0)).toBe(Math.sign(corrected.low));
    expect(Math.sign(relativeEnds.high ?? 0)).toBe(Math.sign(corrected.high));
    expect(relativeEnds.estimate).toBe(present(plain.relative).estimate);
  });

  it("takes the place of Welch's in small arms and of the normal one in large ones, but not of the score's", () => {
    const small = (values: readonly number[]) => meanArm(values.slice(0, 40));
    const method = (...arms: [Arm, Arm]) => contrast(...arms, Z, { alike: 1 }).difference.method;
    expect(contrast(small(CONTROL), small(VARIANT), Z).difference.method).toBe("welch");
    expect(method(small(CONTROL), small(VARIANT))).toBe("skew-corrected");
    expect(method(shareArm(30, 300), shareArm(40, 300))).toBe("skew-corrected");
    expect(method(shareArm(9, 300), shareArm(40, 300))).toBe("score");
  });

  it("has what would count without where a shape is not known", () => {
    expect(contrast(meanArm([1]), variant, Z, { alike: 1 })).toEqual(contrast(meanArm([1]), variant, Z));
    const still = meanArm([2, 2]);
    expect(contrast(still, still, Z, { alike: 1 })).toEqual(contrast(still, still, Z));
  });
});
