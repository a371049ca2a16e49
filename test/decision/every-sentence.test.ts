import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { checks } from "../../src/checks/index.ts";
import {
  absoluteSentence,
  askedSentence,
  conclusion,
  effectSentence,
  guardrailSentence,
  nextSentences,
} from "../../src/decision/index.ts";
import type { Effect } from "../../src/decision/types.ts";
import type { Metric, Plan } from "../../src/plan/types.ts";
import type { Absent, Contrast } from "../../src/stats/types.ts";
import { arbitraryLog } from "../checks/arbitrary.ts";
import { metricOf, planOf, reductionOf, variantsOf } from "../checks/make.ts";
import { contrastOf, type Ends, effectOf, unmeasurable, withoutRelative } from "./make.ts";
import { share } from "./make-arms.ts";
import { BROKEN, NEVER_USED } from "./words-never-used.ts";

const ABSENT: readonly Absent["absent"][] = [
  "no-units",
  "few-units",
  "zero-variance",
  "control-near-zero",
  "zero-denominator",
  "lost-digits",
  "few-for-rank",
  "no-width",
  "same-covariate",
  "no-expected-effect",
  "not-for-quantiles",
  "not-built",
];
/** Around 0 and a rule of 5%: every zone of every role in both directions, ends on the limits, open ends. */
const ENDS: readonly Ends[] = [
  [0.065, 0.1, 0.137],
  [-0.137, -0.1, -0.065],
  [0.003, 0.011, 0.019],
  [-0.019, -0.011, -0.003],
  [0.029, 0.064, 0.099],
  [-0.099, -0.064, -0.029],
  [-0.012, 0.003, 0.019],
  [-0.08, -0.03, 0.019],
  [-0.019, 0.03, 0.08],
  [-0.078, 0, 0.078],
  [0, 0.02, 0.04],
  [-0.04, -0.02, 0],
  [0, 0, 0],
  [0.01, 0.06, null],
  [null, -0.06, -0.01],
  [-0.06, 0.01, null],
  [null, 0.01, 0.06],
];
const CONTRASTS: readonly Contrast[] = [
  ...ENDS.map((ends) => contrastOf(0.12, ends)),
  ...ENDS.map((ends) => withoutRelative(contrastOf(0.12, ends))),
  ...ABSENT.map((absent) => unmeasurable(0.12, absent)),
];

const KINDS: readonly Partial<Metric>[] = [
  { summary: "proportion" },
  { summary: "mean" },
  {
    summary: "mean",
    of: { event: "booking", where: [], aggregate: { kind: "sum", column: "fare" } },
    unitOfMeasure: "kr",
  },
  {
    summary: "quantile",
    quantile: "0.95",
    of: { event: "page", where: [], aggregate: { kind: "max", column: "seconds" } },
    unitOfMeasure: "s",
    withoutRows: "leave-out",
  },
  { summary: "ratio-of-totals", per: { event: "search", where: [], aggregate: { kind: "count" } } },
];
const RULES = [null, { kind: "relative", value: 0.05 }, { kind: "absolute", value: 0.006 }] as const;

function metrics(): Metric[] {
  return KINDS.flatMap((kind) =>
    (["higher", "lower"] as const).flatMap((goodIs) =>
      RULES.flatMap((rule) => [
        metricOf({ name: "Booked", role: "primary", ...kind, goodIs, worthwhile: rule }),
        ...(rule === null ? [] : [metricOf({ name: "Booked", role: "guardrail", ...kind, goodIs, margin: rule })]),
        metricOf({ name: "Booked", ...kind, goodIs }),
      ]),
    ),
  );
}

function plansFor(metric: Metric): Plan[] {
  const other = metricOf({ name: "Other", role: "primary" });
  const others = metric.role === "primary" ? [] : [other];
  const rule = planOf().decision;
  return [
    planOf({ metrics: [metric, ...others], decision: { ...rule, adoptWhen: "shown-better" } }),
    planOf({ metrics: [metric, ...others], decision: { ...rule, adoptWhen: "shown-worthwhile" } }),
    // "Other" is better throughout, and here it is enough
    planOf({ metrics: [metric, other], decision: { ...rule, primaries: "any" } }),
  ];
}

function sentences(effect: Effect, plan: Plan): string[] {
  return [
    effectSentence(effect, plan),
    effect.role === "guardrail" ? guardrailSentence(effect, plan) : askedSentence(effect, plan),
    absoluteSentence(effect, plan) ?? "",
  ];
}

function concluded(effect: Effect, plan: Plan): string[] {
  const other = plan.metrics[1];
  const effects = [effect, ...(other === undefined ? [] : [effectOf(other, contrastOf(0.12, [0.01, 0.02, 0.03]))])];
  const reduction = reductionOf(plan, { enrolled: [1, 0].map((n) => n + 1) });
  const found = conclusion(plan, effects, [], reduction, []);
  return [found.sentence, ...found.reasons, ...nextSentences(plan, effects, found, reduction)];
}

const WALK = metrics().flatMap((metric) =>
  plansFor(metric).flatMap((plan) => CONTRASTS.map((contrast) => ({ plan, effect: effectOf(metric, contrast) }))),
);
const SAID = [
  ...new Set(WALK.flatMap(({ plan, effect }) => [...sentences(effect, plan), ...concluded(effect, plan)])),
].filter((text) => text !== "");

describe("every sentence on effects", () => {
  it("is reached for every role, zone, direction and either-way", () => {
    const reached = new Set(
      WALK.map(({ plan, effect }) => [effect.role, effect.zone, plan.metrics[0]?.goodIs].join(" ")),
    );
    const gains = ["worthwhile", "worse", "too-small", "better", "no-worthwhile-gain", "not-settled"];
    for (const goodIs of ["higher", "lower"]) {
      for (const zone of gains) expect(reached).toContain(`primary ${zone} ${goodIs}`);
      for (const zone of ["within", "beyond", "not-settled"]) expect(reached).toContain(`guardrail ${zone} ${goodIs}`);
      for (const zone of ["worse", "better", "not-settled"]) expect(reached).toContain(`secondary ${zone} ${goodIs}`);
    }
    expect(WALK.filter(({ effect }) => effect.eitherWay).length).toBeGreaterThan(0);
    expect(SAID.length).toBeGreaterThan(500);
  });

  it("is a sentence: it starts as one, ends as one, and holds no figure that does not exist", () => {
    for (const text of SAID) {
      expect(text).toMatch(/^["A-Z].*\.$/);
      expect(text).not.toMatch(BROKEN);
      expect(text.split('"').length % 2, text).toBe(1);
      expect((text.match(/\(/g) ?? []).length, text).toBe((text.match(/\)/g) ?? []).length);
    }
  });

  it("uses none of the words that are never used, nor those of the trade that an owner does not know", () => {
    for (const text of SAID) expect(text).not.toMatch(NEVER_USED);
  });

  it("gives no interval without its confidence", () => {
    for (const text of SAID) {
      const bare = text.replaceAll(/\(95% interval: [^()]*\)/g, "");
      expect(bare, text).not.toMatch(/\d(%| kr| percentage points)? (more|fewer|higher|lower)? ?to \d/);
    }
  });

  it("says rose of what went up and fell of what went down", () => {
    for (const { plan, effect } of WALK) {
      const { estimate } = effect.contrast.difference;
      const [sentence = ""] = concluded(effect, plan);
      if (estimate === null) continue;
      if (/ rose by /.test(sentence)) expect(estimate).toBeGreaterThan(0);
      if (/ fell by /.test(sentence)) expect(estimate).toBeLessThan(0);
    }
  });

  it("uses the plan's own word for who was counted, in one and in many", () => {
    const effect = effectOf(metricOf({ name: "Booked", role: "primary" }), unmeasurable(0.12, "zero-variance"));
    const plan = planOf({ unitCalled: { one: "harbour", many: "harbours" } });
    expect(effectSentence(effect, plan)).toContain("12.0 of 100 harbours");
    expect(effectSentence(effect, plan)).toContain("since every harbour has the same value");
  });
});

describe("an undecidable report", () => {
  it("shows no estimate, for any log and any effect", () => {
    fc.assert(
      fc.property(arbitraryLog, fc.constantFrom(...ENDS), ({ plan, reduction }, ends) => {
        const found = checks(plan, reduction);
        const effects = plan.metrics.flatMap((metric) =>
          plan.variants.slice(1).map(({ name }) => effectOf(metric, contrastOf(0.12, ends), name)),
        );
        const arms = plan.metrics.map(() => plan.variants.map(() => share(6000))); // of use where several pass
        const { decision, sentence, reasons } = conclusion(plan, effects, found, reduction, arms);
        fc.pre(decision === "undecidable");
        for (const text of [sentence, ...reasons]) expect(text).not.toMatch(/interval|% (more|fewer)|of 100 /);
      }),
    );
  });
});

describe("every sentence of the checks", () => {
  it("is whole, and uses none of the words that are never used, for any log", () => {
    fc.assert(
      fc.property(arbitraryLog, ({ plan, reduction }) => {
        for (const check of checks(plan, reduction)) {
          for (const text of [check.sentence, check.remedy, ...check.parts.map((part) => part.sentence)]) {
            if (text === "") continue;
            expect(text).not.toMatch(NEVER_USED);
            expect(text).not.toMatch(BROKEN);
            expect(text).toMatch(/^["A-Z\d].*\.$/);
          }
        }
      }),
      { numRuns: 300 },
    );
  });

  it("names three groups as well as two", () => {
    const plan = planOf({ variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    const [allocation] = checks(plan, reductionOf(plan, { enrolled: [5000, 5000, 5400] }));
    expect(allocation?.sentence).toContain('5,000 visitors with "list", 5,000 with "calendar" and 5,400 with "map"');
  });
});
