import { describe, expect, it } from "vitest";
import type { Arm } from "../../src/cells/types.ts";
import { conclusion, effects as effectsOf } from "../../src/decision/index.ts";
import type { Effect } from "../../src/decision/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { metricOf, planOf, reductionOf, variantsOf } from "../checks/make.ts";
import { share } from "./make-arms.ts";

const PRIMARY = metricOf({ name: "Booked", role: "primary" });
const SECONDARY = metricOf({ name: "Opened" });
const GUARDRAIL = metricOf({ name: "Left", role: "guardrail", margin: { kind: "absolute", value: 0.01 } });

const effects = (plan: Plan, arms: readonly (readonly Arm[])[]) => effectsOf(plan, arms, reductionOf(plan));

function plan(names: readonly string[], metrics = [PRIMARY]): Plan {
  return planOf({ metrics, variants: variantsOf(Object.fromEntries(names.map((name) => [name, 1]))) });
}

describe("the effects", () => {
  // R 4.2.2, n = 50000, p = x / n, s^2 = n p (1 - p) / (n - 1): 6600 against 6000, d -+ c se, c by mvtnorm 1.1-3 and
  // uniroot: 1 - pmvnorm(rep(-c, k), rep(c, k), corr, algorithm = Miwa(2048)) = .05, corr v_c / (v_c + v_t):
  //   k = 2: 2.21435824463   k = 3: 2.35253427279
  // p = 2 pnorm(-d / se) = 1.075118968e-08 whatever k
  it.each([
    [1, 7.887059559e-3, 1.611294044e-2],
    [2, 7.35321891262e-3, 1.66467810874e-2],
    [3, 7.06325961812e-3, 1.69367403819e-2],
  ])("hold at once where %d variants meet one control", (k, low, high) => {
    const names = ["list", "calendar", "map", "tiles"].slice(0, k + 1);
    const arms = [share(6000), ...names.slice(1).map(() => share(6600))];
    const found = effects(plan(names, [PRIMARY, GUARDRAIL]), [arms, arms]);
    expect(found).toHaveLength(2 * k);
    for (const effect of found) {
      expect(effect.contrast.difference.low).toBeCloseTo(low, 11);
      expect(effect.contrast.difference.high).toBeCloseTo(high, 11);
      expect((effect.contrast.difference.p ?? 0) / 1.075118968e-8).toBeCloseTo(1, 8);
    }
  });

  // R 4.2.2: p of 6600, 6100 and 6200 against 6000 as above, p.adjust(c(p6600, p6100, p6200, p6100), "BH")
  it("are pointwise for metrics for information, with Benjamini and Hochberg's p over all their contrasts", () => {
    const other = { ...SECONDARY, name: "Scrolled" };
    const found = effects(plan(["list", "calendar", "map"], [SECONDARY, PRIMARY, other]), [
      [share(6000), share(6600), share(6100)],
      [share(6000), share(6600), share(6600)],
      [share(6000), share(6200), share(6100)],
    ]);
    expect(found[0]?.contrast.difference.low).toBeCloseTo(7.887059559e-3, 11);
    const adjusted = found.filter(({ role }) => role === "secondary").map(({ pAdjusted }) => pAdjusted ?? Number.NaN);
    [4.3004758734e-8, 0.332225908276, 0.106609816445, 0.332225908276].forEach((p, i) => {
      expect((adjusted[i] ?? Number.NaN) / p).toBeCloseTo(1, 10);
    });
    expect(found.filter(({ role }) => role === "secondary").every(({ pHolm }) => pHolm === null)).toBe(true);
  });

  // R 4.2.2 with mvtnorm 1.1-3. Dunnett's p of A, 6250 and 6100 against 6000: 0.0299525212352, 0.522907529219; of B, 6200
  // and 6150: 0.0966762953815, 0.251366532731; p.adjust(, "holm") over A and B of each variant.
  it("have, where one primary is enough, Holm's p over the primaries on Dunnett's, and intervals at their part of alpha", () => {
    const arms = [
      [share(6000), share(6250), share(6100)],
      [share(6000), share(6200), share(6150)],
    ];
    const primaries = [
      { ...PRIMARY, name: "A" },
      { ...PRIMARY, name: "B" },
    ];
    const all = plan(["list", "calendar", "map"], primaries);
    const any: Plan = { ...all, decision: { ...all.decision, primaries: "any" } };
    const ps = (found: readonly Effect[]) => found.map(({ pAdjusted }) => pAdjusted ?? Number.NaN);
    const expected = [0.0599050424704, 0.522907529219, 0.0966762953815, 0.502733065463];
    ps(effects(any, arms)).forEach((p, i) => {
      expect(p).toBeCloseTo(expected[i] ?? Number.NaN, 10);
    });
    expect(ps(effects(all, arms))[0]).toBeCloseTo(0.0299525212352, 10);
    expect(effects(all, arms)[0]?.pHolm).toBeCloseTo(0.0317889023779, 10); // p.adjust over the p of A
    // p.adjust over the p of A and B
    const beside = [0.0635778047557, 0.332225908276, 0.159914724667, 0.293066697158];
    effects(any, arms).forEach(({ pHolm }, i) => {
      expect(pHolm).toBeCloseTo(beside[i] ?? Number.NaN, 10);
    });
    // critical values of the arms of A by mvtnorm and uniroot, at .025 and .05
    expect(effects(any, arms)[0]?.contrast.critical).toBeCloseTo(2.47804977229, 10);
    expect(effects(all, arms)[0]?.contrast.critical).toBeCloseTo(2.2128197981, 10);
  });

  it("keep alpha whole for guardrails where one primary is enough", () => {
    const all = plan(["list", "calendar"], [PRIMARY, { ...PRIMARY, name: "B" }, GUARDRAIL]);
    const any: Plan = { ...all, decision: { ...all.decision, primaries: "any" } };
    const arms = [share(6000), share(6600)];
    const criticals = effects(any, [arms, arms, arms]).map(({ contrast }) => contrast.critical);
    // qnorm(1 - .0125), qnorm(1 - .025): R 4.2.2
    expect(criticals[0]).toBeCloseTo(2.24140272760495, 12);
    expect(criticals[2]).toBeCloseTo(1.95996398454005, 12);
  });

  // R 4.2.2 with mvtnorm 1.1-3, 6100 against 6000: z = 0.969640118508, 1 - pmvnorm(rep(-z, 4), rep(z, 4), corr, Miwa(1024))
  it("have Dunnett's p, adjusted for all variants", () => {
    const arms = [share(6000), share(6100), share(6100), share(6100), share(6100)];
    const [first] = effects(plan(["list", "a", "b", "c", "d"]), [arms]);
    expect(first?.contrast.difference.p).toBeCloseTo(0.3322259083, 9);
    expect(first?.pAdjusted).toBeCloseTo(0.732847355328, 10);
  });

  it("come metric by metric, variant by variant, in plan order and without the control", () => {
    const three = planOf({
      metrics: [SECONDARY, PRIMARY],
      variants: variantsOf({ list: 1, calendar: 1, map: 1 }).map((v) => ({ ...v, isControl: v.name === "calendar" })),
    });
    const arms = [share(6600), share(6000), share(6100)];
    const found = effects(three, [arms, arms]);
    expect(found.map(({ metric, variant, control }) => [metric, variant, control])).toEqual([
      ["Opened", "list", "calendar"],
      ["Opened", "map", "calendar"],
      ["Booked", "list", "calendar"],
      ["Booked", "map", "calendar"],
    ]);
    expect(found[0]?.contrast.difference.estimate).toBeCloseTo(0.012, 12);
  });

  it("exist for arms that nothing can be computed from", () => {
    const [empty] = effects(plan(["list", "calendar"]), [[share(0, 0), share(0, 0)]]);
    expect(empty).toMatchObject({ zone: "not-settled", pAdjusted: null, eitherWay: false });
    expect(empty?.contrast.difference).toMatchObject({ estimate: null, low: null, high: null, p: null });
  });

  it("need an arm for every metric and variant", () => {
    expect(() => effects(plan(["list", "calendar"]), [[share(1)]])).toThrow("no arm for metric 0 and variant 1");
  });
});

describe("several variants that pass", () => {
  const decide = (names: readonly string[], successes: readonly number[], goodIs: "higher" | "lower" = "higher") => {
    const several = plan(names, [{ ...PRIMARY, goodIs }]);
    const arms = [successes.map((n) => share(n))];
    return conclusion(several, effects(several, arms), [], reductionOf(several), arms);
  };

  it("the one with the largest estimate is adopted, with the contrast between the best two", () => {
    const found = decide(["list", "map", "tiles", "calendar"], [6000, 6400, 6500, 6600]);
    expect(found.variant).toBe("calendar");
    expect(found.sentence).toBe('Adopt "calendar". "tiles" and "map" passed too; "calendar" did best on Booked.');
    // R 4.2.2, 6600 against 6500, Fieller at Dunnett's critical value for these arms, 2.351981128 by mvtnorm and uniroot:
    // 0.01538461538 -0.02278809127 0.05506207257
    expect(found.reasons.at(-1)).toBe(
      'Between the two, Booked: 13.2 of 100 visitors with "calendar" and 13.0 with "tiles", 1.5% more (95% interval: 2.3% fewer to 5.5% more). This comparison does not decide.',
    );
    expect(found.reasons).toHaveLength(4);
  });

  it("the one with the smallest estimate where lower is good", () => {
    const found = decide(["list", "map", "calendar"], [6600, 6000, 6100], "lower");
    expect(found.variant).toBe("map");
    expect(found.reasons.at(-1)).toContain('12.0 of 100 visitors with "map" and 12.2 with "calendar", 1.6% fewer');
  });

  it("on a tie the first in the plan", () => {
    const found = decide(["list", "map", "calendar"], [6000, 6600, 6600]);
    expect(found.variant).toBe("map");
    expect(found.sentence).toBe(
      'Adopt "map". "calendar" passed too, and no less well on Booked; "map" stands first in the plan.',
    );
  });

  it("without an estimate on the first primary, where another is enough, the first in the plan", () => {
    const primaries = [
      { ...PRIMARY, name: "A" },
      { ...PRIMARY, name: "B" },
    ];
    const all = plan(["list", "map", "calendar"], primaries);
    const any: Plan = { ...all, decision: { ...all.decision, primaries: "any" } };
    const arms = [
      [share(0, 0), share(0, 0), share(0, 0)],
      [share(6000), share(6500), share(6600)],
    ];
    const found = conclusion(any, effects(any, arms), [], reductionOf(any), arms);
    expect(found.variant).toBe("map");
    expect(found.sentence).toContain('"calendar" passed too; "map" stands first in the plan.');
    expect(found.reasons.at(-1)).toBe("Between the two, A cannot be compared.");
  });
});
