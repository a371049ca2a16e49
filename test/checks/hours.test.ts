import { describe, expect, it } from "vitest";
import { gapsOf, hoursLike, runText } from "../../src/checks/hours.ts";
import { clockHours } from "../../src/engine/zone.ts";

/** Hours of the epoch from an instant on, with rows by the day and hour that the clock shows. */
function hoursIn(zone: string, firstMs: number, days: number, rows: (day: number, hour: number) => number) {
  const clock = clockHours(zone);
  const first = firstMs / 3_600_000;
  return Array.from({ length: days * 24 }, (_, i) => {
    const at = clock(first + i);
    const n = rows(at.day, at.hour);
    return { ...at, rows: n, byVariant: [n, n] };
  });
}
const MARCH = Date.UTC(2026, 2, 25, 23); // 26 March, 00:00 in Oslo; clocks go forward on the 29th
const OCTOBER = Date.UTC(2026, 9, 21, 22); // 22 October, 00:00 in Oslo; clocks go back on the 25th
const open = (hour: number) => (hour >= 8 && hour < 18 ? 30 : 0);

describe("hours by the clock", () => {
  it("are no gap where a shop opens at eight, whatever the clocks do", () => {
    expect(gapsOf(hoursIn("Europe/Oslo", MARCH, 9, (_, hour) => open(hour)))).toEqual([]);
    expect(gapsOf(hoursIn("Europe/Oslo", OCTOBER, 9, (_, hour) => open(hour)))).toEqual([]);
    expect(gapsOf(hoursIn("Europe/Oslo", MARCH, 9, () => 30))).toEqual([]);
    expect(gapsOf(hoursIn("Europe/Oslo", OCTOBER, 9, () => 30))).toEqual([]);
  });
  it("are a gap on the day on which the clocks change too", () => {
    const day = 20_541; // 29 March 2026
    const hours = hoursIn("Europe/Oslo", MARCH, 9, (at, hour) => (at === day && hour === 10 ? 0 : open(hour)));
    expect(gapsOf(hours).map((run) => runText(hours, run))).toEqual(["on 29 March 2026 from 10:00 to 11:00"]);
  });
  it("are no gap on Sundays, where every Sunday is silent", () => {
    const isSunday = (day: number) => (day + 4) % 7 === 0; // 1 January 1970 was a Thursday
    expect(gapsOf(hoursIn("UTC", Date.UTC(2026, 2, 2), 14, (day) => (isSunday(day) ? 0 : 30)))).toEqual([]);
  });
  it("of other days stand beside a run; of none, nothing does", () => {
    const hours = hoursIn("UTC", Date.UTC(2026, 2, 2), 3, () => 1);
    expect(hoursLike(hours, { first: 30, last: 31 })).toEqual([
      [2, 2],
      [2, 2],
      [48, 48],
    ]);
    expect(hoursLike(hours.slice(0, 20), { first: 3, last: 4 })).toEqual([[]]);
  });
});
