import { describe, expect, it } from "vitest";
import { filters } from "../../src/checks/filters.ts";
import { nearest } from "../../src/checks/nearest.ts";
import { neverOccurs } from "../../src/checks/never-occurs.ts";
import { planOf, reductionOf, rowFilter, unitFilter } from "./make.ts";

const plan = planOf();

describe("never-occurs", () => {
  it("passes where every name occurs", () => {
    expect(neverOccurs(plan, reductionOf(plan))).toMatchObject({
      result: "pass",
      remedy: "",
      sentence: "Every event and variant that the plan names occurs in the log.",
    });
  });

  it("names the nearest event that does occur, and not one that the plan uses elsewhere", () => {
    const facts = {
      missingEvents: ["booking"],
      events: [
        { value: "search_opened", rows: 9 },
        { value: "page_view", rows: 8 },
        { value: "Bookings", rows: 7 },
      ],
    };
    const found = neverOccurs(plan, reductionOf(plan, { facts }));
    expect(found?.result).toBe("caution");
    expect(found?.figures).toEqual({ events: ["booking"], variants: [] });
    expect(found?.parts[0]?.figures).toEqual({ kind: "event", name: "booking", nearest: "Bookings" });
    expect(found?.sentence).toBe(
      'No row of the log has the event "booking". The nearest that does occur is "Bookings".',
    );
  });

  it("prefers a farther name that the plan does not use to a nearer one that it does", () => {
    const events = [
      { value: "booking", rows: 9 },
      { value: "opening_of_the_search_page", rows: 8 },
    ];
    const found = neverOccurs(plan, reductionOf(plan, { facts: { missingEvents: ["search_opened"], events } }));
    expect(found?.parts[0]?.figures.nearest).toBe("opening_of_the_search_page");
  });

  it("falls back to a name of the plan when the log has no other, and says when it has none", () => {
    const missing = { missingVariants: ["calendar"] };
    const only = neverOccurs(
      plan,
      reductionOf(plan, { facts: { ...missing, variants: [{ value: "list", rows: 5 }] } }),
    );
    expect(only?.parts[0]?.figures.nearest).toBe("list");
    const none = neverOccurs(plan, reductionOf(plan, { facts: { ...missing, variants: [] } }));
    expect(none?.parts[0]?.figures).toEqual({ kind: "variant", name: "calendar" });
    expect(none?.sentence).toContain("No row names any variant.");
  });

  it("has a part for each missing name, events first", () => {
    const facts = { missingEvents: ["booking", "support_contact"], missingVariants: ["calendar"] };
    const found = neverOccurs(plan, reductionOf(plan, { facts }));
    expect(found?.parts.map((part) => part.about)).toEqual([
      "event booking",
      "event support_contact",
      "variant calendar",
    ]);
  });

  it("does not speak of events in a plan that has none", () => {
    const table = planOf({
      enrolment: { ...plan.enrolment, event: null },
      metrics: plan.metrics.map((metric) => ({ ...metric, of: { ...metric.of, event: null } })),
    });
    expect(neverOccurs(table, reductionOf(table))?.sentence).toBe(
      "Every variant that the plan names occurs in the log.",
    );
  });

  it("takes the first of equally near names", () => {
    expect(nearest("abc", ["abd", "abe"])).toBe("abd");
    expect(nearest("b", ["a", "B"])).toBe("B");
    expect(nearest("List", ["Lift", "LISTE", "LIST", "list"])).toBe("list");
    expect(nearest("abc", [])).toBeNull();
  });
});

describe("filters", () => {
  const filtering = planOf({ filters: [rowFilter("old site"), unitFilter("staff"), unitFilter("robots", "ever")] });
  const some = { rows: { "filter:old site": 12 }, ended: { "filter:staff": [3, 4], "filter:robots": [1, 0] } };

  it("passes for filters that removed something and look at enrolment", () => {
    const found = filters(filtering, reductionOf(filtering, some));
    expect(found?.parts.map((part) => [part.about, part.result])).toEqual([
      ["old site", "pass"],
      ["staff", "pass"],
      ["robots", "caution"],
    ]);
    expect(found?.parts[0]).toMatchObject({
      sentence: 'The filter "old site" removed 12 rows.',
      figures: { rows: 12 },
    });
    expect(found?.parts[1]?.sentence).toBe('The filter "staff" removed 3 visitors with "list" and 4 with "calendar".');
  });

  it("cautions for a filter that looks past enrolment", () => {
    const found = filters(filtering, reductionOf(filtering, some));
    expect(found?.result).toBe("caution");
    expect(found?.sentence).toContain("looks past enrolment");
    expect(found?.remedy).toContain("when: at-enrolment");
  });

  it("cautions for a filter of rows or units that removed nothing", () => {
    const found = filters(filtering, reductionOf(filtering, { ended: { "filter:robots": [1, 0] } }));
    expect(found?.parts.map((part) => part.result)).toEqual(["caution", "caution", "caution"]);
    expect(found?.sentence).toBe('The filter "old site" removed nothing.');
    expect(found?.parts[1]?.figures).toMatchObject({ units: 0, byVariant: { list: 0, calendar: 0 } });
  });

  it("is left out of a plan without filters", () => {
    expect(filters(plan, reductionOf(plan))).toBeNull();
  });
});
