import { expect, it } from "vitest";
import { askedOf, ruleSentences } from "../../src/decision/index.ts";
import type { Metric } from "../../src/plan/types.ts";
import { metricOf, planOf, variantsOf } from "../checks/make.ts";

const plan = planOf();
const asked = (changes: Partial<Metric>) => askedOf(metricOf({ name: "Booked", role: "primary", ...changes }), plan);
const relative = { kind: "relative", value: 0.05 } as const;
const guardrail = { role: "guardrail", summary: "mean", goodIs: "lower", margin: relative } as const;

it("says what is asked of a measure as one would count it", () => {
  expect(asked({ worthwhile: relative })).toBe('at least 5% more visitors with at least one "booking" row');
  expect(asked({ worthwhile: { kind: "absolute", value: 0.002 } })).toBe("at least 0.2 percentage points higher");
  expect(asked({ worthwhile: { kind: "absolute", value: 0.01 } })).toBe("at least 1 percentage point higher");
  expect(asked({})).toBe('any proven gain: more visitors with at least one "booking" row');
  expect(asked({ summary: "mean", worthwhile: relative, goodIs: "lower" })).toBe(
    'at least 5% fewer "booking" rows for each visitor',
  );
  expect(asked(guardrail)).toBe('at most 5% more "booking" rows for each visitor');
  expect(asked({ ...guardrail, of: { event: "booking", where: [], aggregate: { kind: "sum", column: "fare" } } })).toBe(
    "at most 5% higher",
  );
  expect(asked({ role: "secondary" })).toBe("nothing: it does not decide");
});

it("says the plan's rule in sentences", () => {
  const primary = metricOf({ name: "Booked", role: "primary", worthwhile: relative });
  const rule = (changes: Parameters<typeof planOf>[0]) => ruleSentences(planOf(changes));
  expect(rule({ metrics: [primary] })).toEqual([
    '"calendar" is adopted when Booked is shown to be better than with "list".',
    "It is turned down when Booked is shown to be worse or to gain less than what is asked for. Otherwise the test has not settled it.",
    "Shown means: by the whole of a 95% interval.",
  ]);
  const limit = metricOf({ name: "Contacts", ...guardrail });
  const second = { ...primary, name: "Fare" };
  expect(rule({ metrics: [primary, second, limit], variants: variantsOf({ list: 1, calendar: 1, map: 1 }) })).toEqual([
    '"calendar" or "map" is adopted when Booked and Fare are each shown to be better than with "list", and Contacts is shown to stay within its limit.',
    "It is turned down when one of them is shown to be worse or to gain less than what is asked for, or when a limit is shown to be passed. Otherwise the test has not settled it.",
    "Shown means: by the whole of a 95% interval, for all 2 variants at once.",
  ]);
  const decision = { ...plan.decision, primaries: "any", adoptWhen: "shown-worthwhile", confidence: 0.9 } as const;
  expect(rule({ metrics: [primary, second], decision })).toEqual([
    '"calendar" is adopted when Booked or Fare is shown to be better than with "list", by at least what is asked for, and none of them is shown to be worse.',
    "It is turned down when one of them is shown to be worse, or when all are shown to gain less than what is asked for. Otherwise the test has not settled it.",
    "Shown means: by the whole of a 90% interval; the error is shared out over the measures of which one is enough.",
  ]);
});
