import { describe, expect, it } from "vitest";
import { planChanged } from "../../src/checks/index.ts";
import { type PlanChange, sealOf } from "../../src/plan/index.ts";
import { farePlan } from "../report/plans.ts";

const change = (over: Partial<PlanChange>): PlanChange => ({
  place: "filters, staff",
  section: "filters",
  item: "staff",
  kind: "added",
  before: null,
  after: "{drop: units}",
  decides: false,
  counts: true,
  ...over,
});
const rule = change({
  place: "metrics, Booked: worthwhile",
  kind: "changed",
  before: "{relative: 5%}",
  after: "{relative: 3%}",
  decides: true,
});

describe("the check plan-changed", () => {
  it("is not made of a first report without a fingerprint", () => expect(planChanged(farePlan, null)).toBeNull());

  it("passes a rerun of a plan that counts and decides the same, whatever its texts say now", () => {
    expect(planChanged(farePlan, [change({ counts: false })])).toMatchObject({
      result: "pass",
      figures: { changes: 0 },
    });
  });

  it("draws a caution for a filter, and says that the rule is the same", () => {
    const check = planChanged(farePlan, [change({})]);
    expect(check).toMatchObject({ result: "caution", strong: false, figures: { changes: 1, ofTheRule: 0 } });
    expect(check?.sentence).toContain("The rule itself is the one of the first run.");
  });

  it("draws a strong caution for the rule, with both versions, before all else", () => {
    const check = planChanged(farePlan, [change({}), rule]);
    expect(check).toMatchObject({ result: "caution", strong: true, figures: { changes: 2, ofTheRule: 1 } });
    expect(check?.sentence).toBe(
      'The rule was changed after a result had been seen: "metrics, Booked: worthwhile" was {relative: 5%}, is {relative: 3%}.',
    );
  });

  it("passes a rule that is the one kept before the start, and names the part that is another", () => {
    const { fingerprint } = sealOf(farePlan);
    const registered = { on: "2026-02-27", where: "ticket 12", fingerprint };
    expect(planChanged({ ...farePlan, registered }, null)).toMatchObject({
      result: "pass",
      sentence: "The rule is the one kept on 2026-02-27 (ticket 12): unchanged since.",
    });
    const other = { ...farePlan, registered, decision: { ...farePlan.decision, confidence: 0.9 } };
    expect(planChanged(other, null)).toMatchObject({
      result: "caution",
      strong: true,
      sentence: "The rule is not the one kept on 2026-02-27 (ticket 12): it differs in decision.",
    });
  });
});
