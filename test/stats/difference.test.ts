import { describe, expect, it } from "vitest";
import { difference } from "../../src/stats/difference.ts";
import { bonferroniCritical, bonferroniP, normalCritical } from "../../src/stats/index.ts";
import { tCritical } from "../../src/stats/student-t.ts";
import type { Level } from "../../src/stats/types.ts";
import { welch } from "../../src/stats/welch.ts";
import { expectPrinted, expectWithin, present } from "./expect.ts";
import { levelFrom, levelOf, range } from "./levels.ts";
import { fromR } from "./reference.ts";

describe("the difference of two means", () => {
  // R 4.2.2, example(t.test): t.test(1:10, y = c(7:20)) prints t = -5.4349. Ours is variant minus control: the sign turns.
  it("has the statistic of R's documented example", () => {
    expectPrinted(present(difference(levelOf(range(1, 10)), levelOf(range(7, 20)), normalCritical(0.05))).z, "5.4349");
  });

  it("has the normal quantile times the standard error as its half-width", () => {
    const found = present(difference(levelOf(range(1, 10)), levelOf(range(7, 20)), normalCritical(0.05)));
    // R 4.2.2: t.test(...)$stderr is 1.47196014438797; qnorm(0.975) is 1.959963984540054.
    expectWithin(found.standardError, 1.47196014438797, 1e-14);
    expectWithin(found.high - found.estimate, 1.47196014438797 * 1.959963984540054, 1e-14);
    expectWithin(found.estimate - found.low, 1.47196014438797 * 1.959963984540054, 1e-14);
  });

  it("is exact where the means are large beside it", () => {
    expect(
      present(difference(levelOf([1e7, 1e7 + 0.2]), levelOf([1e7 + 0.1, 1e7 + 0.3]), normalCritical(0.05))).estimate,
    ).toBe(0.1);
  });

  it("turns its sign, and nothing else, when the arms change places", () => {
    const [a, b] = [levelOf([1, 5, 2.5, 9]), levelOf([3, 3.5, 8, 21, 4])];
    for (const method of [difference, welch]) {
      const [there, back] = [present(method(a, b, 0.05)), present(method(b, a, 0.05))];
      expect(back).toEqual({ ...there, estimate: -there.estimate, low: -there.high, high: -there.low, z: -there.z });
    }
  });

  it("is absent, not NaN, for an arm of one unit and where neither arm varies", () => {
    for (const method of [difference, welch]) {
      expect(method(levelOf([3]), levelOf([1, 2]), 0.05)).toEqual({ absent: "few-units" });
      expect(method(levelOf([1, 2]), levelOf([3]), 0.05)).toEqual({ absent: "few-units" });
      expect(method(levelOf([1, 1]), levelOf([2, 2, 2]), 0.05)).toEqual({ absent: "zero-variance" });
      const lost: Level = { ...levelOf([1, 2]), variance: { absent: "lost-digits" } };
      expect(method(lost, levelOf([1, 2]), 0.05)).toEqual({ absent: "lost-digits" });
      expect(method(levelOf([3]), lost, 0.05)).toEqual({ absent: "few-units" });
      expect(method(lost, levelOf([3]), 0.05)).toEqual({ absent: "few-units" });
    }
  });
});

describe("Welch's interval", () => {
  // R's documented example, Student's sleep data: t.test(extra ~ group) prints group 1 minus group 2.
  it("matches R's documented example on the sleep data to the digits printed", () => {
    const [first, second] = [
      [0.7, -1.6, -0.2, -1.2, -0.1, 3.4, 3.7, 0.8, 0, 2],
      [1.9, 0.8, 1.1, 0.1, -0.1, 4.4, 5.5, 1.6, 4.6, 3.4],
    ];
    const found = present(welch(levelOf(second), levelOf(first), 0.05));
    expectPrinted(found.z, "-1.8608");
    expectPrinted(found.df, "17.776");
    expectPrinted(found.p, "0.07939");
    expectPrinted(found.low, "-3.3654832");
    expectPrinted(found.high, "0.2054832");
  });

  // R's documented example: t.test(1:10, y = c(7:20, 200)).
  it("matches R's documented example with an outlier", () => {
    const found = present(welch(levelOf([...range(7, 20), 200]), levelOf(range(1, 10)), 0.05));
    expectPrinted(found.z, "-1.6329");
    expectPrinted(found.df, "14.165");
    expectPrinted(found.p, "0.1245");
    expectPrinted(found.low, "-47.242900");
    expectPrinted(found.high, "6.376233");
  });

  // NIST/SEMATECH e-Handbook 1.3.5.3, miles per gallon of 249 US and 79 Japanese cars, AUTO83B.DAT, variances not taken as
  // equal: as printed by Boost's students_t_two_samples.cpp, whose probability is one-sided.
  it("matches the handbook's example of cars", () => {
    const [us, japanese] = [levelFrom(249, 20.14458, 6.4147), levelFrom(79, 30.48101, 6.10771)];
    const found = present(welch(japanese, us, 0.05));
    expectPrinted(found.z, "-12.946");
    expectPrinted(found.df, "136.87");
    expectPrinted(found.p / 2, "7.855e-26");
  });

  it.each(fromR().welch)("agrees with R on $control against $variant", (expected) => {
    const found = present(welch(levelOf(expected.control), levelOf(expected.variant), 1 - expected.confidence));
    expectWithin(found.z, expected.t, 1e-13);
    expectWithin(found.df, expected.df, 1e-13);
    expectWithin(found.p, expected.p, 1e-12); // R's own pt has about 13 digits
    expectWithin(found.standardError, expected.standardError, 1e-13);
    expectWithin(found.low, expected.low, 1e-12);
    expectWithin(found.high, expected.high, 1e-12);
  });

  it("takes the degrees of the arm that varies when the other does not", () => {
    const found = present(welch(levelOf([2, 2, 2]), levelOf([1, 4, 5, 9]), 0.05));
    expectWithin(found.df, 3, 1e-15);
    expectWithin(found.critical, tCritical(0.05, 3), 1e-14);
  });
});

describe("intervals that hold together", () => {
  // Dunn 1961 divides alpha: for 3 contrasts at 0.05 the two-sided quantile is that of 0.0166..., 2.394 in his table 1 of
  // the normal limit (quoted from memory). R 4.2.2: qnorm(1 - 0.05 / 6) is 2.393979800.
  it("are wider by the Bonferroni critical value", () => {
    expectPrinted(bonferroniCritical(0.05, 3), "2.393979800");
    expectPrinted(bonferroniCritical(0.05, 1), "1.959964");
  });

  it("multiply p by their number, up to 1", () => {
    expect(bonferroniP(0.01, 3)).toBe(0.03);
    expect(bonferroniP(0.4, 3)).toBe(1);
  });
});
