import { describe, expect, it } from "vitest";
import { askedSentence, conclusion, effectSentence, guardrailSentence } from "../../src/decision/index.ts";
import type { Effect } from "../../src/decision/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import type { Contrast } from "../../src/stats/types.ts";
import { metricOf, planOf, reductionOf } from "../checks/make.ts";
import {
  BOOKED,
  CONTACTS,
  contrastOf,
  type Ends,
  effectOf,
  FARE,
  FERRY,
  unmeasurable,
  withoutRelative,
} from "./make.ts";

function decide(plan: Plan, effects: readonly Effect[]) {
  return conclusion(plan, effects, [], reductionOf(plan), []);
}
const booked = (ends: Ends) => effectOf(BOOKED, contrastOf(0.12, ends));
const contacts = (ends: Ends) => effectOf(CONTACTS, contrastOf(0.0809, ends));
const GAIN = booked([0.065, 0.1, 0.137]);
const HELD = contacts([-0.06, -0.012, 0.038]);

// The figures of PAGES; the sentences are its own, with names in quotes instead of "the calendar".
describe("adopt", () => {
  it("says what to do, what was found, what was asked for and what must not get worse", () => {
    expect(decide(FERRY, [GAIN, HELD])).toEqual({
      decision: "adopt",
      variant: "calendar",
      sentence: 'Adopt "calendar".',
      reasons: [
        'Booked: 13.2 of 100 visitors with "calendar" and 12.0 with "list", 10.0% more (95% interval: 6.5% to 13.7% more). Asked for: at least 5% more. Even the least that the interval allows, 6.5% more, goes beyond that.',
        'Must not get worse: Support contacts, limit 5% more. Found with "calendar": 1.2% fewer (95% interval: 6.0% fewer to 3.8% more). Within the limit.',
      ],
    });
  });

  it("says when a proven gain may be less than what was asked for", () => {
    expect(askedSentence(booked([0.029, 0.064, 0.099]), FERRY)).toBe(
      "Asked for: at least 5% more. The gain is real (95% interval: 2.9% to 9.9% more); whether it reaches 5% is not settled. The plan says to adopt on any proven gain.",
    );
  });

  it("gives a guardrail that is surely worse though inside its limit as such", () => {
    const { decision, reasons } = decide(FERRY, [GAIN, contacts([0.01, 0.025, 0.04])]);
    expect(decision).toBe("adopt");
    expect(reasons[1]).toBe(
      'Must not get worse: Support contacts, limit 5% more. Found with "calendar": 2.5% more (95% interval: 1.0% to 4.0% more). Within the limit, though the whole interval is on the worse side.',
    );
  });
});

describe("where fewer is better", () => {
  const late = metricOf({ ...BOOKED, name: "Cancelled", goodIs: "lower" });
  const plan = planOf({ metrics: [late] });
  const asked = (ends: Ends) => askedSentence(effectOf(late, contrastOf(0.12, ends)), plan);

  it("the least and the most of the gain are the high and the low end", () => {
    expect(asked([-0.137, -0.1, -0.065])).toBe(
      "Asked for: at least 5% fewer. Even the least that the interval allows, 6.5% fewer, goes beyond that.",
    );
    expect(asked([-0.019, -0.011, -0.003])).toBe(
      "Asked for: at least 5% fewer. The gain is real but smaller: 1.90% fewer at most (95% interval: 1.90% to 0.30% fewer).",
    );
    expect(asked([-0.019, 0.03, 0.08])).toBe(
      "Asked for: at least 5% fewer. The interval rules that out: 1.9% fewer at most (95% interval: 1.9% fewer to 8.0% more).",
    );
  });
});

describe("keep the control", () => {
  it("because it got worse", () => {
    const { decision, sentence } = decide(FERRY, [booked([-0.094, -0.061, -0.027]), HELD]);
    expect(decision).toBe("keep-control");
    expect(sentence).toBe(
      'Stay with "list". Booked fell by 6.1% with "calendar" (95% interval: 9.4% to 2.7%), which is the wrong way.',
    );
  });

  it("because the gain is too small, proven or not", () => {
    expect(decide(FERRY, [booked([0.003, 0.011, 0.019]), HELD]).sentence).toBe(
      'Stay with "list". Booked: "calendar" helps, but by less than the 5% asked for (95% interval: 0.30% to 1.90% more).',
    );
    expect(decide(FERRY, [booked([-0.08, -0.03, 0.019]), HELD]).sentence).toBe(
      'Stay with "list". Booked: "calendar" may help, but by less than the 5% asked for (95% interval: 8.0% fewer to 1.9% more).',
    );
    expect(decide(FERRY, [booked([-0.012, 0.003, 0.019]), HELD]).sentence).toBe(
      'Stay with "list". Booked: with "calendar" a gain of 5% is ruled out, and so is a loss of 5% (95% interval: 1.2% fewer to 1.9% more).',
    );
  });

  it("because of a limit, though what decides was better", () => {
    expect(decide(FERRY, [GAIN, contacts([0.08, 0.14, 0.2])]).sentence).toBe(
      'Stay with "list". Booked was better, but Support contacts rose by 14.0% with "calendar" (95% interval: 8.0% to 20.0%), beyond the limit of 5%.',
    );
  });
});

describe("not settled", () => {
  it("because the interval holds too much", () => {
    const { decision, sentence, reasons } = decide(FERRY, [booked([-0.026, 0.025, 0.078]), HELD]);
    expect(decision).toBe("not-settled");
    expect(sentence).toBe('Not settled: this test can neither recommend "calendar" nor advise against it.');
    expect(reasons[0]).toBe(
      'Booked: 12.3 of 100 visitors with "calendar" and 12.0 with "list", 2.5% more (95% interval: 2.6% fewer to 7.8% more). Asked for: at least 5% more. The interval holds both "no gain" and "5% more".',
    );
  });

  it("because of a limit", () => {
    expect(decide(FERRY, [GAIN, contacts([-0.01, 0.035, 0.08])]).sentence).toBe(
      'Not settled: Booked was better with "calendar", but a rise of Support contacts by more than 5% cannot be ruled out (95% interval: 1.0% fewer to 8.0% more).',
    );
  });

  it("because the plan adopts only on more than a proven gain", () => {
    const strict = { ...FERRY, decision: { ...FERRY.decision, adoptWhen: "shown-worthwhile" as const } };
    const { sentence, reasons } = decide(strict, [booked([0.029, 0.064, 0.099]), HELD]);
    expect(sentence).toBe(
      'Not settled: Booked was better with "calendar", but a gain of 5% is not proven (95% interval: 2.9% to 9.9% more).',
    );
    expect(reasons[0]).toContain("the plan adopts only when that is proven");
  });

  it("because the plan asks for a worthwhile gain and states none", () => {
    const any = metricOf({ name: "Booked", role: "primary" });
    const plan = planOf({ metrics: [any], decision: { ...FERRY.decision, adoptWhen: "shown-worthwhile" } });
    expect(decide(plan, [effectOf(any, contrastOf(0.12, [0.01, 0.02, 0.03]))]).sentence).toBe(
      'Not settled: Booked was better with "calendar", but the plan adopts only on a gain it calls worthwhile, and states none for Booked.',
    );
  });

  it("because a percentage cannot be given", () => {
    const effect = effectOf(BOOKED, withoutRelative(contrastOf(0.12, [-0.94, -0.61, -0.27])));
    expect(effectSentence(effect, FERRY)).toBe(
      'Booked: 4.7 of 100 visitors with "calendar" and 12.0 with "list", 7.3 percentage points lower (95% interval: 11.3 to 3.2 percentage points lower). No percentage is given, since the level compared with is not clearly above 0.',
    );
    expect(askedSentence(effect, FERRY)).toBe("Asked for: at least 5% more. Whether that is so cannot be told.");
  });
});

describe("the sentence of an effect", () => {
  const said = (metric: ReturnType<typeof metricOf>, contrast: Contrast) =>
    effectSentence(effectOf(metric, contrast), planOf({ metrics: [metric] }));

  it("counts what is counted, and gives amounts in their unit", () => {
    expect(said(CONTACTS, contrastOf(0.0809, [-0.06, -0.0124, 0.038]))).toBe(
      'Support contacts: 8.0 per 100 visitors with "calendar" and 8.1 with "list", 1.2% fewer (95% interval: 6.0% fewer to 3.8% more).',
    );
    expect(said(FARE, contrastOf(96.4, [0.025, 0.0778, 0.134]))).toBe(
      'Fare per visitor: 103.90 kr with "calendar" and 96.40 kr with "list", 7.8% higher (95% interval: 2.5% to 13.4% higher).',
    );
    const visits = metricOf({ name: "Visits", summary: "mean" });
    expect(said(visits, contrastOf(2, [-0.02, 0.1, 0.22]))).toBe(
      'Visits: 2.200 per visitor with "calendar" and 2.000 with "list", 10.0% more (95% interval: 2.0% fewer to 22.0% more).',
    );
  });

  it("says of whom, where some are left out", () => {
    const visits = metricOf({ name: "Visits", summary: "mean", withoutRows: "leave-out" });
    expect(said(visits, contrastOf(2, [-0.02, 0.1, 0.22]))).toContain("2.200 per visitor with a value with");
  });

  it("gives the difference itself where the plan's rule is an amount", () => {
    const absolute = { ...BOOKED, worthwhile: { kind: "absolute" as const, value: 0.002 } };
    const effect = effectOf(absolute, contrastOf(0.12, [0.065, 0.1, 0.137]));
    const plan = planOf({ metrics: [absolute] });
    expect(effectSentence(effect, plan)).toBe(
      'Booked: 13.2 of 100 visitors with "calendar" and 12.0 with "list", 1.20 percentage points higher (95% interval: 0.78 to 1.64 percentage points higher).',
    );
    expect(askedSentence(effect, plan)).toContain("Asked for: at least 0.2 percentage points higher.");
  });

  it("says why nothing can be compared, or no interval given", () => {
    expect(said(BOOKED, unmeasurable(0, "zero-variance"))).toBe(
      'Booked: 0.0 of 100 visitors with "calendar" and 0.0 with "list". No interval can be given, since every visitor has the same value.',
    );
    expect(said(BOOKED, unmeasurable(0.12, "no-units"))).toBe(
      "Booked: nothing can be compared, since one of the groups has no visitor with a value.",
    );
    const effect = effectOf(CONTACTS, unmeasurable(0, "few-units"));
    expect(guardrailSentence(effect, FERRY)).toBe(
      'Must not get worse: Support contacts, limit 5% more. Not settled with "calendar", since one of the groups has fewer than two visitors with a value.',
    );
  });

  it("has an open end where the interval has one", () => {
    expect(said(BOOKED, contrastOf(0.12, [0.065, 0.1, null]))).toContain("(95% interval: at least 6.5% more)");
  });
});
