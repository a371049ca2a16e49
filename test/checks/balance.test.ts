import { describe, expect, it } from "vitest";
import { balance } from "../../src/checks/balance.ts";
import { obstacles } from "../../src/decision/undecidable.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import { withCovariates } from "./covariates.ts";
import { metricOf, planOf, reductionOf, variantsOf } from "./make.ts";

const COLUMN = metricOf({ name: "Fare", summary: "mean", adjustFor: { kind: "column", column: "past_fares" } });
const OTHER = { ...COLUMN, name: "Seats", adjustFor: { kind: "column", column: "past_seats" } as const };
const PAST = metricOf({ name: "Booked", role: "primary", adjustFor: { kind: "days-before", days: 14 } });

const plan = (metrics: readonly Metric[]): Plan => planOf({ metrics });

/** 10,000 units in each group, of which so many have a 1. */
const ones = (...counts: readonly number[]) => counts.map((k) => [[1, k] as const, [0, 10_000 - k] as const]);

const resultOf = (p: Plan, ...values: Parameters<typeof withCovariates>[1]) =>
  balance(p, withCovariates(reductionOf(p), values));

// scipy 1.17.1, 5,000 of 10,000 against k, z with each group's own variance: p(5182) 0.0100358, p(5183) 0.0096325,
// p(5232) 0.00102862, p(5233) 0.00097813; twice that (Holm, the other p near 1): p(5198) 0.0101857, p(5199) 0.0097476,
// p(5245) 0.0010537, p(5246) 0.00099947.
describe("balance", () => {
  it.each([
    [5182, "pass"],
    [5183, "caution"],
    [5232, "caution"],
    [5233, "fail"],
  ])("with %i of 10,000 against 5,000 is a %s", (k, result) => {
    expect(resultOf(plan([COLUMN]), ones(5000, k))?.result).toBe(result);
  });

  it.each([
    [5198, "pass"],
    [5199, "caution"],
    [5245, "caution"],
    [5246, "fail"],
  ])("takes Holm's p over two covariates: with %i it is a %s", (k, result) => {
    const found = resultOf(plan([COLUMN, OTHER]), ones(5000, k), ones(5000, 5000));
    expect(found?.result).toBe(result);
    expect(found?.parts.map((part) => part.result)).toEqual([result, "pass"]);
  });

  it("compares every variant with the control, over all of which Holm's p goes", () => {
    const three = planOf({ metrics: [COLUMN], variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    expect(resultOf(three, ones(5000, 5000, 5245))?.result).toBe("caution");
    expect(resultOf(three, ones(5000, 5000, 5246))?.result).toBe("fail");
    expect(resultOf(three, ones(5000, 5000, 5246))?.sentence).toContain('0.5000 with "list" and 0.5246 with "map"');
  });

  it("asks of one covariate once, though two metrics adjust for it", () => {
    const twice = plan([COLUMN, { ...COLUMN, name: "Fares again" }]);
    const found = resultOf(twice, ones(5000, 5233), ones(5000, 5233));
    expect(found?.result).toBe("fail");
    expect(found?.parts).toHaveLength(1);
  });

  // R 4.2.2: chisq.test(matrix(c(100, 900, 143, 857), 2), correct = FALSE)$p.value is 0.003250187; fisher.test of 0 and 9 of 1,000: 0.003836272
  it("compares a proportion's own past as a share: chi-square, and Fisher's exact test where few have it", () => {
    const share = (a: number, b: number) => [
      [[1, a] as const, [0, 1000 - a] as const],
      [[1, b] as const, [0, 1000 - b] as const],
    ];
    const many = resultOf(plan([PAST]), share(100, 143));
    expect(many?.result).toBe("caution");
    expect(many?.parts[0]?.figures).toMatchObject({ variants: [{ p: expect.closeTo(0.003250187, 9) }] });
    const few = resultOf(plan([PAST]), share(0, 9));
    expect(few?.parts[0]?.figures).toMatchObject({ variants: [{ p: expect.closeTo(0.003836272, 9) }] });
    expect(few?.parts[0]?.about).toBe("Booked in the 14 days before enrolment");
  });

  it("is not there where nothing is adjusted for, or the covariate is one number", () => {
    expect(resultOf(plan([metricOf({ name: "Booked", role: "primary" })]))).toBeNull();
    expect(resultOf(plan([COLUMN]), ones(0, 0))).toBeNull();
  });

  it("stops the decision when it fails, with what to do", () => {
    const p = plan([COLUMN]);
    const reduction = withCovariates(reductionOf(p), [ones(5000, 5400)]);
    const found = balance(p, reduction);
    if (found === null) throw new Error("there is a covariate");
    expect(obstacles(p, [found], reduction)).toEqual([
      '"past_fares" at enrolment: mean 0.5000 with "list" and 0.5400 with "calendar". Before the test the groups should be alike. Chance alone gives so large a difference in fewer than one test in a million (p < 0.0001).',
      "What to do: Find out how a visitor is given a variant, and whether some were enrolled late or twice. The value is the one on the enrolling row: if it is written after the variant was shown, the variant can have changed it.",
    ]);
  });
});
