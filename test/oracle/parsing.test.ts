import { describe, expect, it } from "vitest";
import { compareDecimals, decimalText, nanoText, readDecimal, toNano } from "../oracle/number.ts";
import { parseQuoted } from "../oracle/read.ts";
import { clockOf } from "../oracle/time.ts";
import { globMatches } from "../oracle/where.ts";

function nano(text: string): string | null {
  const value = readDecimal(text);
  const found = value === null ? null : toNano(value);
  return found === null || found === "out-of-range" ? found : nanoText(found);
}

describe("numbers of the oracle", () => {
  it.each([
    ["+007", "7"],
    ["-2.50", "-2.5"],
    ["25e-2", "0.25"],
    ["1e+17", "100000000000000000"],
    ["0.0000000005", "0.000000001"],
    ["-0.0000000005", "-0.000000001"],
    ["0.00000000049999", "0"],
    ["1.0000000014999", "1.000000001"],
    ["-0", "0"],
    ["1e-400", "0"],
    ["0e400", "0"],
    ["1e18", "out-of-range"],
    ["999999999999999999.9999999995", "out-of-range"],
    ["999999999999999999.9999999994", "999999999999999999.999999999"],
  ])("reads %s as %s", (text, expected) => {
    expect(nano(text)).toBe(expected);
  });
  it.each([".5", "5.", "1,5", " 1", "1 ", "0x10", "NaN", "Infinity", "1E2", "1e", "", "-", "--1", "1_000", "٣"])(
    "reads no number in '%s'",
    (text) => {
      expect(readDecimal(text)).toBeNull();
    },
  );
  it.each([
    ["1", "1.0", 0],
    ["01", "1", 0],
    ["10", "1e1", 0],
    ["0.1234567891", "0.123456789", 1],
    ["-2", "-10", 1],
    ["1e400", "2", 1],
    ["1e-400", "0", 1],
    ["-1e-400", "0", -1],
    ["19", "2e1", -1],
  ])("compares %s with %s exactly", (a, b, sign) => {
    const [left, right] = [readDecimal(a), readDecimal(b)];
    expect(left !== null && right !== null && Math.sign(compareDecimals(left, right))).toBe(sign);
  });
  it.each(["0.05", "1200", "-0.000000001", "12.5", "0"])("writes %s as it is", (text) => {
    const value = readDecimal(text);
    expect(value === null ? null : decimalText(value)).toBe(text);
  });
});

describe("the oracle's clock", () => {
  // Offsets and changes as in the tz database: Oslo +1/+2; Apia skipped 30 December 2011, from -10 to +14.
  it.each([
    ["Europe/Oslo", "2026-03-29T02:30", "2026-03-29T01:30:00.000Z"],
    ["Europe/Oslo", "2026-10-25T02:30", "2026-10-25T00:30:00.000Z"],
    ["Europe/Oslo", "2026-10-25T03:00", "2026-10-25T02:00:00.000Z"],
    ["Pacific/Apia", "2011-12-30T12:00", "2011-12-30T22:00:00.000Z"],
    ["Pacific/Apia", "2011-12-29T23:59", "2011-12-30T09:59:00.000Z"],
    ["America/St_Johns", "2010-11-06T23:30", "2010-11-07T02:00:00.000Z"],
    ["America/St_Johns", "2010-03-14T00:30", "2010-03-14T04:00:00.000Z"],
  ])("reads in %s %s as %s", (zone, text, instant) => {
    expect(clockOf(zone).read(text)).toBe(BigInt(Date.parse(instant)) * 1000n);
  });
  it("lets a skipped day have no length", () => {
    const { day, dayStart } = clockOf("Pacific/Apia");
    const skipped = Date.UTC(2011, 11, 30) / 86_400_000;
    expect(dayStart(skipped)).toBe(dayStart(skipped + 1));
    expect(day(dayStart(skipped))).toBe(skipped + 1);
    expect(day(dayStart(skipped) - 1n)).toBe(skipped - 1);
  });
});

describe("patterns of the oracle", () => {
  it.each([
    ["*bot?", "robot1", true],
    ["*bot?", "robot", false],
    ["?", "😀", true],
    ["a*", "A", false],
    ["*", "", true],
    ["*b*", "a\nb\n", true],
    ["[x]", "x", false],
    ["a%", "ab", false],
    ["a**b", "ab", true],
  ])("%s over '%s': %s", (pattern, text, expected) => {
    expect(globMatches(pattern, text)).toBe(expected);
  });
});

describe("the oracle's reader", () => {
  it("follows RFC 4180 and drops blank lines", () => {
    expect(parseQuoted('a,"b ""x"", y"\r\n\r\n"two\nlines",\r\n""', ",")).toEqual([
      ["a", 'b "x", y'],
      ["two\nlines", ""],
      [""],
    ]);
  });
});
