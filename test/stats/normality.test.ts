import { describe, expect, it } from "vitest";
import { armFigures } from "../../src/stats/index.ts";
import { normalityOfArms } from "../../src/stats/normality.ts";
import { meanArm, ratioArm, shareArm } from "./arms.ts";
import { expectFinite, expectWithin, present } from "./expect.ts";
import { edgeworth } from "./shapes.ts";

const Z = 1.959963984540054;

describe("the normality of a contrast", () => {
  // g1 of a share p is (1 - 2p) / sqrt(p (1 - p)), here 9.849: the third case of the two public programs. They were given the
  // variance over n and 1.96.
  it("is that of its arms: a share of 1%, 9,000 against 1,000 units", () => {
    const found = present(normalityOfArms(shareArm(90, 9000), shareArm(10, 1000), Z, 10_000, 1));
    const rows = edgeworth()[2]?.rows ?? [];
    const below = (x: number) => Number(rows.find((row) => row.x === x)?.tcftt2);
    expectWithin(found.tails.own.lowerTail, below(-1.96), 0.002);
    expectWithin(found.tails.own.upperTail, 1 - below(1.96), 0.002);
    expect(found.tails.level).toBe("strong");
    expect(found.unitsByRule.kohavi).toBe(Math.ceil(355 * (0.98 ** 2 / 0.0099)));
    expect(found.largestShare).toEqual({ control: null, variant: null });
    // Ten units have the event in the smaller arm: one of them holds a tenth of the cubes.
    expect(found.unitsForTails).toBeNull();
    expectFinite({ ...found, unitsForTails: 0, largestShare: 0 });
  });

  it("agrees with its parts: the relative interval excludes 0 with the difference's, the shares are the arms'", () => {
    const [c, t] = [
      Array.from({ length: 300 }, (_, i) => (i % 7) + (i === 299 ? 40 : 0)),
      Array.from({ length: 250 }, (_, i) => (i % 7) + 1),
    ];
    const found = present(normalityOfArms(meanArm(c), meanArm(t), Z, 550, 0));
    const { low, p, relative } = found.skewCorrected;
    expect(low).toBeGreaterThan(0);
    expect(p).toBeLessThan(0.05);
    expect(present(relative).low).toBeGreaterThan(0);
    expect(found.largestShare.control?.level).toBe("strong");
    expect(found.largestShare.variant?.level).toBe("near");
    const { sd, mean } = armFigures(meanArm(c));
    expectWithin(
      found.largestShare.control?.ofSquares ?? null,
      (45 - (mean ?? 0)) ** 2 / (299 * (sd ?? 0) ** 2),
      1e-12,
    );
  });

  it("of a ratio counts its denominator", () => {
    const [a, b] = [Array.from({ length: 60 }, (_, i) => i % 5), Array.from({ length: 60 }, (_, i) => 1 + (i % 7))];
    const small = [a.slice(0, 30), b.slice(0, 30)] as const;
    const { expansions } = present(normalityOfArms(ratioArm(a, b), ratioArm(...small), Z, 90, 0)).tails;
    expect(expansions.own.lean).not.toBe(0);
    expect(expansions.own.shift).not.toBe(0);
  });

  it("is absent as the difference is", () => {
    const of = (c: number[], t: number[]) => normalityOfArms(meanArm(c), meanArm(t), Z, 10, 1);
    expect(of([], [1, 2])).toEqual({ absent: "no-units" });
    expect(of([1], [1, 2])).toEqual({ absent: "few-units" });
    expect(of([1, 1], [1, 1])).toEqual({ absent: "zero-variance" });
  });
});
