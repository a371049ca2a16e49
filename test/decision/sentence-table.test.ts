import { describe, expect, it } from "vitest";
import { askedSentence, conclusion, effectSentence, guardrailSentence } from "../../src/decision/index.ts";
import type { Zone } from "../../src/decision/types.ts";
import type { Metric } from "../../src/plan/types.ts";
import { metricOf, planOf, reductionOf } from "../checks/make.ts";
import { BOOKED, CONTACTS, contrastOf, type Ends, effectOf } from "./make.ts";

/** Every zone in both directions, word for word, at a level of 12 of 100 with a rule of 5%. */
const LATE = metricOf({ ...BOOKED, name: "Cancelled", goodIs: "lower" });
const ANY = metricOf({ ...BOOKED, worthwhile: null });
const RETURNED = metricOf({ ...CONTACTS, name: "Returned", goodIs: "higher" });

type Line = readonly [metric: Metric, ends: Ends, zone: Zone, asked: string];
const PRIMARIES: readonly Line[] = [
  [
    BOOKED,
    [0.065, 0.1, 0.137],
    "worthwhile",
    "Asked for: at least 5% more. Even the least that the interval allows, 6.5% more, goes beyond that.",
  ],
  [
    BOOKED,
    [0.029, 0.064, 0.099],
    "better",
    "Asked for: at least 5% more. The gain is real (95% interval: 2.9% to 9.9% more); whether it reaches 5% is not settled. The plan says to adopt on any proven gain.",
  ],
  [
    BOOKED,
    [-0.094, -0.061, -0.027],
    "worse",
    "Asked for: at least 5% more. It went the other way (95% interval: 9.4% to 2.7% fewer).",
  ],
  [
    BOOKED,
    [0.003, 0.011, 0.019],
    "too-small",
    "Asked for: at least 5% more. The gain is real but smaller: 1.90% more at most (95% interval: 0.30% to 1.90% more).",
  ],
  [
    BOOKED,
    [-0.08, -0.03, 0.019],
    "no-worthwhile-gain",
    "Asked for: at least 5% more. The interval rules that out: 1.9% more at most (95% interval: 8.0% fewer to 1.9% more).",
  ],
  [
    BOOKED,
    [-0.012, 0.003, 0.019],
    "no-worthwhile-gain",
    "Asked for: at least 5% more. The interval rules that out, and a loss of 5% too (95% interval: 1.2% fewer to 1.9% more).",
  ],
  [
    BOOKED,
    [-0.026, 0.025, 0.078],
    "not-settled",
    'Asked for: at least 5% more. The interval holds both "no gain" and "5% more".',
  ],
  [
    LATE,
    [-0.137, -0.1, -0.065],
    "worthwhile",
    "Asked for: at least 5% fewer. Even the least that the interval allows, 6.5% fewer, goes beyond that.",
  ],
  [
    LATE,
    [-0.099, -0.064, -0.029],
    "better",
    "Asked for: at least 5% fewer. The gain is real (95% interval: 9.9% to 2.9% fewer); whether it reaches 5% is not settled. The plan says to adopt on any proven gain.",
  ],
  [
    LATE,
    [0.027, 0.061, 0.094],
    "worse",
    "Asked for: at least 5% fewer. It went the other way (95% interval: 2.7% to 9.4% more).",
  ],
  [
    LATE,
    [-0.019, -0.011, -0.003],
    "too-small",
    "Asked for: at least 5% fewer. The gain is real but smaller: 1.90% fewer at most (95% interval: 1.90% to 0.30% fewer).",
  ],
  [
    LATE,
    [-0.019, 0.03, 0.08],
    "no-worthwhile-gain",
    "Asked for: at least 5% fewer. The interval rules that out: 1.9% fewer at most (95% interval: 1.9% fewer to 8.0% more).",
  ],
  [
    LATE,
    [-0.078, -0.025, 0.026],
    "not-settled",
    'Asked for: at least 5% fewer. The interval holds both "no gain" and "5% fewer".',
  ],
  [
    ANY,
    [0.029, 0.064, 0.099],
    "better",
    "Asked for: any proven gain, and more is better. The whole interval is a gain (95% interval: 2.9% to 9.9% more).",
  ],
  [
    ANY,
    [-0.099, -0.064, -0.029],
    "worse",
    "Asked for: any proven gain, and more is better. It went the other way (95% interval: 9.9% to 2.9% fewer).",
  ],
  [
    ANY,
    [-0.03, 0.01, 0.05],
    "not-settled",
    "Asked for: any proven gain, and more is better. The interval does not settle whether there is one.",
  ],
];
const GUARDRAILS: readonly Line[] = [
  [
    CONTACTS,
    [-0.06, -0.012, 0.038],
    "within",
    'Must not get worse: Support contacts, limit 5% more. Found with "calendar": 1.2% fewer (95% interval: 6.0% fewer to 3.8% more). Within the limit.',
  ],
  [
    CONTACTS,
    [0.08, 0.14, 0.2],
    "beyond",
    'Must not get worse: Support contacts, limit 5% more. Found with "calendar": 14.0% more (95% interval: 8.0% to 20.0% more). Beyond the limit.',
  ],
  [
    CONTACTS,
    [-0.01, 0.035, 0.08],
    "not-settled",
    'Must not get worse: Support contacts, limit 5% more. Found with "calendar": 3.5% more (95% interval: 1.0% fewer to 8.0% more). Not settled: a rise of Support contacts by more than 5% cannot be ruled out.',
  ],
  [
    RETURNED,
    [-0.038, 0.012, 0.06],
    "within",
    'Must not get worse: Returned, limit 5% fewer. Found with "calendar": 1.2% more (95% interval: 3.8% fewer to 6.0% more). Within the limit.',
  ],
  [
    RETURNED,
    [-0.2, -0.14, -0.08],
    "beyond",
    'Must not get worse: Returned, limit 5% fewer. Found with "calendar": 14.0% fewer (95% interval: 20.0% to 8.0% fewer). Beyond the limit.',
  ],
  [
    RETURNED,
    [-0.08, -0.035, 0.01],
    "not-settled",
    'Must not get worse: Returned, limit 5% fewer. Found with "calendar": 3.5% fewer (95% interval: 8.0% fewer to 1.0% more). Not settled: a fall of Returned by more than 5% cannot be ruled out.',
  ],
];

describe("the table of sentences on effects", () => {
  it.each(PRIMARIES)("tells a primary by its zone and direction, line %#", (metric, ends, zone, asked) => {
    const plan = planOf({ metrics: [metric] });
    const effect = effectOf(metric, contrastOf(0.12, ends));
    expect([effect.zone, askedSentence(effect, plan)]).toEqual([zone, asked]);
  });

  it.each(GUARDRAILS)("tells a guardrail by its zone and direction, line %#", (metric, ends, zone, said) => {
    const plan = planOf({ metrics: [BOOKED, metric] });
    const effect = effectOf(metric, contrastOf(0.12, ends));
    expect([effect.zone, guardrailSentence(effect, plan)]).toEqual([zone, said]);
  });

  it("has a line for every zone of a primary and of a guardrail, in either direction", () => {
    const lines = [...PRIMARIES, ...GUARDRAILS].map(([metric, , zone]) => `${metric.role} ${metric.goodIs} ${zone}`);
    const gains = ["worthwhile", "better", "worse", "too-small", "no-worthwhile-gain", "not-settled"];
    const limits = ["within", "beyond", "not-settled"];
    for (const goodIs of ["higher", "lower"]) {
      for (const zone of gains) expect(lines).toContain(`primary ${goodIs} ${zone}`);
      for (const zone of limits) expect(lines).toContain(`guardrail ${goodIs} ${zone}`);
    }
  });
});

describe("the table of conclusions", () => {
  const said = (booked: Ends, contacts: Ends) =>
    conclusion(
      planOf({ metrics: [BOOKED, CONTACTS] }),
      [effectOf(BOOKED, contrastOf(0.12, booked)), effectOf(CONTACTS, contrastOf(0.08, contacts))],
      [],
      reductionOf(planOf({ metrics: [BOOKED, CONTACTS] })),
      [],
    );
  const HELD: Ends = [-0.06, -0.012, 0.038];
  const GAIN: Ends = [0.065, 0.1, 0.137];

  it.each([
    [GAIN, HELD, "adopt", 'Adopt "calendar".'],
    [
      [-0.094, -0.061, -0.027],
      HELD,
      "keep-control",
      'Stay with "list". Booked fell by 6.1% with "calendar" (95% interval: 9.4% to 2.7%), which is the wrong way.',
    ],
    [
      [0.003, 0.011, 0.019],
      HELD,
      "keep-control",
      'Stay with "list". Booked: "calendar" helps, but by less than the 5% asked for (95% interval: 0.30% to 1.90% more).',
    ],
    [
      GAIN,
      [0.08, 0.14, 0.2],
      "keep-control",
      'Stay with "list". Booked was better, but Support contacts rose by 14.0% with "calendar" (95% interval: 8.0% to 20.0%), beyond the limit of 5%.',
    ],
    [
      [-0.026, 0.025, 0.078],
      HELD,
      "not-settled",
      'Not settled: this test can neither recommend "calendar" nor advise against it.',
    ],
    [
      GAIN,
      [-0.01, 0.035, 0.08],
      "not-settled",
      'Not settled: Booked was better with "calendar", but a rise of Support contacts by more than 5% cannot be ruled out (95% interval: 1.0% fewer to 8.0% more).',
    ],
  ] as const)("of %j and %j is %s: %s", (booked, contacts, decision, sentence) => {
    const found = said(booked, contacts);
    expect([found.decision, found.sentence]).toEqual([decision, sentence]);
  });
});

describe("the sentence of what was found", () => {
  it.each([
    [
      BOOKED,
      [0.065, 0.1, 0.137],
      'Booked: 13.2 of 100 visitors with "calendar" and 12.0 with "list", 10.0% more (95% interval: 6.5% to 13.7% more).',
    ],
    [
      BOOKED,
      [-0.094, -0.061, -0.027],
      'Booked: 11.3 of 100 visitors with "calendar" and 12.0 with "list", 6.1% fewer (95% interval: 9.4% to 2.7% fewer).',
    ],
  ] as const)("gives both levels and the interval, line %#", (metric, ends, sentence) => {
    expect(effectSentence(effectOf(metric, contrastOf(0.12, ends)), planOf({ metrics: [metric] }))).toBe(sentence);
  });
});
