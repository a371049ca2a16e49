import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { decimalOf, parseNumber, parsePercent, parseYamlNumber } from "../../src/plan/number.ts";

describe("a number in a log", () => {
  it.each([
    ["1", "1"],
    ["01", "1"],
    ["1.0", "1"],
    ["+1.50", "1.5"],
    ["-0.25", "-0.25"],
    ["-0", "0"],
    ["0.000", "0"],
    ["100", "100"],
    ["12345678901234567890", "12345678901234567890"],
    ["0.1234567890123456789", "0.1234567890123456789"],
    ["1e3", "1000"],
    ["1.5e3", "1500"],
    ["1.5e+1", "15"],
    ["15e-1", "1.5"],
    ["123e-5", "0.00123"],
    ["-2e-3", "-0.002"],
    ["0e99999999999999999999", "0"],
  ])("%s is %s", (text, value) => expect(parseNumber(text)).toBe(value));

  it.each([
    "",
    " ",
    "1 ",
    " 1",
    ".5",
    "5.",
    "1,000",
    "1_000",
    "1E3",
    "e3",
    "1e",
    "1e1.5",
    "--1",
    "+-1",
    "0x1F",
    "NaN",
    "inf",
    "5%",
    "٣",
    "1\n",
  ])("%j is none", (text) => expect(parseNumber(text)).toBeNull());

  it("keeps an exponent where the digits would fill pages, in one form for equal numbers", () => {
    expect(parseNumber("1e500")).toBe("1e500");
    expect(parseNumber("10.0e499")).toBe("1e500");
    expect(parseNumber("-12e-900000000000000000000")).toBe("-12e-900000000000000000000");
  });

  it("has one text for each value, whichever way the digits and the exponent share it", () => {
    fc.assert(
      fc.property(
        fc.bigInt(-(10n ** 20n), 10n ** 20n),
        fc.integer({ min: 0, max: 30 }),
        fc.nat(20),
        (n, places, shift) => {
          // n 10^-places, written with its point and with an exponent; value is the fraction n / 10^places
          const text = parseNumber(`${n}e-${places}`);
          expect(parseNumber(`${n}${"0".repeat(shift)}e-${places + shift}`)).toBe(text);
          const [whole = "", fraction = ""] = String(text).split(".");
          expect(BigInt(whole + fraction) * 10n ** BigInt(places)).toBe(n * 10n ** BigInt(fraction.length));
          expect(text).toMatch(/^(0|-?(0|[1-9]\d*)(\.\d*[1-9])?)$/);
        },
      ),
    );
  });
});

describe("a number in a plan", () => {
  it.each([
    [".5", "0.5"],
    ["5.", "5"],
    ["1E3", "1000"],
    ["0123", "123"],
    ["-.5e1", "-5"],
  ])("%s is %s, as YAML 1.2 reads it", (text, value) => expect(parseYamlNumber(text)).toBe(value));

  it.each([".", "", "0x1F", "0o17", ".inf", ".nan", "1e", "abc"])("%j has no decimal digits", (text) =>
    expect(parseYamlNumber(text)).toBeNull(),
  );

  it.each([
    ["5%", "0.05"],
    ["0.1%", "0.001"],
    ["99.9%", "0.999"],
    ["100%", "1"],
    ["5 %", "0.05"],
    ["-5%", "-0.05"],
    ["250%", "2.5"],
  ])("%s is the share %s, exactly", (text, share) => expect(parsePercent(text)).toBe(share));

  it.each(["5", "%", "5%%", "1e1%", " 5%", ".5%"])("%j is no percentage", (text) =>
    expect(parsePercent(text)).toBeNull(),
  );

  it("writes out a double's shortest digits", () => {
    expect([0.001, 1e-7, 5, 1e21].map(decimalOf)).toEqual(["0.001", "0.0000001", "5", "1000000000000000000000"]);
  });
});
