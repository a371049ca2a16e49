import fc from "fast-check";
import { Temporal } from "temporal-polyfill";
import { describe, expect, it } from "vitest";
import { localOffset } from "../../src/engine/sql/dialect.ts";
import { duckdb, join, sql } from "../../src/engine/sql/index.ts";
import { asTime } from "../../src/engine/sql/read.ts";
import { offsetsByLocalTime } from "../../src/engine/zone.ts";
import { parseTime } from "../../src/plan/index.ts";
import { inEngine } from "./duck.ts";

// The plan room reads one text at a time with Temporal (test/plan/time.test.ts holds it to the tz database); the engine's
// statements must read every text alike.
const ZONES = ["UTC", "Europe/Oslo", "America/St_Johns", "Pacific/Apia", "Australia/Lord_Howe"];

async function misread(texts: readonly string[], zone: string): Promise<unknown[]> {
  const { clockUs, offsetUs } = asTime(sql`text`, "text", duckdb);
  const values = texts.map((text, place) => sql`(${place}, ${text})`);
  const rows = await inEngine((engine) =>
    engine.query(sql`
      SELECT clock_us - coalesce(offset_us, ${localOffset(sql`clock_us`, offsetsByLocalTime(zone))}) AS at_us
      FROM (
        SELECT place, ${clockUs} AS clock_us, ${offsetUs} AS offset_us
        FROM (VALUES ${join(values, ", ")}) AS t(place, text)
      )
      ORDER BY place`),
  );
  return texts.flatMap((text, i) => {
    const expected = parseTime(text, zone);
    const found = rows[i]?.at_us;
    return found === expected ? [] : [{ zone, text, found, expected }];
  });
}

const FORMS = [
  "2026-03-02",
  "2026-03-02T10:00",
  "2026-03-02 10:00",
  "2026-03-02T10:00:01",
  "2026-03-02T10:00:01.5",
  "2026-03-02T10:00:01.123456",
  "2026-03-02T10:00:01.1234567",
  "2026-03-02T10:00:01.9999999",
  "2026-03-02T10:00:59.99999999999999999999999Z",
  "2026-03-02T10:00Z",
  "2026-03-02 10:00:00Z",
  "2026-03-02T10:00+01",
  "2026-03-02T10:00-0330",
  "2026-03-02T10:00-03:30",
  "2026-03-02T10:00:00.1+05:45",
  "2026-03-02T10:00+23:59",
  "2026-03-02T10:00-00",
  "2024-02-29",
  "2000-02-29T23:59:59.999999",
  "1969-12-31T23:59:59.999999Z",
  "1969-12-31T23:59:59.9999999Z",
  "0000-01-01T00:00Z",
  "0000-02-29T00:00Z",
  "0000-01-01T00:00+23:59",
  "9999-12-31T23:59:59.999999Z",
  "9999-12-31T23:59-23:59",
];
const NO_FORMS = [
  "",
  "x",
  " 2026-03-02",
  "2026-03-02 ",
  "2026-03-02\n",
  "\n2026-03-02",
  "2026-03-02T",
  "2026-03-02 10:00 Z",
  "2026-03-02  10:00",
  "2026-03-02Z",
  "2026-03-02+01",
  "2026-03-02T24:00",
  "2026-03-02T23:59:60",
  "2026-03-02T10:60",
  "2026-02-29",
  "1900-02-29",
  "2026-04-31",
  "2026-13-01",
  "2026-00-01",
  "2026-01-00",
  "2026-03-02t10:00",
  "2026-03-02T10:00z",
  "2026-3-2",
  "26-03-02",
  "12026-03-02",
  "-2026-03-02",
  "2026-03-02T10",
  "2026-03-02T1:00",
  "2026-03-02T10:00:1",
  "2026-03-02T10:00:00,5",
  "2026-03-02T10:00:00.",
  "2026-03-02T10:00.5",
  "2026-03-02T10:00+1",
  "2026-03-02T10:00+24:00",
  "2026-03-02T10:00+01:60",
  "2026-03-02T10:00+010",
  "2026-03-02T10:00+01:0",
  "2026-03-02T10:00+01:00:00",
  "2026-03-02T10:00+-01",
  "2026-03-02T10:00\u221203:30",
  "2026-03-02T10:00[Europe/Oslo]",
  "20260302",
  "20260302T100000Z",
  "2026-061",
  "2026/03/02",
  "02.03.2026",
  "2026-03-02T10:00:00.5 BC",
  "2026-03-02 10:00 (BC)",
  "infinity",
  "-infinity",
  "epoch",
  "now",
  "today",
  "1.5",
  "1e9",
  "1_772_406_000",
  "0x10",
  "--1",
  "+",
  "-",
  "\u0662\u0660\u0662\u0666-03-02",
];
const digits = "1772406000123456789";
const EPOCHS = ["", "+", "-"].flatMap((sign) => [
  ...Array.from({ length: 19 }, (_, i) => `${sign}${digits.slice(0, i + 1)}`),
  ...["0", "00000000000", "000000000001", "000000000000001", "99999999999", "999999999999", "99999999999999"].map(
    (text) => sign + text,
  ),
  // 10^8 days from 1970, where ECMAScript's calendar ends; and where 64 bits do.
  ...["8640000000000000000", "8640000000000000001", "9223372036854775807", "9223372036854775808"].map(
    (text) => sign + text,
  ),
  ...["99999999999999999999", "00000000000000000001", "18446744073709551616"].map((text) => sign + text),
]);

describe("a time of a log", () => {
  it.each(ZONES)("is read from every form as the plan reads it, in %s", async (zone) => {
    expect(FORMS.filter((text) => parseTime(text, zone) === null)).toEqual([]);
    expect(await misread(FORMS, zone)).toEqual([]);
  });
  it("is none in any other form", async () => {
    // Bare digits are an epoch, whatever date they look like.
    expect(NO_FORMS.filter((text) => parseTime(text, "Europe/Oslo") !== null)).toEqual(["20260302"]);
    expect(await misread(NO_FORMS, "Europe/Oslo")).toEqual([]);
  });
  it("may be an epoch: up to 11 digits seconds, up to 14 milliseconds, then microseconds, to the calendar's end", async () => {
    expect(await misread(EPOCHS, "Pacific/Apia")).toEqual([]);
    expect(parseTime("8640000000000000000", "UTC")).toBe(8_640_000_000_000_000_000n);
    expect(parseTime("8640000000000000001", "UTC")).toBeNull();
  });
  // Changes as in the tz database: each minute of the hours around them, on the local clock.
  it.each([
    ["Europe/Oslo", "2026-03-29T00:00", "an hour that does not exist"],
    ["Europe/Oslo", "2026-10-25T00:00", "an hour that occurs twice"],
    ["America/St_Johns", "2010-03-13T22:00", "a gap at one minute past midnight"],
    ["America/St_Johns", "2010-11-06T22:00", "a repeated hour that begins on the day before"],
    ["America/St_Johns", "1988-04-03T00:00", "a gap of two hours"],
    ["Pacific/Apia", "2011-12-29T22:00", "a day that does not exist"],
    ["Pacific/Apia", "2011-12-30T22:00", "the end of that day"],
    ["Australia/Lord_Howe", "2026-04-04T23:00", "half an hour that occurs twice"],
    ["Australia/Lord_Howe", "2026-10-03T23:00", "half an hour that does not exist"],
    ["Europe/Oslo", "1800-01-01T00:00", "time by the sun, before there were zones"],
  ])("in %s, from %s on, goes through %s as the plan's does", async (zone, from, _what) => {
    const start = Temporal.PlainDateTime.from(from);
    const texts = Array.from({ length: 300 }, (_, minutes) =>
      start.add({ minutes }).toString({ smallestUnit: minutes % 2 === 0 ? "minute" : "microsecond" }),
    );
    expect(await misread(texts, zone)).toEqual([]);
  });
  it("is what the plan reads, for any instant from 1850 to 2149, zone and writing", async () => {
    const two = (most: number) => fc.integer({ min: 0, max: most }).map((n) => String(n).padStart(2, "0"));
    const text = fc
      .tuple(
        fc.integer({ min: 1850, max: 2149 }),
        two(13),
        two(32),
        fc.constantFrom("T", " "),
        two(24),
        two(60),
        fc.option(two(60), { nil: null }),
        fc.option(fc.stringMatching(/^[0-9]{1,12}$/), { nil: null }),
        fc.constantFrom("", "", "", "Z", "+01", "-0330", "+05:45", "+14:00", "-24"),
      )
      .map(([year, month, day, t, hour, minute, second, fraction, offset]) => {
        const seconds = second === null ? "" : `:${second}${fraction === null ? "" : `.${fraction}`}`;
        return `${year}-${month}-${day}${t}${hour}:${minute}${seconds}${offset}`;
      });
    const zones = fc.constantFrom(...ZONES, "Africa/Monrovia", "America/Sao_Paulo", "Asia/Kathmandu", "Europe/Dublin");
    await fc.assert(
      fc.asyncProperty(zones, fc.array(text, { minLength: 200, maxLength: 200 }), async (zone, texts) => {
        expect(await misread(texts, zone)).toEqual([]);
      }),
      { numRuns: 6, endOnFailure: true },
    );
  });
});
