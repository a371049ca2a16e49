import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { Value } from "../../src/engine/engine.ts";
import { double, duckdb, sql } from "../../src/engine/sql/index.ts";
import { parseNumber } from "../../src/plan/index.ts";
import { evaluated, inEngine, inOrder } from "./duck.ts";

const TIE = 5e-10;
const LARGEST = 10n ** 27n - 1n;

/** What a log's text is worth in 10^-9, from the plan room's exact decimal: half away from zero, below 10^18. */
function reference(text: string): bigint | "none" | "out-of-range" {
  const match = /^(-?)(\d+)(?:\.(\d+))?(?:e(-?\d+))?$/.exec(parseNumber(text) ?? "");
  if (match === null) return "none";
  const [, minus, whole = "", places = "", exponent = "0"] = match;
  // The number is 0.digits x 10^point: at 19 digits before the point it is too large, 10 places behind it nothing.
  const digits = (whole + places).replace(/^0+/, "");
  const point = BigInt(whole.length) + BigInt(exponent) - BigInt(whole.length + places.length - digits.length);
  if (digits === "" || point < -9n) return 0n;
  if (point > 18n) return "out-of-range";
  const tenPlaces = `${"0".repeat(Math.max(0, -Number(point)))}${digits}`.padEnd(30, "0");
  const end = Math.max(0, Number(point)) + 9;
  const size = BigInt(tenPlaces.slice(0, end)) + (tenPlaces.charAt(end) >= "5" ? 1n : 0n);
  if (size > LARGEST) return "out-of-range";
  return minus === "-" ? -size : size;
}

function read(value: Value | undefined, isNumber: Value | undefined): bigint | "none" | "out-of-range" {
  if (value !== null && typeof value === "object") return value.nano;
  return isNumber === true ? "out-of-range" : "none";
}

/** The texts that the engine reads otherwise than the reference. */
function misread(texts: readonly string[]): Promise<unknown[]> {
  return inEngine(async (engine) => {
    const values = await evaluated(engine, texts, (text) => duckdb.number(text));
    const grammar = await evaluated(engine, texts, (text) => duckdb.isNumber(text));
    return texts.flatMap((text, i) => {
      const found = read(values[i], grammar[i]);
      return found === reference(text) ? [] : [{ text, found, reference: reference(text) }];
    });
  });
}

const digits = (most: number) =>
  fc
    .array(fc.constantFrom(..."0123456789450099"), { minLength: 1, maxLength: most })
    .map((characters) => characters.join(""));
const sign = fc.constantFrom("", "", "-", "+");
const number = fc
  .tuple(
    sign,
    digits(25),
    fc.option(digits(40), { nil: null }),
    fc.option(fc.tuple(sign, fc.integer({ min: 0, max: 60 })), { nil: null }),
  )
  .map(
    ([minus, whole, places, exponent]) =>
      `${minus}${whole}${places === null ? "" : `.${places}`}${exponent === null ? "" : `e${exponent.join("")}`}`,
  );

describe("a value of a log", () => {
  // Worked out from DESIGN 4, rule 2, digit by digit.
  it.each([
    ["0.0000000005", 1n],
    ["-0.0000000005", -1n],
    ["0.00000000049999", 0n],
    ["1.5e-9", 2n],
    ["14999999999999e-22", 1n],
    ["689e-21", 0n],
    ["5.551115123125783e-17", 0n],
    ["99999999.99999999995e1", 10n ** 18n],
    ["-5e-10", -1n],
    ["49e-11", 0n],
    [`1${"0".repeat(60)}e-50`, 10n ** 19n],
    ["12345678901234567891234567e-8", 123456789012345678912345670n],
    ["999999999999999999.9999999994", LARGEST],
    ["999999999999999999.9999999995", "out-of-range"],
    ["-999999999999999999.9999999995", "out-of-range"],
    ["1e18", "out-of-range"],
    ["1e99999999999999999999", "out-of-range"],
    ["1e-99999999999999999999", 0n],
    ["0e99999999999999999999", 0n],
    ["-0", 0n],
    ["+007", 7n * 10n ** 9n],
    [`${"0".repeat(300)}1.5`, 1_500_000_000n],
    [`0.${"3".repeat(500)}`, 333_333_333n],
    [`1.0000000004${"9".repeat(300)}`, 1_000_000_000n],
  ] as const)("is exact, and half of the tenth place goes away from zero: %s", async (text, expected) => {
    expect(reference(text)).toBe(expected);
    expect(await misread([text])).toEqual([]);
  });
  it("is none by the grammar: no bare point, no capital E, no space, no other digits", async () => {
    const none = [
      ".5",
      "5.",
      "1E2",
      "1e",
      "e5",
      "",
      "-",
      "--1",
      "+-1",
      " 1",
      "1 ",
      "1\n",
      "1\t",
      "1_000",
      "1,000",
      "1.2.3",
    ];
    const words = [
      "NaN",
      "nan",
      "Infinity",
      "inf",
      "-inf",
      "0x10",
      "true",
      "null",
      "NA",
      "٣",
      "１",
      "1e5\n",
      "½",
      "1e5.5",
    ];
    for (const text of [...none, ...words]) expect(reference(text)).toBe("none");
    expect(await misread([...none, ...words])).toEqual([]);
  });
  it("is what the plan room's reference says, for any digits and exponent", async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(number, { minLength: 400, maxLength: 400 }), async (texts) => {
        expect(await misread(texts)).toEqual([]);
      }),
      { numRuns: 8, endOnFailure: true },
    );
  });
});

describe("a number of the plan", () => {
  const operators = ["=", ">", "<", ">=", "<="] as const;
  const holds = { "=": [0], ">": [1], "<": [-1], ">=": [0, 1], "<=": [-1, 0] } as const;

  /** The order of two numbers by whole digits, scaled to one exponent. */
  function order(a: string, b: string): -1 | 0 | 1 {
    const [x, y] = [a, b].map((text) => {
      const match = /^(-?)(\d+)(?:\.(\d+))?(?:e(-?\d+))?$/.exec(parseNumber(text) ?? "");
      const [, minus = "", whole = "", places = "", exponent = "0"] = match ?? [];
      return BigInt(minus + whole + places) * 10n ** BigInt(1000 + Number(exponent) - places.length);
    });
    if (x === undefined || y === undefined) throw new Error(`${a} or ${b} is no number`);
    return x < y ? -1 : x > y ? 1 : 0;
  }
  async function wrongOrders(texts: readonly string[], planned: string): Promise<string[]> {
    const value = parseNumber(planned);
    if (value === null) throw new Error(`${planned} is no number`);
    return inEngine(async (engine) => {
      const wrong: string[] = [];
      for (const operator of operators) {
        const found = await evaluated(engine, texts, (text) => duckdb.compared(text, operator, value));
        const accepted: readonly number[] = holds[operator];
        for (const [i, text] of texts.entries()) {
          if (found[i] !== accepted.includes(order(text, planned))) wrong.push(`${text} ${operator} ${planned}`);
        }
      }
      return wrong;
    });
  }

  const EQUAL = ["1", "1.0", "01", "+1", "1e0", "10e-1", "0.1e1", "1.000000000000000000000000000000"];
  it.each([
    ["1", [...EQUAL, "0", "-1", "1.0000000000000000000000001", "0.9999999999999999999999999", "1e-400"]],
    ["0", ["0", "-0", "0.0", "0e9", "1e-300", "-1e-300", "0.0000000000000000001", "-0.0000000000000000001"]],
    ["12345678901234567890123456789", ["12345678901234567890123456789", "12345678901234567890123456788", "1.2e28"]],
    ["-12.5", ["-12.5", "-12.50", "-12.49", "-12.51", "-125e-1", "-125", "12.5", "-1e30"]],
    ["1e500", ["1e500", "10e499", "1e501", "9e499", "0", "-1e501"]],
    ["1e-500", ["1e-500", "0.1e-499", "1e-501", "2e-500", "0", "1"]],
  ] as const)("%s is compared exactly, whatever its length", async (planned, texts) => {
    expect(await wrongOrders(texts, planned)).toEqual([]);
  });
  it("matches no text that is no number", async () => {
    await inEngine(async (engine) => {
      const texts = ["", " 1", "1 ", "x", "1E0", ".5", null, "true"];
      for (const operator of operators) {
        const found = await evaluated(engine, texts, (text) => duckdb.compared(text, operator, "1"));
        expect(found.map(Boolean)).toEqual(texts.map(() => false));
      }
    });
  });
  it("is compared as its digits say, for any digits and exponent", async () => {
    await fc.assert(
      fc.asyncProperty(number, fc.array(number, { minLength: 100, maxLength: 100 }), async (planned, texts) => {
        expect(await wrongOrders([...texts, planned], planned)).toEqual([]);
      }),
      { numRuns: 6, endOnFailure: true },
    );
  });
});

describe("the double of a decimal", () => {
  /** Decimals of 38 digits, 9 of them after the point, and the doubles that they round to. */
  const decimalText = (nano: bigint): string => {
    const size = (nano < 0n ? -nano : nano).toString().padStart(10, "0");
    return `${nano < 0n ? "-" : ""}${size.slice(0, -9)}.${size.slice(-9)}`;
  };
  const sizes = fc
    .integer({ min: 0, max: 125 })
    .chain((bits) => fc.bigInt({ min: -(2n ** BigInt(bits)), max: 2n ** BigInt(bits) }));

  async function wrongDoubles(nanos: readonly bigint[]): Promise<unknown[]> {
    return inEngine(async (engine) => {
      const found = await inOrder(
        engine,
        nanos.map((nano) => sql`CAST(${decimalText(nano)} AS ${duckdb.sumType})`),
        duckdb.toDouble(sql`x`),
      );
      return nanos.flatMap((nano, i) => {
        const expected = Number(decimalText(nano)) + 0; // a decimal has no negative zero
        return Object.is(found[i], expected) ? [] : [[decimalText(nano), found[i], expected]];
      });
    });
  }

  it("is the nearest one for all sizes", async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(sizes, { minLength: 300, maxLength: 300 }), async (nanos) => {
        expect(await wrongDoubles(nanos)).toEqual([]);
      }),
      { numRuns: 5, endOnFailure: true },
    );
  });
  it("is the nearest one where dividing the digits would round twice, and at the ends", async () => {
    // 2^53 is the last whole number up to which all are doubles: around it the two ways part.
    const around = (nano: bigint) => [-2n, -1n, 0n, 1n, 2n].flatMap((by) => [nano + by, -(nano + by)]);
    // DuckDB 1.5.6 rounds the first two of them twice, on its own way from decimal to double.
    const ends = [
      853_959_796_086_080_320_065_610_527n,
      953_833_069_312_377_814_158_884_176_734n,
      0n,
      1n,
      2n ** 53n,
      9_007_199n * 10n ** 9n,
      2n ** 60n,
      10n ** 27n,
      10n ** 38n - 3n,
    ].flatMap(around);
    expect(await wrongDoubles([...ends.filter((nano) => nano < 10n ** 38n && nano > -(10n ** 38n))])).toEqual([]);
  });
  it("is written so that it comes back, but for the sign of zero", async () => {
    await inEngine(async (engine) => {
      await fc.assert(
        fc.asyncProperty(
          fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: 100, maxLength: 100 }),
          async (values) => {
            const found = await inOrder(engine, values.map(double), sql`x`);
            found.forEach((value, i) => {
              expect(value).toBe((values[i] ?? Number.NaN) + 0);
            });
          },
        ),
        { numRuns: 5, endOnFailure: true },
      );
    });
  });
});

describe("a double", () => {
  /** The doubles that the engine takes for another number than their shortest decimal, which is how String writes them. */
  const mistaken = (xs: readonly number[]) =>
    inEngine(async (engine) => {
      const text = sql`regexp_replace(CAST(x AS VARCHAR), '[.]0$', '')`;
      const found = await inOrder(engine, xs.map(double), duckdb.numberOfDouble(sql`x`, duckdb.number(text)));
      return xs.flatMap((x, i) => {
        const value = read(found[i], true);
        const expected = reference(String(x).replace("e+", "e"));
        return value === expected ? [] : [{ x, value, expected }];
      });
    });
  const steps = (x: number) => [x * (1 - 2 ** -52), x * (1 - 2 ** -53), x, x * (1 + 2 ** -52), x * (1 + 2 ** -51)];

  it("is worth its shortest decimal, beside every tie of the tenth place", async () => {
    const ties = [0, 1, 2, 7, 1e3, 123_456_789, 1e12, 4e14, 999_999_999_999_999].map((k) => (k + 0.5) / 1e9);
    const xs = [...ties, 0.1, 0.3, 1 / 7, 999_999.999999999, 1e6, 123_456.7890123455, TIE].flatMap(steps);
    expect(await mistaken([...xs, ...xs.map((x) => -x), 0, -0, 5e-324, 1e17, 1e300])).toEqual([]);
  });
  it("is so wherever it lies", async () => {
    const size = fc.tuple(fc.double({ min: 1, max: 10, noNaN: true }), fc.integer({ min: -13, max: 19 }));
    const some = fc.oneof(
      size.map(([x, power]) => x * 10 ** power),
      fc.tuple(fc.maxSafeNat(), fc.integer({ min: 0, max: 10 })).map(([k, places]) => k / 10 ** places),
      fc.maxSafeNat().map((k) => (k % 1e15) / 1e9 + TIE),
    );
    await fc.assert(
      fc.asyncProperty(fc.array(some, { minLength: 500, maxLength: 500 }), async (xs) => {
        expect(await mistaken(xs.flatMap((x) => [x, -x]))).toEqual([]);
      }),
      { numRuns: 8 },
    );
  });
});
