import fc from "fast-check";
import { Temporal } from "temporal-polyfill";
import { describe, expect, it } from "vitest";
import { localDay as localDayOf } from "../../src/engine/sql/dialect.ts";
import { sql } from "../../src/engine/sql/index.ts";
import { dayAt, dayRuns, localDay } from "../../src/engine/zone.ts";
import { inEngine, inOrder } from "./duck.ts";

const DAY = 86_400_000_000n;
const us = (text: string): bigint => Temporal.Instant.from(text).epochNanoseconds / 1000n;

/** DESIGN 4, rule 8: a local day runs from local midnight to local midnight. */
function dayOf(at: bigint, zone: string): number {
  const instant = Temporal.Instant.fromEpochNanoseconds(at * 1000n).toZonedDateTimeISO(zone);
  const epoch = Temporal.PlainDate.from("1970-01-01");
  // The last local midnight that has come; where clocks go back over midnight the date on the clock returns to the day before.
  const date = instant.toPlainDate().add({ days: 1 });
  const starts = [0, 1, 2].map((days) => date.subtract({ days }));
  const started = starts.find((day) => day.toZonedDateTime(zone).epochNanoseconds <= at * 1000n);
  if (started === undefined) throw new Error(`no midnight before ${at} in ${zone}`);
  return epoch.until(started, { largestUnit: "days" }).days;
}

async function wrongDays(zone: string, ats: readonly bigint[], first: bigint, last: bigint): Promise<unknown[]> {
  const runs = dayRuns(zone, first, last);
  return inEngine(async (engine) => {
    const found = await inOrder(
      engine,
      ats.map((at) => sql`CAST(${at} AS BIGINT)`),
      localDayOf(sql`x`, runs),
    );
    // A statement and this program must agree: where clocks go back over midnight they once did not.
    return ats.flatMap((at, i) =>
      Number(found[i]) === dayOf(at, zone) && dayAt(at, runs) === dayOf(at, zone)
        ? []
        : [{ zone, at, found: found[i], here: dayAt(at, runs), expected: dayOf(at, zone) }],
    );
  });
}

describe("a local day", () => {
  // 2026 in Oslo: 29 March has 23 hours, 25 October 25; midnight is 23:00 UTC in winter and 22:00 in summer.
  it.each([
    ["2026-03-28T22:59:59.999999Z", "2026-03-28"],
    ["2026-03-28T23:00:00Z", "2026-03-29"],
    ["2026-03-29T21:59:59.999999Z", "2026-03-29"],
    ["2026-03-29T22:00:00Z", "2026-03-30"],
    ["2026-10-24T22:00:00Z", "2026-10-25"],
    ["2026-10-25T22:59:59.999999Z", "2026-10-25"],
    ["2026-10-25T23:00:00Z", "2026-10-26"],
  ])("in Oslo holds %s on %s", async (at, date) => {
    const expected = Temporal.PlainDate.from("1970-01-01").until(date, { largestUnit: "days" }).days;
    expect(dayOf(us(at), "Europe/Oslo")).toBe(expected);
    expect(await wrongDays("Europe/Oslo", [us(at)], us("2026-03-01T00:00Z"), us("2026-11-30T00:00Z"))).toEqual([]);
  });
  it("is the zone's own for every hour of a span, however short the span", async () => {
    for (const [zone, from] of [
      ["Europe/Oslo", "2026-03-27T00:00Z"],
      ["Europe/Oslo", "2026-10-23T00:00Z"],
      ["Pacific/Apia", "2011-12-28T00:00Z"],
      ["America/St_Johns", "2010-11-05T00:00Z"],
      ["America/Sao_Paulo", "2018-11-02T00:00Z"],
      ["Australia/Lord_Howe", "2026-04-03T00:00Z"],
      ["UTC", "1969-12-30T00:00Z"],
    ] as const) {
      const first = us(from);
      const ats = Array.from({ length: 100 }, (_, hour) => first + BigInt(hour) * 3_600_000_000n);
      expect(await wrongDays(zone, ats, first, ats.at(-1) ?? first), zone).toEqual([]);
      expect(await wrongDays(zone, [first], first, first), zone).toEqual([]);
    }
  });
  it("is the zone's own for any instants of a span of any length, its ends among them", async () => {
    const zones = fc.constantFrom(
      "Europe/Oslo",
      "America/St_Johns",
      "Pacific/Apia",
      "Australia/Lord_Howe",
      "America/Havana",
      "Asia/Tehran",
    );
    const instant = fc.bigInt({ min: us("1901-01-01T00:00Z"), max: us("2100-01-01T00:00Z") });
    await fc.assert(
      fc.asyncProperty(
        zones,
        instant,
        fc.integer({ min: 0, max: 4_000 }),
        fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 100 }),
        async (zone, first, days, places) => {
          const length = BigInt(days) * DAY;
          const ats = places.map((share) => first + BigInt(Math.floor(share * days)) * DAY + (length > 0n ? 1n : 0n));
          const inside = ats.filter((at) => at <= first + length);
          expect(await wrongDays(zone, [first, ...inside, first + length], first, first + length)).toEqual([]);
        },
      ),
      { numRuns: 10, endOnFailure: true },
    );
  });
});

describe("the number of a local day", () => {
  it("counts from 1970, before it downwards", () => {
    expect(localDay(0n, "UTC")).toBe(0);
    expect(localDay(-1n, "UTC")).toBe(-1);
    expect(localDay(-1n, "Europe/Oslo")).toBe(0);
    expect(localDay(us("2026-03-02T00:00+01:00"), "Europe/Oslo")).toBe(20_514);
  });
});
