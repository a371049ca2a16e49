import { describe, expect, it } from "vitest";
import { enrolled, judged, later, type PlantedRow, planText } from "./log.ts";

const results = (found: Awaited<ReturnType<typeof judged>>, ids: readonly string[]) =>
  ids.map((id) => found.find(id)?.result);

describe("a planted fault of the allocation", () => {
  // R 4.2.2, chisq.test(c(5000, n))$p.value: 5260 0.01026, 5261 0.009978, 5334 0.001018, 5335 0.0009833
  it.each([
    [5260, "pass"],
    [5261, "caution"],
    [5334, "caution"],
    [5335, "fail"],
  ])("of 5,000 against %i enrolled is a %s", async (n, result) => {
    const found = await judged(planText(), { rows: [...enrolled("list", 5000), ...enrolled("calendar", n)] });
    expect(results(found, ["allocation", "allocation-by-day", "exits"])).toEqual([result, "pass", undefined]);
    expect(found.conclusion.decision === "undecidable").toBe(result === "fail");
  });

  /** 500 of each variant on each of 14 days, but for 7 March, which lacks some of the calendar. */
  const oneDay = (missing: number): PlantedRow[] => [
    ...enrolled("list", 7000),
    ...enrolled("calendar", 2500, 0, 5),
    ...enrolled("calendar", 500 - missing, 5, 6),
    ...enrolled("calendar", 4000, 6, 14),
  ];
  // R 4.2.2, chisq.test of the 2 x 14 table: 157 0.01075, 158 0.0095, 174 0.001021, 175 0.0008735; the whole split passes
  it.each([
    [157, "pass"],
    [158, "caution"],
    [174, "caution"],
    [175, "fail"],
  ])("of %i lost on one day is a %s by day, though the split of all is even", async (missing, result) => {
    const found = await judged(planText(), { rows: oneDay(missing) });
    expect(results(found, ["allocation", "allocation-by-day"])).toEqual(["pass", result]);
    if (result === "pass") return;
    expect(found.find("allocation-by-day")?.sentence).toMatch(
      `The split is not the same on every day: on 7 March 2026 enrolled were 500 visitors with "list" and ${500 - missing} with "calendar", on all other days 6,500 visitors with "list" and 6,500 with "calendar".`,
    );
  });

  it("names the day on page one", async () => {
    const { conclusion } = await judged(planText(), { rows: oneDay(175) });
    expect(conclusion.reasons).toHaveLength(2);
    expect(conclusion.reasons[0]).toContain("on 7 March 2026");
  });

  it("that ramps up names the days, and the one to count from", async () => {
    const rows = [
      ...enrolled("list", 7000),
      ...enrolled("calendar", 100, 0, 2),
      ...enrolled("calendar", 200, 2, 3),
      ...enrolled("calendar", 5500, 3, 14),
    ];
    const found = await judged(planText(), { rows });
    expect(results(found, ["allocation", "allocation-by-day"])).toEqual(["fail", "fail"]);
    expect(found.find("allocation-by-day")?.sentence).toContain("on 2 to 4 March 2026 enrolled were");
    expect(found.find("allocation-by-day")?.remedy).toContain(
      "count only the days from 5 March 2026 on (enrolment: from)",
    );
    expect(found.find("allocation")?.sentence).toContain(
      'It lies on 2 to 4 March 2026: 1,500 visitors with "list" and 300 with "calendar"; without them the groups are 5,500 visitors with "list" and 5,500 with "calendar", as planned (p = 1).',
    );
  });

  /** The column fare stands for a country here; 14 of 100 visitors of each variant come from Norway. */
  const oneLevel = (missing: number): PlantedRow[] => {
    const from = (country: string, rows: PlantedRow[]) =>
      rows.map((row) => ({ ...row, visitor: `${country} ${row.visitor}`, fare: country }));
    return [
      ...from("NO", [...enrolled("list", 1000), ...enrolled("calendar", 1000 - missing)]),
      ...from("SE", [...enrolled("list", 3000), ...enrolled("calendar", 3000)]),
      ...from("DK", [...enrolled("list", 3000), ...enrolled("calendar", 3000)]),
    ];
  };
  // scipy 1.17.1, chi2_contingency of 3 x 2 without correction: 140 0.01044, 141 0.009750, 170 0.001057, 171 0.0009707
  it.each([
    [140, "pass"],
    [141, "caution"],
    [170, "caution"],
    [171, "fail"],
  ])("of %i lost in one country is a %s by level", async (missing, result) => {
    const found = await judged(planText({ rest: "subgroups: [fare]" }), { rows: oneLevel(missing) });
    expect(results(found, ["allocation", "allocation-by-level"])).toEqual(["pass", result]);
    if (result === "pass") return;
    expect(found.find("allocation-by-level")?.sentence).toContain(
      `where "fare" is "NO" enrolled were 1,000 visitors with "list" and ${1000 - missing} with "calendar", elsewhere 6,000 visitors with "list" and 6,000 with "calendar"`,
    );
    expect(found.conclusion.reasons.join(" ").includes('where "fare" is "NO"')).toBe(result === "fail");
  });
});

describe("a planted fault after enrolment", () => {
  const [list, calendar] = [enrolled("list", 5000), enrolled("calendar", 5000)];
  const robots = (rows: readonly PlantedRow[], n: number) =>
    rows.map((row, i) => (i % 7 === 0 && i / 7 < n ? { ...row, robot: "yes" } : row));
  const plan = planText({ rest: "filters:\n  - {name: robots, drop: units, where: {robot: yes}}" });

  // R 4.2.2, chisq.test(matrix(c(20, n, 4980, 5000 - n), 2, byrow = TRUE), correct = FALSE)$p.value:
  // 39 0.0131, 40 0.0096, 46 0.00132, 47 0.000934
  it.each([
    [39, "pass"],
    [40, "caution"],
    [46, "caution"],
    [47, "fail"],
  ])("of 20 against %i that a filter took is a %s of exits", async (n, result) => {
    const found = await judged(plan, { rows: [...robots(list, 20), ...robots(calendar, n)] });
    expect(results(found, ["allocation", "allocation-by-day", "exits"])).toEqual(["pass", "pass", result]);
    expect(found.conclusion.decision === "undecidable").toBe(result === "fail");
  });

  // R 4.2.2, fisher.test: 0 against 7 0.01559, 8 0.00779, 9 0.00389; chisq.test without correction would pass 0.00813 for 7
  it.each([
    [7, "pass"],
    [8, "caution"],
    [9, "caution"],
  ])("of 0 against %i is judged by Fisher's exact test, a %s", async (n, result) => {
    const found = await judged(plan, { rows: [...list, ...robots(calendar, n)] });
    expect(found.find("exits")?.result).toBe(result);
  });

  // R 4.2.2: chisq.test(c(25000, 24700)) prints p-value = 0.1784
  it("of 300 of 50,000 lost in one arm is found, though the split looks even", async () => {
    const rows = [...enrolled("list", 25_000), ...robots(enrolled("calendar", 25_000), 300)];
    const found = await judged(plan, { rows });
    expect(results(found, ["allocation", "exits"])).toEqual(["pass", "fail"]);
    expect(found.conclusion.decision).toBe("undecidable");
    expect(found.conclusion.reasons).toEqual([
      'Visitors who left at the filter "robots": 0 with "list" (0%) and 300 with "calendar" (1.2%). Chance alone gives so large a difference in fewer than one test in a million (p < 0.0001). Those left are no longer alike: visitors of one group are missing more often.',
      'What to do: Find out why the filter "robots" removes more visitors of one group than of the other; mend it, and run the report again.',
    ]);
  });

  it("by a filter that looks past enrolment names it as the culprit, once, with what to do", async () => {
    const ever = planText({
      rest: "filters:\n  - {name: staff, drop: units, where: {fare: 1}}\n  - {name: robots, drop: units, where: {robot: yes}, when: ever}",
    });
    const pages = (rows: readonly PlantedRow[], n: number) =>
      later(rows.filter((_, i) => i % 2 === 0).slice(0, n), "page", 100, { robot: "yes" });
    const staff = (rows: readonly PlantedRow[]) => rows.map((row, i) => (i % 500 === 1 ? { ...row, fare: "1" } : row));
    const found = await judged(ever, {
      rows: [...staff(list), ...staff(calendar), ...pages(list, 61), ...pages(calendar, 2312)],
    });
    expect(results(found, ["allocation", "allocation-by-day", "exits"])).toEqual(["fail", "fail", "fail"]);
    expect(found.find("allocation")?.parts[1]?.figures.brokenAt).toBe("filter:robots");
    expect(found.conclusion.reasons).toHaveLength(2);
    expect(found.conclusion.reasons[0]).toContain(
      'Where it broke: before the filter "robots" the groups were 4,990 visitors with "list" and 4,990 with "calendar"; that removed 61 and 2,312. It looks past enrolment, so the variant can change who is removed.',
    );
    expect(found.conclusion.reasons[1]).toBe(
      'What to do: Judge the filter "robots" by what was known at enrolment (when: at-enrolment), and run the report again.',
    );
  });

  it("by a filter of rows that takes the rows that enrol one group names that filter", async () => {
    const rowsFilter = planText({ rest: "filters:\n  - {name: old site, drop: rows, where: {robot: yes}}" });
    const found = await judged(rowsFilter, { rows: [...robots(list, 3), ...robots(calendar, 400)] });
    expect(results(found, ["allocation", "filters"])).toEqual(["fail", "caution"]);
    expect(found.find("allocation")?.parts[0]?.figures.brokenAt).toBe("filter:old site");
    expect(found.conclusion.reasons[0]).toContain(
      'Where it broke: before the filter "old site" the groups were 5,000 visitors with "list" and 5,000 with "calendar", after it 4,997 and 4,600.',
    );
    expect(found.find("filters")?.sentence).toContain(
      'It took rows that enrol visitors: of 3 with "list" (0.060%) and 400 with "calendar" (8.0%).',
    );
  });

  it("by rows that cannot be read, in one group only, is traced to the rows as read", async () => {
    const fare = planText({ metrics: "  - {name: Fare, role: primary, summary: mean, of: {sum: fare}}" });
    const bad = calendar.map((row, i) => (i % 12 === 0 ? { ...row, fare: "free" } : row));
    const found = await judged(fare, { rows: [...list, ...bad] });
    expect(found.find("allocation")?.parts[0]?.figures.brokenAt).toBe("rejected");
    expect(found.find("rejected")?.result).toBe("fail");
  });

  it("by the rule for units in two variants is found, and what to do about it", async () => {
    const exclude = planText({ enrolment: "enrolment: {event: open, in-two-variants: exclude}" });
    const both = later(
      calendar.filter((_, i) => i % 10 === 0),
      "page",
      60,
      { arm: "list" },
    );
    const found = await judged(exclude, { rows: [...list, ...calendar, ...both] });
    expect(results(found, ["allocation", "exits", "switched"])).toEqual(["fail", "fail", "caution"]);
    expect(found.find("allocation")?.parts[1]?.figures.brokenAt).toBe("switched");
    expect(found.conclusion.reasons.join(" ")).toContain("in-two-variants: first");
  });

  it("by a log that ends before one group's follow-up is found at that step", async () => {
    const followed = planText({ rest: "follow-up: {days: 7}" });
    const rows = [
      ...enrolled("list", 3000, 0, 14),
      ...enrolled("calendar", 3000, 0, 7),
      ...enrolled("calendar", 3000, 7, 14),
    ];
    const lateList = rows.filter((row) => !(row.arm === "list" && Date.parse(row.at) > Date.UTC(2026, 2, 9)));
    const found = await judged(followed, { rows: [...lateList, ...enrolled("list", 1500, 6, 7)] });
    expect(found.find("exits")?.parts.find(({ about }) => about === "follow-up")?.result).toBe("fail");
  });
});
