import { describe, expect, it } from "vitest";
import { enrolled, judged, later, type PlantedRow, planText } from "./log.ts";

// R 4.2.2, chisq.test(matrix(c(20, n, 4980, 5000 - n), 2, byrow = TRUE), correct = FALSE)$p.value:
// 39 0.0131, 40 0.0096, 46 0.00132, 47 0.000934
const ARMS = { list: enrolled("list", 5000), calendar: enrolled("calendar", 5000) };
const both = [...ARMS.list, ...ARMS.calendar];
const some = (rows: readonly PlantedRow[], n: number) => rows.filter((_, i) => i % 7 === 0).slice(0, n);
const sums = planText({ metrics: "  - {name: Fare, role: primary, summary: mean, of: {event: booking, sum: fare}}" });
const ids = planText({ columns: "unit: visitor, time: at, event: event, variant: arm, event-id: id" });

describe("planted rows that cannot be read", () => {
  /** A page view with a fare that is no number; among other page views that are as they should be. */
  const log = (bad: number, all: number) => [
    ...both,
    ...later(both, "page", 60).slice(0, all - both.length - bad),
    ...later([...some(ARMS.list, bad / 2), ...some(ARMS.calendar, bad / 2)], "page", 90, { fare: "free" }),
  ];
  it.each([
    [12, "pass"],
    [14, "caution"],
    [120, "caution"],
    [122, "fail"],
  ])("%i of 12,000 are a %s", async (bad, result) => {
    const found = await judged(sums, { rows: log(bad, 12_000) });
    expect(found.find("rejected")?.figures).toEqual({ rows: bad, share: bad / 12_000 });
    expect(found.find("rejected")?.result).toBe(result);
    expect(found.conclusion.decision === "undecidable").toBe(result === "fail");
  });

  // So that the share of rows does not fail first, 50,000 page views stand beside them.
  it.each([
    [39, "pass"],
    [40, "caution"],
    [46, "caution"],
    [47, "fail"],
  ])("of 20 against %i visitors are a %s by arm", async (n, result) => {
    const bad = later([...some(ARMS.list, 20), ...some(ARMS.calendar, n)], "page", 90, { fare: "free" });
    // twice of one visitor is one visitor
    const twice = later(some(ARMS.list, 5), "page", 95, { fare: "free" });
    const views = [60, 61, 62, 63, 64].flatMap((seconds) => later(both, "page", seconds));
    const found = await judged(sums, { rows: [...both, ...views, ...bad, ...twice] });
    const check = found.find("rejected");
    expect(check?.parts[1]?.result).toBe(result);
    expect(check?.parts[1]?.figures.units).toEqual({ list: 20, calendar: n });
    expect(found.conclusion.decision === "undecidable").toBe(result === "fail");
  });
});

describe("planted rows that come twice", () => {
  const withIds = (rows: readonly PlantedRow[], start: string) =>
    rows.map((row, i) => ({ ...row, id: `${start} ${i}` }));
  const [list, calendar] = [withIds(ARMS.list, "l"), withIds(ARMS.calendar, "c")];
  const again = (n: number, m: number) => [...list, ...calendar, ...some(list, n), ...some(calendar, m)];

  it.each([
    [5, 5, "pass", false],
    [6, 6, "caution", false],
    [50, 50, "caution", false],
    [51, 51, "caution", true],
  ])("%i and %i of about 10,000 are a %s, strong: %s", async (n, m, result, strong) => {
    const found = (await judged(ids, { rows: again(n, m) })).find("duplicates");
    expect([found?.result, found?.strong]).toEqual([result, strong]);
    expect(found?.figures).toMatchObject({ rows: n + m, copiesThatDiffer: 0 });
  });

  it.each([
    [39, "pass"],
    [40, "caution"],
    [47, "caution"],
  ])("of 20 against %i visitors are a %s by arm, and never fail", async (m, result) => {
    const found = (await judged(ids, { rows: again(20, m) })).find("duplicates");
    expect(found?.parts.find(({ about }) => about === "by variant")).toMatchObject({
      result,
      figures: { units: { list: 20, calendar: m } },
    });
  });

  it("that differ draw a caution, be it one", async () => {
    const other = some(list, 1).map((row) => ({ ...row, fare: "7" }));
    const plan = planText({
      columns: "unit: visitor, time: at, event: event, variant: arm, event-id: id",
      metrics: "  - {name: Fare, role: primary, summary: mean, of: {sum: fare}}",
    });
    const found = (await judged(plan, { rows: [...list, ...calendar, ...other] })).find("duplicates");
    expect(found?.result).toBe("caution");
    expect(found?.sentence).toContain("1 event-id came more than once with different content");
  });
});

describe("planted visitors of two variants", () => {
  const seenIn = (rows: readonly PlantedRow[], arm: string) => later(rows, "page", 60, { arm });
  it.each([
    [5, 5, "pass", false],
    [6, 5, "caution", false],
    [50, 50, "caution", false],
    [51, 50, "caution", true],
  ])("%i and %i of 10,000 are a %s, strong: %s", async (n, m, result, strong) => {
    const rows = [...both, ...seenIn(some(ARMS.list, n), "calendar"), ...seenIn(some(ARMS.calendar, m), "list")];
    const found = (await judged(planText(), { rows })).find("switched");
    expect([found?.result, found?.strong]).toEqual([result, strong]);
  });

  it.each([
    [39, "pass"],
    [40, "caution"],
    [47, "caution"],
  ])("of 20 against %i are a %s by arm, and never fail", async (m, result) => {
    const rows = [...both, ...seenIn(some(ARMS.list, 20), "calendar"), ...seenIn(some(ARMS.calendar, m), "list")];
    const found = (await judged(planText(), { rows })).find("switched");
    expect(found?.parts.find(({ about }) => about === "by variant")?.result).toBe(result);
  });
});

describe("a planted variant that the plan lacks", () => {
  it.each([
    [10, "pass", false],
    [11, "caution", false],
    [101, "caution", false],
    [102, "caution", true],
  ])("of %i beside 10,000 enrolled is a %s, strong: %s", async (n, result, strong) => {
    const found = (await judged(planText(), { rows: [...both, ...enrolled("calender", n)] })).find("unknown-variants");
    expect([found?.result, found?.strong]).toEqual([result, strong]);
    if (result === "caution") expect(found?.sentence).toContain('nearest in the plan: "calendar"');
  });
});

describe("planted names that no row has", () => {
  it("draw a caution that names the nearest", async () => {
    const rows = [...both, ...later(some(ARMS.list, 50), "bookings", 60)];
    const found = (await judged(planText(), { rows })).find("never-occurs");
    expect(found?.result).toBe("caution");
    expect(found?.sentence).toContain('The nearest that does occur is "bookings".');
  });
  it("pass where every one occurs", async () => {
    const rows = [...both, ...later(some(ARMS.list, 50), "booking", 60)];
    expect((await judged(planText(), { rows })).find("never-occurs")?.result).toBe("pass");
  });
});

describe("planted filters", () => {
  const booked = later(some(ARMS.list, 50), "booking", 60);
  const filters = async (rest: string, rows: readonly PlantedRow[], files = {}) =>
    (await judged(planText({ rest: `filters:\n  - ${rest}` }), { rows: [...rows, ...booked], files })).find("filters");

  it("that remove nothing list the commonest values of their column", async () => {
    const rows = both.map((row, i) => ({ ...row, robot: i % 50 === 0 ? "YES" : "no" }));
    const found = await filters("{name: robots, drop: units, where: {robot: ja}}", rows);
    expect(found?.result).toBe("caution");
    expect(found?.sentence).toBe(
      'The filter "robots" removed nothing. In "robot" the commonest values are "no" (9,800 rows) and "YES" (200 rows).',
    );
    expect(found?.parts[0]?.figures).toMatchObject({ values: { robot: { no: 9800, YES: 200 } } });
  });

  it("that remove nothing show no id of a visitor", async () => {
    const found = await filters("{name: testers, drop: units, where: {visitor: test-1}}", both);
    expect(found?.sentence).toBe('The filter "testers" removed nothing.');
    expect(JSON.stringify(found)).not.toContain("list 0 ");
  });

  it("that remove nothing by a list of ids say where to look", async () => {
    const found = await filters("{name: load test, drop: units, listed-in: ids.txt}", both, { "ids.txt": "nobody\n" });
    expect(found).toMatchObject({
      result: "caution",
      remedy: 'Check the filter "load test": its ids may be written otherwise in the log.',
    });
  });

  it("of rows that take rows which enrol draw a caution, others pass", async () => {
    const takes = both.map((row, i) => (i === 3 ? { ...row, robot: "yes" } : row));
    const found = await filters("{name: robots, drop: rows, where: {robot: yes}}", takes);
    expect(found?.result).toBe("caution");
    expect(found?.parts[0]?.figures).toMatchObject({ rows: 1, enrolling: { list: 1, calendar: 0 } });
    const views = [...both, ...later(some(ARMS.list, 9), "page", 60, { robot: "yes" })];
    expect((await filters("{name: robots, drop: rows, where: {robot: yes}}", views))?.result).toBe("pass");
  });
});

describe("a plan without an enrolment event", () => {
  // METHODS 7: over 1% of the enrolled; 100 of 10,000 is not over
  it.each([
    [100, "pass"],
    [101, "caution"],
  ])("with %i of 10,000 enrolled by a row that a measure counts is a %s", async (n, result) => {
    const rows = both.map((row, i) => (i % 60 === 0 && i / 60 < n ? { ...row, event: "booking" } : row));
    const found = (await judged(planText({ enrolment: "" }), { rows })).find("filters");
    expect(found?.result).toBe(result);
    expect(found?.parts[0]).toMatchObject({ about: "enrolment event", figures: { units: n, share: n / 10_000 } });
    if (result === "caution") expect(found?.sentence).toContain('("booking")');
  });

  it("has no such part in a log without events", async () => {
    const plan = planText({
      columns: "unit: visitor, time: at, variant: arm",
      enrolment: "",
      metrics: "  - {name: Robots, role: primary, summary: proportion, of: {where: {robot: yes}}}",
    });
    const found = await judged(plan, { rows: both.map((row, i) => (i % 9 === 0 ? { ...row, robot: "yes" } : row)) });
    expect(found.find("filters")).toBeUndefined();
  });
});
