import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { checks } from "../../src/checks/index.ts";
import { arbitraryLog } from "./arbitrary.ts";
import { metricOf, planOf, reductionOf, unitFilter } from "./make.ts";

describe("the checks together", () => {
  it("come in the order of METHODS 7, each id once, without those that do not apply", () => {
    const ids = (plan: ReturnType<typeof planOf>) => checks(plan, reductionOf(plan)).map((check) => check.id);
    expect(ids(planOf())).toEqual([
      "allocation",
      "rejected",
      "duplicates",
      "switched",
      "unknown-variants",
      "never-occurs",
    ]);
    const full = planOf({
      followUp: { days: 7, incomplete: "exclude" },
      filters: [unitFilter("robots")],
      metrics: [metricOf({ name: "Booked", role: "primary", withoutRows: "leave-out" })],
    });
    expect(ids(full)).toEqual([
      "allocation",
      "rejected",
      "duplicates",
      "switched",
      "unknown-variants",
      "follow-up",
      "filters",
      "never-occurs",
      "without-rows",
    ]);
  });

  it("give, for any log, an outcome as bad as the worst part, a remedy unless passed, and figures that exist", () => {
    fc.assert(
      fc.property(arbitraryLog, ({ plan, reduction }) => {
        for (const check of checks(plan, reduction)) {
          const outcomes = check.parts.map((part) => part.result);
          const worst = outcomes.includes("fail") ? "fail" : outcomes.includes("caution") ? "caution" : "pass";
          expect(check.result).toBe(worst);
          expect(check.remedy === "").toBe(check.result === "pass");
          expect(check.strong && check.result !== "caution").toBe(false);
          expect(check.sentence.length).toBeGreaterThan(0);
          expectFigures([check.figures, ...check.parts.map((part) => part.figures)]);
        }
      }),
    );
  });

  it("survive a log in which nobody was enrolled and nothing was read", () => {
    const plan = planOf({ followUp: { days: 7, incomplete: "exclude" } });
    const empty = reductionOf(plan, { enrolled: [0, 0], rowsRead: 0 });
    expect(checks(plan, empty).map((check) => check.id)).toEqual(["never-occurs"]);
  });
});

function expectFigures(figure: unknown): void {
  if (typeof figure === "number") expect(Number.isFinite(figure)).toBe(true);
  else if (typeof figure === "object" && figure !== null)
    for (const value of Object.values(figure)) expectFigures(value);
  else expect(["string", "boolean"]).toContain(typeof figure);
}
