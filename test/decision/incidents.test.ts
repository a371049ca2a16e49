import { describe, expect, it } from "vitest";
import type { ChoiceRow } from "../../src/decision/choice-rows.ts";
import {
  type Choices,
  conclusion,
  incidentOutcomes,
  incidentSentences,
  incidentsInShort,
} from "../../src/decision/index.ts";
import type { Effect, Zone } from "../../src/decision/types.ts";
import type { Incident, Plan } from "../../src/plan/types.ts";
import { metricOf, planOf, reductionOf } from "../checks/make.ts";
import { BOOKED, CONTACTS, contrastOf, effectOf } from "./make.ts";

const incident = (name: string): Incident => ({
  name,
  what: "cards were refused",
  fromUs: 0n,
  beforeUs: 1n,
  fromText: "2026-03-04T08:00",
  beforeText: "2026-03-04T14:00",
  where: [],
});
const OUTAGE = incident("payment outage");
const PLAN: Plan = planOf({ metrics: [BOOKED, CONTACTS], incidents: [OUTAGE] });
const GAIN = effectOf(BOOKED, contrastOf(0.12, [0.065, 0.1, 0.137]));
const HELD = effectOf(CONTACTS, contrastOf(0.08, [-0.06, -0.01, 0.038]));

/** The rows of an effect: its own, and one without the incident, in some zone. */
function choicesOf({ metric, variant, zone }: Effect, without: Zone | null, name = OUTAGE.name): Choices {
  const row = (choice: ChoiceRow["choice"], at: Zone): ChoiceRow => ({
    choice,
    difference: { estimate: 0.001, low: null, high: null, p: null },
    relative: null,
    zone: at,
    sign: 1,
    side: 0,
    agrees: at === zone,
  });
  const others = without === null ? [] : [row(`without-incident:${name}`, without)];
  return { metric, variant, rows: [row("as-planned", zone), ...others] };
}

const reductionWith = (plan: Plan, ...units: readonly (readonly number[])[]) =>
  reductionOf(plan, { facts: { inIncidents: units } });

function told(choices: readonly Choices[], units: readonly number[] = [412, 405], plan = PLAN) {
  const effects = [GAIN, HELD];
  const reduction = reductionWith(plan, units);
  const found = conclusion(plan, effects, [], reduction, []);
  const outcomes = incidentOutcomes(plan, effects, choices, found, reduction);
  const isDecided = found.decision !== "undecidable";
  return {
    outcomes,
    sentences: outcomes.flatMap((outcome) => incidentSentences(plan, outcome, isDecided)),
    short: incidentsInShort(outcomes, isDecided),
  };
}

describe("without the units of an incident", () => {
  it("the decision that stays is said not to depend on it", () => {
    const { outcomes, sentences, short } = told([choicesOf(GAIN, "worthwhile"), choicesOf(HELD, "within")]);
    expect(outcomes[0]).toMatchObject({
      isOther: false,
      elsewhere: [],
      without: { decision: "adopt", variant: "calendar" },
    });
    expect(sentences).toEqual([
      '412 visitors with "list" and 405 with "calendar" enrolled during it.',
      "The decision does not depend on it: without them it would be the same.",
    ]);
    expect(short).toBe('"payment outage". The decision does not depend on it. More in section 3.');
  });

  it("the decision that falls is said to depend on it, and what it would be", () => {
    const open = told([choicesOf(GAIN, "not-settled"), choicesOf(HELD, "within")]);
    expect(open.sentences[1]).toBe("The decision depends on it: without them it would be not settled.");
    expect(open.short).toBe('"payment outage". The decision depends on it. More in section 3.');
    const worse = told([choicesOf(GAIN, "worse"), choicesOf(HELD, "within")]);
    expect(worse.sentences[1]).toBe('The decision depends on it: without them it would be to stay with "list".');
    const limit = told([choicesOf(GAIN, "worthwhile"), choicesOf(HELD, "beyond")]);
    expect(limit.sentences[1]).toBe('The decision depends on it: without them it would be to stay with "list".');
  });

  it("a measure that moves and leaves the decision is named", () => {
    const { sentences } = told([choicesOf(GAIN, "better"), choicesOf(HELD, null)]);
    expect(sentences[1]).toBe(
      "The decision does not depend on it: without them it would be the same, though Booked would stand elsewhere (section 5).",
    );
  });

  it("nothing depends on one that touched nobody, and of one that touched a whole group nothing is told", () => {
    const none = [choicesOf(GAIN, null), choicesOf(HELD, null)];
    expect(told(none, [0, 0]).sentences).toEqual([
      "None of the visitors counted enrolled during it, so nothing depends on it.",
    ]);
    expect(told(none, [0, 0]).short).toContain("The decision does not depend on it.");
    expect(told(none, [1000, 3]).sentences[1]).toBe(
      "Without them a group would be left with nobody, so what depends on it cannot be told.",
    );
    expect(told(none, [1000, 3]).short).toBe('"payment outage". More in section 3.');
  });

  it("nothing is said of a decision where there is none", () => {
    const reduction = reductionWith(PLAN, [412, 405]);
    const undecidable = { decision: "undecidable", variant: null, sentence: "", reasons: [] } as const;
    const choices = [choicesOf(GAIN, "worse"), choicesOf(HELD, "within")];
    const outcomes = incidentOutcomes(PLAN, [GAIN, HELD], choices, undecidable, reduction);
    expect(outcomes[0]).toMatchObject({ without: null, isOther: false, elsewhere: [] });
    expect(outcomes.flatMap((one) => incidentSentences(PLAN, one, false))).toEqual([
      '412 visitors with "list" and 405 with "calendar" enrolled during it.',
    ]);
    expect(incidentsInShort(outcomes, false)).toBe('"payment outage". More in section 3.');
  });

  it("each of several is judged by itself, and those on which the decision depends are named", () => {
    const plan = { ...PLAN, incidents: [OUTAGE, incident("strike")] };
    const rows = (effect: Effect, outage: Zone, strike: Zone): Choices => {
      const [first, second] = [choicesOf(effect, outage), choicesOf(effect, strike, "strike")];
      return { ...first, rows: [...first.rows, ...second.rows.slice(1)] };
    };
    const effects = [GAIN, HELD];
    const reduction = reductionWith(plan, [412, 405], [9, 8]);
    const found = conclusion(plan, effects, [], reduction, []);
    const choices = [rows(GAIN, "worthwhile", "not-settled"), rows(HELD, "within", "within")];
    const outcomes = incidentOutcomes(plan, effects, choices, found, reduction);
    expect(outcomes.map(({ isOther }) => isOther)).toEqual([false, true]);
    expect(incidentsInShort(outcomes, true)).toBe(
      '"payment outage" and "strike". The decision depends on "strike". More in section 3.',
    );
  });

  it("a quantile that decides is said to stand as it was", () => {
    const page = metricOf({
      name: "Page time",
      role: "guardrail",
      summary: "quantile",
      quantile: "0.95",
      margin: { kind: "relative", value: 0.05 },
    });
    const plan = planOf({ metrics: [BOOKED, CONTACTS, page], incidents: [OUTAGE] });
    const [outcome] = incidentOutcomes(
      plan,
      [GAIN, HELD],
      [choicesOf(GAIN, "worthwhile"), choicesOf(HELD, "within")],
      { decision: "adopt", variant: "calendar", sentence: "", reasons: [] },
      reductionWith(plan, [412, 405]),
    );
    expect(outcome === undefined ? [] : incidentSentences(plan, outcome, true)[2]).toBe(
      "Page time stands in that as with them, since quantiles are not worked out anew.",
    );
  });
});
