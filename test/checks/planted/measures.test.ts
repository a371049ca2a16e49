import { describe, expect, it } from "vitest";
import { enrolled, judged, later, type PlantedRow, planText } from "./log.ts";

const some = (rows: readonly PlantedRow[], n: number) => rows.slice(0, n);
const one = (arm: string, n: number) => enrolled(arm, n);

// scipy 1.17.1, z of 1,000 of 2,000 against n, each group's own variance (n - 1): 1081 0.01032, 1082 0.00941,
// 1103 0.001095, 1104 0.0009777
describe("a planted covariate", () => {
  const plan = planText({
    metrics: "  - {name: Booked, role: primary, summary: mean, of: {event: booking}, adjust-for: {column: fare}}",
  });
  const having = (rows: readonly PlantedRow[], n: number) =>
    rows.map((row, i) => ({ ...row, fare: (i * 7919) % rows.length < n ? "1" : "0" }));
  it.each([
    [1081, "pass"],
    [1082, "caution"],
    [1103, "caution"],
    [1104, "fail"],
  ])("that 1,000 of 2,000 have and %i of 2,000 is a %s of balance", async (n, result) => {
    const rows = [...having(one("list", 2000), 1000), ...having(one("calendar", 2000), n)];
    const found = await judged(plan, { rows });
    expect(found.find("balance")?.result).toBe(result);
    expect(found.conclusion.decision === "undecidable").toBe(result === "fail");
  });
});

describe("a planted denominator", () => {
  const plan = planText({
    metrics:
      "  - {name: Bookings per page, role: primary, summary: ratio-of-totals, of: {event: booking}, per: {event: page}}",
  });
  /** Everyone opens a page, some a second one; every tenth books, whatever the variant. */
  const log = (rows: readonly PlantedRow[], n: number) => [
    ...rows,
    ...later(rows, "page", 60),
    ...later(some(rows, n), "page", 90),
    ...later(
      rows.filter((_, i) => i % 10 === 0),
      "booking",
      120,
    ),
  ];
  it.each([
    [1081, "pass"],
    [1082, "caution"],
    [1300, "caution"],
  ])("that is 1.5 against %i / 2,000 more than 1 is a %s, with both parts' contrasts", async (n, result) => {
    const { find, conclusion } = await judged(plan, {
      rows: [...log(one("list", 2000), 1000), ...log(one("calendar", 2000), n)],
    });
    const found = find("denominator");
    expect(found?.result).toBe(result);
    expect(conclusion.decision).not.toBe("undecidable");
    expect(found?.parts[0]?.figures).toMatchObject({
      variant: "calendar",
      denominator: { meanOfControl: 1.5, meanOfVariant: 1 + n / 2000, difference: expect.closeTo(n / 2000 - 0.5, 12) },
      numerator: { meanOfControl: 0.1, meanOfVariant: 0.1, difference: 0, p: 1 },
    });
    // its sentence may stand on any page, so it tells no estimate
    expect(found?.sentence).toMatch(
      /^Bookings per page: what it is divided by \(rows of "page" per visitor\) was compared/,
    );
  });
});

describe("planted visitors without a value", () => {
  const plan = (role: string) =>
    planText({
      metrics: `  - {name: Booked, role: primary, summary: proportion, of: {event: booking}}
  - {name: Fare, role: ${role}, ${role === "guardrail" ? "margin: {relative: 50%}, " : ""}summary: mean, of: {event: booking, sum: fare}, without-rows: leave-out}`,
    });
  const booked = (rows: readonly PlantedRow[], without: number) =>
    rows.flatMap((row, i) =>
      i < without ? [row] : [row, ...later([row], "booking", 60, { fare: String(10 + (i % 7)) })],
    );
  // R 4.2.2, chisq.test of 20 and n of 5,000 each without correction: 46 0.00132, 47 0.000934
  it.each([
    [20, "caution", "guardrail"],
    [46, "caution", "guardrail"],
    [47, "fail", "guardrail"],
    [47, "fail", "primary"],
    [47, "fail", "secondary"],
  ])("20 against %i of 5,000 are a %s of a %s measure", async (n, result, role) => {
    const found = await judged(plan(role), {
      rows: [...booked(one("list", 5000), 20), ...booked(one("calendar", 5000), n)],
    });
    expect(found.find("without-rows")?.result).toBe(result);
    expect(found.conclusion.decision === "undecidable").toBe(result === "fail" && role !== "secondary");
  });
});

describe("a planted value that rules the result", () => {
  const plan = planText({ metrics: "  - {name: Fare, role: primary, summary: mean, of: {event: booking, sum: fare}}" });
  const half = (rows: readonly PlantedRow[], last: number) => [
    ...rows,
    ...later(some(rows, 499), "booking", 60, { fare: "1" }),
    ...later(rows.slice(-1), "booking", 60, { fare: String(last) }),
  ];
  // Of 1,000 values, 500 of 0, 499 of 1 and one of x, the last one's share of the squares about the mean, by hand in Python:
  // 4 0.0470, 5 0.0749, 8 0.1835, 9 0.2240; the limits are 0.05 and 0.20 + 2 log(1000) / 1000 = 0.0638 and 0.2138
  it.each([
    [4, "pass", false],
    [5, "caution", false],
    [8, "caution", false],
    [9, "caution", true],
  ])("of %i among 0 and 1 is a %s of one-unit, strong: %s", async (x, result, strong) => {
    const rows = [...half(one("list", 1000), 1), ...half(one("calendar", 1000), x)];
    const found = (await judged(plan, { rows })).find("one-unit");
    expect([found?.result, found?.strong]).toEqual([result, strong]);
  });
});

describe("planted few bookings in arms of unlike size", () => {
  const plan = planText({
    variants: "[{name: list, control: true, allocation: 4}, {name: calendar, allocation: 1}]",
    metrics: "  - {name: Bookings, role: primary, summary: mean, of: {event: booking}}",
  });
  // METHODS 3 in Python, scipy's normal: how far the worse tail is off, of n in 1,000 against 4 n in 4,000:
  // 107 0.1996, 106 0.2010, 27 0.4918, 26 0.5033
  it.each([
    [107, "pass", false],
    [106, "caution", false],
    [27, "caution", false],
    [26, "caution", true],
  ])("%i of 1,000 are a %s of normality, strong: %s", async (n, result, strong) => {
    const [list, calendar] = [one("list", 4000), one("calendar", 1000)];
    const rows = [
      ...list,
      ...calendar,
      ...later(some(list, 4 * n), "booking", 60),
      ...later(some(calendar, n), "booking", 60),
    ];
    const found = (await judged(plan, { rows })).find("normality");
    expect([found?.result, found?.strong]).toEqual([result, strong]);
  });
});
