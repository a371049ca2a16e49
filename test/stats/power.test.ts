import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  beyondWorthwhile,
  detectable,
  exaggeration,
  normalCritical,
  normalQuantile,
  normalUpperTail,
  powerWith,
  type Question,
  sizeForAll,
  unitsFor,
} from "../../src/stats/index.ts";
import { expectFinite, expectPrinted, expectWithin } from "./expect.ts";
import { power as fromR } from "./reference.ts";

const positive = fc.double({ min: 1e-3, max: 1e3, noNaN: true });
const share = fc.double({ min: 0.01, max: 0.99, noNaN: true });
const question: fc.Arbitrary<Question> = fc.record({
  units: fc.integer({ min: 10, max: 1e9 }),
  critical: fc.double({ min: 0.1, max: 6, noNaN: true }),
  standardError: positive,
  distance: positive,
});

describe("the normal quantile", () => {
  // R 4.2.2: qnorm(c(0.8, 0.9, 0.2, 1e-10, 0.5)).
  it("is the one of R on both sides of a half", () => {
    expectWithin(normalQuantile(0.8), 0.841621233572914, 1e-14);
    expectWithin(normalQuantile(0.9), 1.2815515655446, 1e-13);
    expectWithin(normalQuantile(0.2), -0.841621233572914, 1e-14);
    expectWithin(normalQuantile(1e-10), -6.36134090240406, 1e-13);
    expect(normalQuantile(0.5)).toBe(0);
  });
});

describe("the effect that a test of its size finds", () => {
  // R 4.2.2: qnorm(0.975) + qnorm(0.8) is 2.801585.
  it("is 2.8 standard errors at an alpha of 5% and a power of 80%", () => {
    expectPrinted(detectable(normalCritical(0.05), 0.8, 10), "28.0");
    expectPrinted(detectable(normalCritical(0.05), 0.8, 1), "2.801585");
  });

  it("is found with just that power", () => {
    fc.assert(
      fc.property(question, share, (of, power) => {
        const found = detectable(of.critical, power, of.standardError);
        fc.pre(found > 0);
        expectWithin(powerWith({ ...of, distance: found }, of.units), power, 1e-12);
        expectWithin(unitsFor({ ...of, distance: found }, power), of.units, 1e-12);
      }),
    );
  });
});

describe("the units that a question needs", () => {
  const asked: Question = { units: 1000, critical: normalCritical(0.05), standardError: 0.5, distance: 0.7 };

  it("are n (detectable / distance)^2", () => {
    // (2.801585 x 0.5 / 0.7)^2 = 4.00453
    expectPrinted(unitsFor(asked, 0.8), "4004.5");
    expect(unitsFor({ ...asked, distance: 0.35 }, 0.8)).toBe(4 * unitsFor(asked, 0.8));
  });

  it("give it its power", () => {
    fc.assert(
      fc.property(question, share, (of, power) => {
        const found = detectable(of.critical, power, of.standardError);
        fc.pre(found > of.standardError * 1e-3);
        expectWithin(powerWith(of, unitsFor(of, power)), power, 1e-9);
      }),
    );
  });

  // With a true effect of just the worthwhile one the interval clears it in alpha / 2 of tests (METHODS 4).
  it("do not exist where the worthwhile effect is to be shown and no larger one is expected", () => {
    expect(beyondWorthwhile(0.05, 0.05)).toEqual({ absent: "no-expected-effect" });
    expect(beyondWorthwhile(0.05, 0.02)).toEqual({ absent: "no-expected-effect" });
    expect(beyondWorthwhile(0.05, null)).toEqual({ absent: "no-expected-effect" });
    expectWithin(beyondWorthwhile(0.05, 0.08) as number, 0.03, 1e-14);
    expectWithin(powerWith({ ...asked, distance: 1e-300 }, 1e9), 0.025, 1e-12);
  });
});

describe("one size for all questions", () => {
  const [small, large]: [Question, Question] = [
    { units: 1000, critical: normalCritical(0.05), standardError: 0.5, distance: 1.4 },
    { units: 1000, critical: normalCritical(0.05), standardError: 0.5, distance: 0.7 },
  ];

  it("is the largest that one needs; the others have more power there", () => {
    const found = sizeForAll([small, large], 0.8);
    expect(found?.units).toBe(unitsFor(large, 0.8));
    expectWithin(found?.powers[1] ?? null, 0.8, 1e-12);
    // Twice the distance: 2 x 2.801585 - 1.959964 = 3.643206 standard errors, pnorm(3.643206) = 0.9998653.
    expectPrinted(found?.powers[0] ?? null, "0.999865");
    expectPrinted(found?.together ?? null, "0.799865");
  });

  it("promises no less than 0, and nothing without a question", () => {
    expect(sizeForAll([large, large, large], 0.3)?.together).toBe(0);
    expect(sizeForAll([], 0.8)).toBeNull();
    expectWithin(sizeForAll([large, large], 0.8)?.together ?? null, 0.6, 1e-12);
  });
});

describe("what a significant result overstates", () => {
  // Gelman and Carlin 2014, retrodesign(0.1, 3.28) and (2, 8.1), from memory: power 0.05 and 0.06, type S 0.46 and 0.24,
  // exaggeration 77 and 9.7. Theirs is the mean of 10,000 draws: to more digits the last is 9.54 (power.R).
  it("is what the paper gives for its two examples", () => {
    const [sexes, voting] = [exaggeration(0.1, 3.28, normalCritical(0.05)), exaggeration(2, 8.1, normalCritical(0.05))];
    expectPrinted(sexes.power, "0.05");
    expectPrinted(sexes.wrongSign, "0.46");
    expectPrinted(sexes.factor, "77");
    expectPrinted(voting.power, "0.06");
    expectPrinted(voting.wrongSign, "0.24");
    expect(Math.abs(voting.factor - 9.7)).toBeLessThan(0.2);
  });

  it.each(fromR().exaggeration)("agrees with R's numerical integration for $effect against $standardError", (row) => {
    const found = exaggeration(row.effect, row.standardError, normalCritical(row.alpha));
    expectWithin(found.power, row.power, 1e-12);
    expectWithin(found.wrongSign, row.wrongSign, 1e-10);
    expectWithin(found.factor, row.factor, 1e-9);
  });

  it("does not mind the sign of the effect, is above 1 and falls as the effect grows", () => {
    fc.assert(
      fc.property(positive, fc.double({ min: 0.5, max: 8, noNaN: true }), (effect, critical) => {
        const found = exaggeration(effect, 1, critical);
        expectFinite(found);
        expect(exaggeration(-effect, 1, critical)).toEqual(found);
        expect(found.factor).toBeGreaterThanOrEqual(1);
        expect(found.wrongSign).toBeLessThanOrEqual(0.5);
        expect(exaggeration(effect * 1.1, 1, critical).factor).toBeLessThanOrEqual(found.factor);
      }),
    );
  });

  it("has the power of a two-sided interval", () => {
    const found = exaggeration(2, 1, 1.5);
    expectWithin(found.power, normalUpperTail(-0.5) + normalUpperTail(3.5), 1e-14);
  });
});
