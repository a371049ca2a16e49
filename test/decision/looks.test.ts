import { describe, expect, it } from "vitest";
import type { Arm } from "../../src/cells/types.ts";
import {
  atThisLook,
  conclusion,
  effects as effectsOf,
  lookSentences,
  nextSentences,
} from "../../src/decision/index.ts";
import { lookAccount, looksSoFar } from "../../src/decision/looks.ts";
import type { Effect } from "../../src/decision/types.ts";
import type { Looks, Plan } from "../../src/plan/types.ts";
import { holm, pOfLooks } from "../../src/stats/index.ts";
import { metricOf, planOf, reductionOf, variantsOf } from "../checks/make.ts";
import { contrastOf, effectOf, FERRY } from "./make.ts";
import { share } from "./make-arms.ts";

const QUARTERS = [0.25, 0.5, 0.75, 1];
const looksAt = (at: number, more: Partial<Looks> = {}): Looks => ({
  planned: QUARTERS,
  at,
  spending: "obrien-fleming",
  reached: null,
  ...more,
});

const PRIMARY = metricOf({ name: "Booked", role: "primary" });
const SECOND = metricOf({ name: "Opened", role: "primary" });
const GUARDRAIL = metricOf({ name: "Left", role: "guardrail", margin: { kind: "absolute", value: 0.01 } });
const SECONDARY = metricOf({ name: "Scrolled" });

const effects = (plan: Plan, arms: readonly (readonly Arm[])[]) => effectsOf(plan, arms, reductionOf(plan));
const critical = ({ contrast }: Effect) => {
  const { estimate, high, standardError } = contrast.difference;
  return ((high ?? Number.NaN) - (estimate ?? Number.NaN)) / (standardError ?? Number.NaN);
};

describe("planned looks", () => {
  const names = (k: number) => ["list", "calendar", "map", "tiles"].slice(0, k + 1);
  const planWith = (k: number, over: Partial<Plan>) =>
    planOf({
      metrics: [PRIMARY, SECOND, GUARDRAIL, SECONDARY],
      variants: variantsOf(Object.fromEntries(names(k).map((name) => [name, 1]))),
      ...over,
    });
  const armsOf = (k: number) => Array.from({ length: 4 }, () => names(k).map((_, v) => share(v === 0 ? 6000 : 6300)));

  // rpact 3.3.4, test/reference/looks.json: asOF, quarters, alpha 0.05, looks 1 to 4
  it.each([
    [1, 4.33263365],
    [2, 2.9631316],
    [3, 2.35904429],
    [4, 2.01409014],
  ])("give what decides the interval of look %d, and measures for information none other", (at, boundary) => {
    const found = effects(planWith(1, { looks: looksAt(at) }), armsOf(1));
    for (const effect of found)
      expect(critical(effect)).toBeCloseTo(effect.role === "secondary" ? 1.959964 : boundary, 6);
  });

  // rpact 3.3.4: getDesignGroupSequential(informationRates = (1:4) / 4, typeOfDesign = "asP", alpha = a, sided = 2,
  // tolerance = 1e-10), third critical value: a = 0.025, 2.629617360; a = 0.0125, 2.876158163
  it("share the error out evenly over the variants, and under any over the primaries too", () => {
    const looks = looksAt(3, { spending: "pocock" });
    const two = effects(planWith(2, { looks }), armsOf(2));
    for (const effect of two.filter(({ role }) => role !== "secondary"))
      expect(critical(effect)).toBeCloseTo(2.62961736, 6);
    const any = planWith(2, { looks });
    const four = effects({ ...any, decision: { ...any.decision, primaries: "any" } }, armsOf(2));
    for (const effect of four.filter(({ role }) => role === "primary"))
      expect(critical(effect)).toBeCloseTo(2.876158163, 6);
    for (const effect of four.filter(({ role }) => role === "guardrail"))
      expect(critical(effect)).toBeCloseTo(2.62961736, 6);
  });

  // boundaries as above; spent, by Python 3.11, statistics.NormalDist: 4 - 4 cdf(inv_cdf(1 - a/4) / sqrt(0.5))
  it("are told with the boundary of each interval that decides, and how much of its alpha is spent", () => {
    const one = lookAccount(planWith(1, { looks: looksAt(2) }));
    expect(one).toMatchObject({ planned: QUARTERS, spending: "obrien-fleming", at: 2, reached: null });
    expect(one?.shares).toEqual([0.25, 0.5]);
    expect(one?.metrics.map(({ metric }) => metric)).toEqual(["Booked", "Opened", "Left"]);
    for (const { alpha, boundary, spent } of one?.metrics ?? []) {
      expect(alpha).toBeCloseTo(0.05, 12);
      expect(boundary).toBeCloseTo(2.9631316, 6);
      expect(spent).toBeCloseTo(0.003050645515977557, 10);
    }
    const any = planWith(2, { looks: looksAt(4) });
    const last = lookAccount({ ...any, decision: { ...any.decision, primaries: "any" } });
    const ofAlpha = last?.metrics.map(({ alpha, spent }) => [alpha.toFixed(6), spent.toFixed(6)]);
    expect(ofAlpha).toEqual([
      ["0.012500", "0.012500"],
      ["0.012500", "0.012500"],
      ["0.025000", "0.025000"],
    ]);
    expect(lookAccount(planWith(1, {}))).toBeNull();
  });

  it("adjust p so that it is under alpha exactly when the interval excludes 0", () => {
    for (const calendar of [6150, 6170, 6176, 6200, 6230, 6300]) {
      for (const at of [2, 3, 4]) {
        const plan = planOf({ metrics: [PRIMARY], looks: looksAt(at) });
        const [effect] = effects(plan, [[share(6000), share(calendar)]]);
        const { low, p } = effect?.contrast.difference ?? { low: null, p: null };
        expect((effect?.pAdjusted ?? 1) < 0.05).toBe((low ?? -1) > 0);
        expect(effect?.pAdjusted).toBeGreaterThan(p ?? 1);
      }
    }
  });

  it("show beside it Holm's p over the variants, of p that allow for the looks", () => {
    const looks = looksAt(2, { spending: "pocock" });
    const plan = planOf({ metrics: [PRIMARY], looks, variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    const found = effects(plan, [[share(6000), share(6250), share(6300)]]);
    const ps = found.map(({ contrast }) => contrast.difference.p ?? 1);
    const alone = ps.map((p) => pOfLooks({ shares: [0.25, 0.5], spending: "pocock", isLast: false }, p));
    expect(found.map(({ pHolm }) => pHolm)).toEqual(holm(alone));
    expect(found.map(({ pAdjusted }) => pAdjusted)).toEqual(alone.map((p) => Math.min(1, 2 * p)));
  });

  it("take the share of the planned units that was analysed, and of the looks before their own in the plan", () => {
    const plan = planOf({ metrics: [PRIMARY], plannedUnits: 10_000, looks: looksAt(3) });
    const found = atThisLook(plan, reductionOf(plan, { enrolled: [3_500, 3_600] }));
    expect(found.looks?.reached).toBeCloseTo(0.71, 12);
    expect(looksSoFar(found)).toEqual({ shares: [0.25, 0.5, 0.71], spending: "obrien-fleming", isLast: false });
    expect(looksSoFar(planOf({ metrics: [PRIMARY], looks: looksAt(4) }))?.shares).toEqual(QUARTERS);
  });

  it("take the looks before in proportion where this one came before they were due", () => {
    const plan = planOf({ metrics: [PRIMARY], looks: looksAt(3, { reached: 0.45 }) });
    const shares = looksSoFar(plan)?.shares ?? [];
    [0.15, 0.3, 0.45].forEach((share, k) => {
      expect(shares[k]).toBeCloseTo(share, 12);
    });
  });

  it("spend what is left at the last, whatever its share, and at one that has reached the whole size", () => {
    const last = planOf({ metrics: [PRIMARY], looks: looksAt(4, { reached: 0.9 }) });
    expect(looksSoFar(last)).toMatchObject({ shares: [0.25, 0.5, 0.75, 0.9], isLast: true });
    const [effect] = effects(last, [[share(6000), share(6300)]]);
    expect(critical(effect ?? effectOf(PRIMARY, contrastOf(0.1, [0, 0, 0])))).toBeLessThan(2.01409014);
  });

  it("size a next test by the last of them and not by this one", () => {
    const sized = (at: number) =>
      effects(
        planOf({ metrics: [{ ...PRIMARY, worthwhile: { kind: "absolute", value: 0.01 } }], looks: looksAt(at) }),
        [[share(6000), share(6300)]],
      )[0]?.power;
    expect(sized(1)?.unitsForWorthwhile).toBeCloseTo(sized(4)?.unitsForWorthwhile ?? 0, 6);
    expect(sized(1)?.detectable).toBeGreaterThan(sized(4)?.detectable ?? 0);
  });
});

describe("what page one says of looks", () => {
  const reduction = reductionOf(FERRY, { enrolled: [35_500, 35_500] });
  const plan = (looks: Looks | null, plannedUnits: number | null = 100_000): Plan => ({
    ...FERRY,
    looks,
    plannedUnits,
  });
  const said = (asked: Plan) =>
    lookSentences(asked, { decision: "adopt", variant: "calendar", sentence: "", reasons: [] });

  it("is nothing without them, and nothing where nothing can be decided", () => {
    expect(said(plan(null))).toEqual([]);
    const undecidable = { decision: "undecidable", variant: null, sentence: "", reasons: [] } as const;
    expect(lookSentences(plan(looksAt(2)), undecidable)).toEqual([]);
  });

  it("is which look this is, what it costs, and before the last that tests stopped early exaggerate", () => {
    // 2.359 / 1.960, and 2.426 at 71% by the same integral
    expect(said(atThisLook(plan(looksAt(3)), reduction))).toEqual([
      'This is look 3 of 4, at 71.0% of the planned 100,000 visitors. Intervals of what decides are 1.2 times as wide as with a single look, so that several looks together make a false "adopt" no more likely.',
      "Tests stopped early exaggerate: an effect shown before the last look is likely smaller than the one found.",
    ]);
    expect(said(plan(looksAt(4), null))).toEqual([
      'This is look 4 of 4, planned at 100% of the size. Intervals of what decides are 1.03 times as wide as with a single look, so that several looks together make a false "adopt" no more likely.',
    ]);
  });

  it("is no early look where the whole size is reached before the last", () => {
    const found = said(plan(looksAt(3, { reached: 1.02 })));
    expect(found).toHaveLength(1);
    expect(found[0]).toContain("at 102.0% of the planned 100,000 visitors");
  });

  it("tells, where nothing is settled, when the next look is; after the last that there is no other", () => {
    const open = effectOf(FERRY.metrics[0] ?? PRIMARY, contrastOf(0.12, [-0.026, 0.025, 0.078]));
    const next = (asked: Plan) => nextSentences(asked, [open], conclusion(asked, [open], [], reduction, []), reduction);
    const early = next(plan(looksAt(2, { reached: 0.55 })));
    expect(early).toContain(
      'What would settle it: going on as planned. The next look is at 75% of the planned 100,000 visitors. Looks at other times make a false "adopt" more likely.',
    );
    expect(early.join(" ")).not.toMatch(/new test|Adding days/);
    expect(next(plan(looksAt(3, { reached: 0.75 }))).join(" ")).toContain(
      "The next look is at 100% of the planned 100,000 visitors, and the last.",
    );
    const late = next(plan(looksAt(4, { reached: 1 }))).join(" ");
    expect(late).toMatch(/What would settle it: a new test/);
    expect(late).toContain('make a false "adopt" more likely: all its planned looks have been made.');
  });
});
