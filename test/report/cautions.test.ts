import { expect, it } from "vitest";
import type { AskedAfterwards, Metric, Plan } from "../../src/plan/types.ts";
import { cautions } from "../../src/report/sections/cautions.ts";
import { adopt } from "./cases.ts";
import { perSearch } from "./plans.ts";

const nothing: AskedAfterwards = { metrics: [], subgroups: [], columns: [], numericColumns: [] };
const plan: Plan = { ...adopt.plan, askedAfterwards: nothing };
const secondary = plan.metrics.filter(({ role }) => role === "secondary");
const without = plan.metrics.filter(({ role }) => role !== "secondary");
const last = (more: Partial<Plan>) => cautions({ ...plan, ...more }).at(-1);

// METHODS 9: a reader of a plan with subgroups was told of the measures alone that they do not decide
it("says of subgroups and of measures for information that they suggest, each by its name", () => {
  expect(secondary.map(({ name }) => name)).toEqual(["Fare per visitor"]);
  expect(last({ subgroups: ["country", "platform"] })).toBe(
    'Subgroups (by "country" and "platform") and measures for information (Fare per visitor) suggest; they do not decide.',
  );
  expect(last({ metrics: without, subgroups: ["country"] })).toBe(
    'Subgroups (by "country") suggest; they do not decide.',
  );
  const two: readonly Metric[] = [...plan.metrics, perSearch];
  expect(last({ metrics: two, subgroups: [] })).toBe(
    "Measures for information (Fare per visitor and Bookings per search) suggest; they do not decide.",
  );
});

it("says it of what was asked after the test began too, and of what a plan has none of in general", () => {
  const askedAfterwards = { ...nothing, metrics: [perSearch] };
  expect(last({ subgroups: ["country"], askedAfterwards })).toBe(
    'Subgroups (by "country"), measures for information (Fare per visitor) and what was asked after the test began suggest; they do not decide.',
  );
  expect(last({ metrics: without, subgroups: [], askedAfterwards: { ...nothing, subgroups: ["country"] } })).toBe(
    "What was asked after the test began suggests; it does not decide.",
  );
  expect(last({ metrics: without, subgroups: [] })).toBe(
    "What was not named beforehand as deciding can suggest; it does not decide.",
  );
});
