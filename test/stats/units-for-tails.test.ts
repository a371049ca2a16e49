import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { armFigures } from "../../src/stats/index.ts";
import { largestShare } from "../../src/stats/largest-share.ts";
import { tails } from "../../src/stats/tails.ts";
import { unitsByRule, unitsForTails } from "../../src/stats/units-for-tails.ts";
import { meanArm } from "./arms.ts";
import { expectWithin, present } from "./expect.ts";
import { exponential, shaped } from "./shapes.ts";

const Z = 1.959963984540054;
const firm = (n: number, skewness: number) => ({ n, skewness, ofCubes: 0.01 });

describe("the units at which the tails are near", () => {
  // All m from 1 / 1000 to 1000 in small steps: the answer must be the first from which no step is off any more.
  it("is the number from which on no larger test is off by more than a fifth", () => {
    const arm = fc.record({
      g: fc.double({ min: -3, max: 3, noNaN: true }),
      k: fc.double({ min: 0, max: 12, noNaN: true }),
    });
    fc.assert(
      fc.property(
        arm,
        arm,
        fc.integer({ min: 200, max: 5000 }),
        fc.integer({ min: 200, max: 5000 }),
        (c, t, nc, nt) => {
          const at = (m: number) => tailsAt(m, c, t, nc, nt);
          const found = unitsForTails(at(1), nc + nt, firm(nc, c.g), firm(nt, t.g)) ?? Number.NaN;
          const enough = found / (nc + nt);
          for (let m = enough * 1.001; m < 1000 * enough; m *= 1.2) expect(at(m).level).toBe("near");
          expect(at((enough * (nc + nt) - 1) / (nc + nt) - 1e-6 * enough).level).not.toBe("near");
        },
      ),
      { numRuns: 60 },
    );
  });

  // By hand: at 50 and 200 the lower tail is off by 1.605 points in the first part and 0.563 in the second, so
  // 1.605 h + 0.563 h^2 = 0.5 at h = 0.2834, and 250 / h^2 = 3,113.
  it("is about 3,113 for exponential arms of one to four", () => {
    const found = unitsForTails(present(tails(exponential(200), exponential(50), Z)), 250, firm(200, 2), firm(50, 2));
    expectWithin(found, 3113, 0.002);
  });

  it("cannot be told when one unit holds over 5% of the cubes, or n is under ten times the squared skewness", () => {
    const found = present(tails(exponential(1000), exponential(1000), Z));
    const told = (arm: { n: number; skewness: number; ofCubes: number }) =>
      unitsForTails(found, 2000, firm(1000, 2), arm);
    expect(told({ n: 1000, skewness: 2, ofCubes: 0.05 })).not.toBeNull();
    expect(told({ n: 1000, skewness: 2, ofCubes: 0.0501 })).toBeNull();
    expect(told({ n: 1000, skewness: 10, ofCubes: 0.01 })).not.toBeNull();
    expect(told({ n: 1000, skewness: 10.01, ofCubes: 0.01 })).toBeNull();
  });

  it("has the rules of thumb beside it, by the more skewed arm", () => {
    expect(unitsByRule(2, -10)).toEqual({ kohavi: 35_500, cochran: 2_500 });
  });
});

function tailsAt(m: number, c: { g: number; k: number }, t: { g: number; k: number }, nc: number, nt: number) {
  return present(tails(shaped(nc * m, 1, c.g, c.k), shaped(nt * m, 1, t.g, t.k), Z));
}

describe("the largest unit's share", () => {
  it("is of the squares about the mean, whichever end is further off", () => {
    // Mean 3, deviations -2, -1, -1, -1, 5: squares 32, cubes 136.
    const share = largestShare(armFigures(meanArm([1, 2, 2, 2, 8])));
    expectWithin(share?.ofSquares ?? null, 25 / 32, 1e-12);
    expect(share?.ofCubes).toBeGreaterThanOrEqual(125 / 136);
    expectWithin(largestShare(armFigures(meanArm([-1, -2, -2, -2, -8])))?.ofSquares ?? null, 25 / 32, 1e-12);
  });

  it("of the cubes is never under the true share, and not far above it for skewed units", () => {
    const units = fc.array(fc.integer({ min: 0, max: 1000 }), { minLength: 5, maxLength: 50 });
    fc.assert(
      fc.property(units, (xs) => {
        fc.pre(new Set(xs).size > 1);
        const mean = xs.reduce((a, b) => a + b) / xs.length;
        const cubes = xs.map((x) => Math.abs(x - mean) ** 3);
        const share = Math.max(...cubes) / cubes.reduce((a, b) => a + b);
        expect(largestShare(armFigures(meanArm(xs)))?.ofCubes).toBeGreaterThanOrEqual(share * (1 - 1e-9));
      }),
    );
    const skewed = [...new Array<number>(990).fill(0), 1, 2, 3, 4, 5, 6, 7, 8, 9, 10];
    const mean = 0.055;
    const cubes = skewed.map((x) => Math.abs(x - mean) ** 3).reduce((a, b) => a + b);
    expect(largestShare(armFigures(meanArm(skewed)))?.ofCubes).toBeLessThan((1.2 * (10 - mean) ** 3) / cubes);
  });

  it("of the cubes knows symmetric units, with and without a heavy tail", () => {
    // 1,000 units at 1 and -1, one each at 30 and -30: 27,000 of 55,000.
    const heavy = [...Array.from({ length: 1000 }, (_, i) => (i % 2 === 0 ? 1 : -1)), 30, -30];
    expect(largestShare(armFigures(meanArm(heavy)))?.ofCubes).toBeGreaterThan(27 / 55);
    expect(largestShare(armFigures(meanArm(heavy)))?.ofCubes).toBeLessThan(0.52);
    // Heads in ten throws, each of 1,024 ways: the furthest is 5 away, the standard deviation sqrt(2.5), and the mean cube is
    // taken as that of the standard deviation.
    const throws = [1, 10, 45, 120, 210, 252, 210, 120, 45, 10, 1].flatMap((ways, heads) =>
      new Array<number>(ways).fill(heads),
    );
    expectWithin(largestShare(armFigures(meanArm(throws)))?.ofCubes ?? null, 125 / 2.5 ** 1.5 / 1024, 1e-9);
  });

  // 100 units: the limits are 0.05 and 0.20 + 2 log(100) / 100 = 0.0921. Half at -1, the rest at 1, and one far off.
  it.each([
    [3.5, "near"],
    [5, "caution"],
    [6.3, "caution"],
    [8, "strong"],
  ])("with one unit at %d standard deviations or so: %s", (far, level) => {
    const units = Array.from({ length: 99 }, (_, i) => (i % 2 === 0 ? -1 : 1));
    expect(largestShare(armFigures(meanArm([...units, far])))?.level).toBe(level);
  });

  it("does not exist without spread", () => {
    expect(largestShare(armFigures(meanArm([2, 2, 2])))).toBeNull();
    expect(largestShare(armFigures(meanArm([2])))).toBeNull();
  });
});
