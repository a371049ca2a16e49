import { describe, expect, it } from "vitest";
import { reduced } from "./small.ts";

const PLAN = `experiment: Since
question: What did each day bring?
log: [{files: log.csv, columns: {unit: visitor, time: at, event: event, variant: arm}}]
enrolment: {event: search}
variants: [{name: list, control: true}, {name: calendar}]
follow-up: {days: 2, incomplete: keep}
metrics:
  - {name: Bookings, role: primary, summary: mean, of: {event: booking}, without-rows: leave-out}
  - {name: Pages, role: guardrail, margin: {relative: 10%}, summary: mean, of: {event: page}}
`;

describe("a metric by day since enrolment", () => {
  // The cells' smallest value was 0, of a unit that is not among them.
  it("takes no zero of a unit that is left out, though the unit has rows of another metric", async () => {
    const of = (unit: string, arm: string, event: string) => [
      `${unit},2026-03-02,search,${arm}`,
      `${unit},2026-03-02T01:00,${event},`,
      `${unit},2026-03-03T01:00,${event},`,
    ];
    const rows = [
      ...of("a", "list", "booking"),
      ...of("b", "list", "page"),
      ...of("c", "calendar", "booking"),
      "d,2026-03-04T00:00,search,list",
    ];
    const { reduction } = await reduced(PLAN, { "log.csv": ["visitor,at,event,arm", ...rows, ""].join("\n") });
    const cells = reduction.groups[0]?.sinceEnrolment?.groups.of;
    expect(cells?.n).toEqual([1, 1, 1, 1]);
    expect(cells?.smallest).toEqual([1, 1, 1, 1].map((x) => BigInt(x) * 1_000_000_000n));
  });
});
