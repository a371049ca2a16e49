import { mkdtemp, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { CAST } from "../../src/cli/demo/cast.ts";
import { FLAWS } from "../../src/cli/demo/log.ts";
import { PLANTED } from "../../src/cli/demo/planted.ts";
import { writeDemo } from "../../src/cli/demo/write.ts";
import { closeout, type ReportJson } from "../../src/index.ts";

/** What the demo's report must say of what was planted; the log itself is counted by hand in demo.test.ts. */
describe("the demo's report", () => {
  let folder: string;
  let report: ReportJson;
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), "closeout-demo-"));
    const written = await writeDemo(folder);
    if ("found" in written) throw new Error(`an empty folder holds ${written.found}`);
    const outcome = await closeout(written.plan, { out: join(folder, "report") });
    if (outcome.status !== 0) throw new Error(outcome.text);
    report = outcome.report;
  });
  afterAll(() => rm(folder, { recursive: true, force: true }));

  const effect = (name: string) => {
    const found = report.effects.find((one) => one.metric === name);
    if (found === undefined) throw new Error(`no effect of ${name}`);
    return found;
  };

  it("adopts the calendar, on a gain above the worthwhile 5% and with both guardrails within their margins", () => {
    expect(report.conclusion).toMatchObject({ decision: "adopt", variant: "calendar" });
    expect(effect("Booked").zone).toBe("worthwhile");
    expect(effect("Booked").difference.z).toBeGreaterThan(4);
    expect(effect("Support contacts").zone).toBe("within");
    expect(effect("Seconds until the search page shows").zone).toBe("within");
  });

  it("holds the planted effects in its intervals", () => {
    const { list, calendar } = PLANTED;
    const fare = (arm: typeof list) => arm.bookedShare * arm.bookingsPerBooker * arm.farePerBooking;
    const perSearch = (arm: typeof list) => (arm.bookedShare * arm.bookingsPerBooker) / arm.searchesPerVisitor;
    const planted = {
      Booked: calendar.bookedShare / list.bookedShare - 1,
      // A cap common to both variants takes a little from the effect: 0.1% of visitors lie above it.
      "Fare per visitor": fare(calendar) / fare(list) - 1,
      "Bookings per search": perSearch(calendar) / perSearch(list) - 1,
      "Days with a visit": 0,
      "Support contacts": calendar.contactsPerVisitor / list.contactsPerVisitor - 1,
    };
    for (const [name, truth] of Object.entries(planted)) expectInside(truth, effect(name).relative);
    // Adjusted for what was paid before, the interval of the fare is narrower and holds the truth as well.
    const { adjusted, difference: plain } = effect("Fare per visitor");
    expectInside(planted["Fare per visitor"], adjusted?.relative ?? null);
    expect(adjusted?.varianceReduction).toBeGreaterThan(0.005);
    expect(adjusted?.difference.standardError).toBeLessThan(plain.standardError ?? 0);
    const seconds = effect("Seconds until the search page shows");
    expectInside(calendar.secondsPerSearch - list.secondsPerSearch, seconds.difference);
  });

  it("accounts for everyone in the cast and for every fault, on the line where they belong", () => {
    const units = Object.fromEntries(report.flow.units.map((line) => [line.id, line.units]));
    const rows = Object.fromEntries(report.flow.rows.map((line) => [line.id, line.rows]));
    expect(units).toMatchObject({
      "not-enrolled": CAST.neverSearched,
      "outside-enrolment": CAST.trialRun + CAST.afterEnrolment,
      "unknown-variant": CAST.previews,
      "filter:staff accounts": CAST.staff,
      "filter:load test": CAST.loadTest,
    });
    expect(Number(units["follow-up"]) + Number(units.analysed)).toBe(CAST.enrolled);
    const { copies, correctedFares, wrongCells, unreadableTimes, fareNoNumber, noVisitor, brokenJson } = FLAWS;
    expect(rows).toMatchObject({
      rejected: wrongCells + unreadableTimes + fareNoNumber + noVisitor + brokenJson,
      duplicate: copies + correctedFares,
      "filter:uptime probe": 28 * 24 * 6,
    });
    const sum = (counts: Record<string, number>) => Object.values(counts).reduce((total, n) => total + n, 0);
    expect(sum(rows)).toBe(report.flow.rowsRead);
    expect(sum(units)).toBe(report.flow.unitsSeen);
  });

  it("lists each rejected row with its file and its reason", async () => {
    const lines = (await readFile(join(folder, "report/rejects.csv"), "utf8")).trimEnd().split("\n").slice(1);
    const of = (reason: RegExp) => lines.filter((line) => reason.test(line)).length;
    expect(of(/not a number: fare/)).toBe(FLAWS.fareNoNumber);
    expect(of(/no unit/)).toBe(FLAWS.noVisitor);
    expect(of(/no readable time/)).toBe(FLAWS.unreadableTimes);
    expect(of(/^data\//)).toBe(lines.length);
  });
});

function expectInside(
  truth: number,
  interval: { readonly low: number | null; readonly high: number | null } | null,
): void {
  expect(interval?.low).toBeLessThan(truth);
  expect(interval?.high).toBeGreaterThan(truth);
}
