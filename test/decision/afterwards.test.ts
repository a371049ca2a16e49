import { writeFile } from "node:fs/promises";
import path from "node:path";
import { describe, expect, it } from "vitest";
import { closeout, type ReportJson } from "../../src/index.ts";
import { inFolder } from "../property/temporary.ts";

/** Forty units an arm; "seats" holds what is no number, which rejects the row only where a metric sums it. */
function logOf(): string {
  const rows = Array.from({ length: 80 }, (_, i) => {
    const [arm, day] = [i % 2 === 0 ? "list" : "calendar", 1 + (i % 5)];
    const seats = i % 10 === 3 ? "two" : String(i % 4);
    return [
      `u${i},2026-03-0${day}T10:00Z,search,${arm},${["A", "B", "C"][i % 3]},${seats},`,
      ...(i % 3 === 0 ? [`u${i},2026-03-0${day}T11:00Z,booking,,,,${10 + (i % 7)}`] : []),
    ];
  });
  return ["visitor,at,event,arm,country,seats,fare", ...rows.flat()].join("\n");
}

const PLAN = `experiment: Afterwards
question: Does what is asked afterwards change anything?
log: [{files: log.csv, columns: {unit: visitor, time: at, event: event, variant: arm}}]
enrolment: {event: search}
variants: [{name: list, control: true}, {name: calendar}]
metrics: [{name: Booked, role: primary, summary: proportion, of: {event: booking}}]
`;
const ASKED = `asked-afterwards:
  subgroups: [country]
  metrics: [{name: Seats, summary: mean, of: {event: search, sum: seats}}, {name: Fare, summary: mean, of: {event: booking, sum: fare}}]
`;

function reportOf(plan: string): Promise<ReportJson> {
  return inFolder(async (folder) => {
    await writeFile(path.join(folder, "log.csv"), logOf());
    await writeFile(path.join(folder, "plan.yaml"), plan);
    const outcome = await closeout(path.join(folder, "plan.yaml"), { out: path.join(folder, "report") });
    if (outcome.status !== 0) throw new Error(outcome.text);
    return outcome.report;
  });
}

describe("what is asked afterwards", () => {
  // At the head of the plan its columns would come first in the order of rows; summing seats rejects eight rows that enrol.
  it("changes nothing of what was planned, wherever it stands and whatever it reads", async () => {
    const { askedAfterwards: none, provenance: __, ...plain } = await reportOf(PLAN);
    const { askedAfterwards, provenance: _, ...asked } = await reportOf(ASKED + PLAN);
    expect(none).toBeNull();
    expect(asked).toEqual(plain);
    expect(askedAfterwards).not.toBeNull();
  });

  it("is told in a list of its own, each with p adjusted among what was asked", async () => {
    const { askedAfterwards } = await reportOf(PLAN + ASKED);
    expect(askedAfterwards?.effects.map(({ metric, role }) => [metric, role])).toEqual([
      ["Seats", "secondary"],
      ["Fare", "secondary"],
    ]);
    // Seats are counted without the eight units whose enrolling row is no number: all of them in one arm, i odd.
    expect(askedAfterwards?.effects[0]?.arms.control.units).toBe(40);
    expect(askedAfterwards?.effects[0]?.arms.variant.units).toBe(32);
    const ps = (askedAfterwards?.effects ?? []).map(
      ({ difference: { p, pAdjusted } }) => [p ?? 1, pAdjusted ?? 0] as const,
    );
    const [lower = [1, 0], upper = [1, 0]] = [...ps].sort(([a], [b]) => a - b);
    expect(upper[1]).toBeCloseTo(upper[0], 12);
    expect(lower[1]).toBeCloseTo(Math.min(2 * lower[0], upper[0]), 12);
    expect(askedAfterwards?.subgroups.map(({ column, metric }) => [column, metric])).toEqual([["country", "Booked"]]);
    expect(askedAfterwards?.subgroups[0]?.levels.map(({ level, units }) => [level, units])).toEqual([
      ["A", 27],
      ["B", 27],
      ["C", 26],
    ]);
  });
});
