import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { isWholeMicroseconds, parseTime, timeZoneNamed } from "../../src/plan/time.ts";

// Expected microseconds: Python 3, datetime with zoneinfo (fold 0 is the first of a double hour, and in a gap the offset
// before it, which moves the time forward by the gap).
describe("a time", () => {
  it.each([
    ["2026-03-02", "Europe/Oslo", 1772406000000000n],
    ["2026-03-16", "Europe/Oslo", 1773615600000000n],
    ["2026-03-29T01:30", "Europe/Oslo", 1774744200000000n],
    ["2026-03-02T08:05:09.123456", "UTC", 1772438709123456n],
    ["9999-12-31T23:59:59", "UTC", 253402300799000000n],
    ["0001-01-01", "UTC", -62135596800000000n],
  ])("without an offset is the zone's: %s in %s", (text, zone, us) => expect(parseTime(text, zone)).toBe(us));

  it.each([
    ["2026-03-29 02:30", "Europe/Oslo", 1774747800000000n],
    ["2026-03-08T02:30:00", "America/New_York", 1772955000000000n],
    ["2026-10-04T02:15", "Australia/Lord_Howe", 1791042300000000n], // a gap of half an hour
    ["2022-03-27", "Asia/Beirut", 1648332000000000n], // midnight itself is missing
    ["2022-09-11", "America/Santiago", 1662868800000000n],
    ["2011-12-30T12:00", "Pacific/Apia", 1325282400000000n], // a whole day is missing
  ])("in an hour that does not exist moves forward by the gap: %s in %s", (text, zone, us) =>
    expect(parseTime(text, zone)).toBe(us),
  );

  it.each([
    ["2026-10-25 02:30", "Europe/Oslo", 1792888200000000n],
    ["2026-04-05T01:45", "Australia/Lord_Howe", 1775313900000000n],
  ])("in an hour that occurs twice is the first: %s in %s", (text, zone, us) => expect(parseTime(text, zone)).toBe(us));

  it.each([
    "T08:05:09.123456Z",
    " 08:05:09.123456+00",
    "T09:05:09.123456+0100",
    "T04:35:09.123456-03:30",
    "T08:05:09.123456-00:00",
  ])("with an offset needs no zone: 2026-03-02%s", (rest) =>
    expect(parseTime(`2026-03-02${rest}`, "Asia/Tokyo")).toBe(1772438709123456n),
  );

  it("with an offset means that moment also in an hour that the zone lacks or has twice", () => {
    expect(parseTime("2026-03-29T02:30+01:00", "Europe/Oslo")).toBe(1774747800000000n);
    expect(parseTime("2026-10-25T02:30+01:00", "Europe/Oslo")).toBe(1792891800000000n);
  });

  it("is cut, not rounded, past the microsecond, before 1970 too", () => {
    expect(parseTime("2026-03-02T08:05:09.1234569", "UTC")).toBe(1772438709123456n);
    expect(parseTime("2026-03-02T08:05:09.5Z", "UTC")).toBe(1772438709500000n);
    expect(parseTime("1969-12-31T23:59:59.5000009Z", "UTC")).toBe(-500000n);
  });

  it.each([
    ["0", 0n],
    ["1772438709", 1772438709000000n],
    ["99999999999", 99999999999000000n], // 11 digits: seconds
    ["100000000000", 100000000000000n], // 12: milliseconds
    ["1772438709123", 1772438709123000n],
    ["99999999999999", 99999999999999000n], // 14
    ["100000000000000", 100000000000000n], // 15: microseconds
    ["1772438709123456", 1772438709123456n],
    ["-1", -1000000n],
  ])("as a bare integer is an epoch, its unit by the digits: %s", (text, us) =>
    expect(parseTime(text, "Europe/Oslo")).toBe(us),
  );

  it.each([
    "",
    " ",
    "now",
    "2026-03",
    "2026-3-2",
    "20260302T080000",
    "2026-02-29",
    "2026-04-31",
    "2026-13-01",
    "2026-00-10",
    "2026-03-02T",
    "2026-03-02T08",
    "2026-03-02T24:00",
    "2026-03-02T23:59:60",
    "2026-03-02T08:60",
    "2026-03-02t08:00",
    "2026-03-02  08:00",
    "2026-03-02T08:00z",
    "2026-03-02T08:00:00,5",
    "2026-03-02T08:00.5",
    "2026-03-02T08:00:00.",
    "2026-03-02Z",
    "2026-03-02T08:00+1",
    "2026-03-02T08:00+24:00",
    "2026-03-02T08:00+01:60",
    "2026-03-02T08:00 +01:00",
    "2026-03-02T08:00[Europe/Oslo]",
    "02.03.2026",
    "+2026-03-02",
    "1772438709.5",
    "1e9",
    "9000000000000000000",
    " 2026-03-02",
  ])("is not read from %j", (text) => expect(parseTime(text, "Europe/Oslo")).toBeNull());

  it("is what the ISO text of any moment of the common era says", () => {
    const moment = fc.date({ min: new Date("0001-01-01"), max: new Date("9999-12-31"), noInvalidDate: true });
    fc.assert(
      fc.property(moment, (date) => {
        expect(parseTime(date.toISOString(), "Europe/Oslo")).toBe(BigInt(date.getTime()) * 1000n);
        expect(parseTime(date.toISOString().slice(0, 19).replace("T", " "), "UTC")).toBe(
          BigInt(Math.floor(date.getTime() / 1000)) * 1_000_000n,
        );
      }),
    );
  });
});

describe("a time zone", () => {
  it("is known by its name in any case, and spelt the zone's way", () => {
    expect(["Europe/Oslo", "europe/oslo", "UTC", "utc"].map(timeZoneNamed)).toEqual([
      "Europe/Oslo",
      "Europe/Oslo",
      "UTC",
      "UTC",
    ]);
  });
  it.each(["Europe/Olso", "", "+02:00", "Oslo", "Z", "2026"])("is not %j", (name) =>
    expect(timeZoneNamed(name)).toBeNull(),
  );
});

it("knows which numbers of days are whole microseconds", () => {
  expect([7, 0.5, 0.333333, 36_500].every(isWholeMicroseconds)).toBe(true);
  expect([1e-12, 0.3333333333333333, 1e-300].some(isWholeMicroseconds)).toBe(false);
});
