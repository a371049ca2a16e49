import { describe, expect, it } from "vitest";
import { DAY, HOUR, judged, later, type PlantedRow, planText, timeText } from "./log.ts";

/** So many visitors of a variant enrolled in each hour of the 14 days, from 2 March 2026; `at` says otherwise for some hours. */
function hourly(arm: string, n: number, at: Readonly<Record<number, number>> = {}): PlantedRow[] {
  return Array.from({ length: 14 * 24 }, (_, hour) => {
    const own = at[hour] ?? n;
    return Array.from({ length: own }, (_row, i) => ({
      visitor: `${arm} ${hour} ${i}`,
      at: timeText(hour * HOUR + ((i + 0.5) * HOUR) / own),
      event: "open",
      arm,
    }));
  }).flat();
}

describe("planted hours without rows", () => {
  // 6 March, 04:00 is hour 100; a week later is hour 268, the week before lies outside the log; all other hours have 20.
  it.each([
    [19, "pass"],
    [20, "caution"],
  ])("of which the same hour a week later has %i rows are a %s", async (rows, result) => {
    const log = [...hourly("list", 10, { 100: 0, 268: rows - 9 }), ...hourly("calendar", 10, { 100: 0, 268: 9 })];
    const found = (await judged(planText(), { rows: log })).find("gaps");
    expect(found?.parts[0]?.result).toBe(result);
    if (result === "caution") {
      expect(found?.sentence).toBe(
        "In 1 hour the log has no row, though the same hours of other days have: on 6 March 2026 from 4:00 to 5:00.",
      );
      expect(found?.figures).toEqual({ hours: 1 });
    }
  });

  it("of a thin log are found where they are many together, but not where every week is silent", async () => {
    const thin = (silent: readonly number[]) => {
      const at = Object.fromEntries(silent.map((hour) => [hour, 0]));
      return [...hourly("list", 1, at), ...hourly("calendar", 1, at)];
    };
    const run = (from: number) => Array.from({ length: 10 }, (_, i) => from + i);
    const found = (await judged(planText(), { rows: thin(run(114)) })).find("gaps");
    expect(found?.sentence).toContain("from 6 March 2026, 18:00 to 7 March 2026, 4:00");
    expect((await judged(planText(), { rows: thin(run(114).slice(1)) })).find("gaps")?.result).toBe("pass");
    expect((await judged(planText(), { rows: thin([...run(114), ...run(114 + 168)]) })).find("gaps")?.result).toBe(
      "pass",
    );
  });

  it.each([
    ["the day before", 76],
    ["the day after", 124],
  ])("are no gap where the same hour of %s is thin", async (_, hour) => {
    const log = [...hourly("list", 10, { 100: 0, [hour]: 9 }), ...hourly("calendar", 10, { 100: 0 })];
    expect((await judged(planText(), { rows: log })).find("gaps")?.result).toBe("pass");
  });

  it("are found on the first day by the hours next to them, and not where the log only begins", async () => {
    const first = [...hourly("list", 10, { 5: 0 }), ...hourly("calendar", 10, { 5: 0 })];
    expect((await judged(planText(), { rows: first })).find("gaps")?.sentence).toContain(
      "on 2 March 2026 from 5:00 to 6:00",
    );
    const silent = { 0: 1, ...Object.fromEntries(Array.from({ length: 30 }, (_, i) => [i + 1, 0])) };
    const begins = [...hourly("list", 10, silent), ...hourly("calendar", 10, silent)];
    expect((await judged(planText(), { rows: begins })).find("gaps")?.parts[0]?.result).toBe("pass");
  });

  it("of one entry of the log name that entry", async () => {
    const rows = [...hourly("list", 20), ...hourly("calendar", 20)];
    const bookings = later(rows, "booking", 60).filter(({ at }) => !at.startsWith("2026-03-05T07"));
    const found = (await judged(planText({ second: true }), { rows, second: bookings })).find("gaps");
    expect(found?.result).toBe("caution");
    expect(found?.sentence).toContain("In 1 hour entry 2 of the log has no row");
    expect(found?.parts.map(({ about, result }) => [about, result])).toEqual([
      ["entry 1 of the log", "pass"],
      ["entry 2 of the log", "caution"],
      ["by variant", "pass"],
    ]);
  });

  // (1 - s)^n times 336 hours and 2 arms, s = 1675 / (3350 + n), the smallest share: 16 0.0111, 17 0.0056, 19 0.0014, 20 0.00071
  it.each([
    [16, "pass"],
    [17, "caution"],
    [19, "caution"],
    [20, "fail"],
  ])("of one variant, while %i visitors of the other have some, are a %s", async (n, result) => {
    const rows = [...hourly("list", 5, { 100: 0 }), ...hourly("calendar", 5, { 100: n })];
    const { find, conclusion } = await judged(planText(), { rows });
    const found = find("gaps");
    expect(found?.parts.map((part) => part.result)).toEqual(["pass", result]);
    expect(conclusion.decision === "undecidable").toBe(result === "fail");
    if (result !== "pass") {
      expect(found?.sentence).toContain(
        `"list" has no row on 6 March 2026 from 4:00 to 5:00, while ${n} visitors of the other group have.`,
      );
    }
  });

  it("of one variant that was shown a day late fail, and name the day", async () => {
    const rows = [...hourly("list", 5), ...hourly("calendar", 5).filter(({ at }) => at > "2026-03-03")];
    const { find, conclusion } = await judged(planText(), { rows });
    expect(find("gaps")?.sentence).toContain(
      '"calendar" has no row on 2 March 2026 from 0:00 to 24:00, while 120 visitors',
    );
    expect(conclusion.decision).toBe("undecidable");
  });

  it("of one variant count visitors, not rows: a busy one is one", async () => {
    const busy = Array.from({ length: 200 }, (_, i) => ({
      visitor: "calendar 99 0",
      at: timeText(100 * HOUR + i),
      event: "open",
      arm: "calendar",
    }));
    const rows = [...hourly("list", 5, { 100: 0 }), ...hourly("calendar", 5, { 100: 10 }), ...busy];
    expect((await judged(planText(), { rows })).find("gaps")?.result).toBe("pass");
  });

  it("of one variant are not those in which the other has a busier hour for once, or always", async () => {
    const rows = [...hourly("list", 5), ...hourly("calendar", 5)].filter(({ at }) => at < "2026-03-09");
    const booked = (arm: string, days: number, n: number) =>
      Array.from({ length: days * n }, (_, i) => ({
        visitor: `${arm} ${i % 160} ${i % 5}`,
        at: timeText((8 + Math.floor(i / n)) * DAY + 10 * HOUR + i),
        event: "booking",
      }));
    // in the second week nothing is left but bookings at ten, 60 a day of the calendar and none of the list but on the last
    const late = [
      ...booked("calendar", 6, 60),
      ...booked("list", 1, 2).map((row) => ({ ...row, at: timeText(13 * DAY + 10 * HOUR) })),
    ];
    expect((await judged(planText(), { rows: [...rows, ...late] })).find("gaps")?.parts[1]?.result).toBe("pass");
  });

  it("are not looked for by variant where an entry knows one variant only", async () => {
    const rows = [...hourly("list", 5), ...hourly("calendar", 5)];
    const bookings = later(hourly("calendar", 5), "booking", 60);
    const found = (await judged(planText({ second: true }), { rows, second: bookings })).find("gaps");
    expect(found?.result).toBe("pass");
  });
});
