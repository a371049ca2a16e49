import { describe, expect, expectTypeOf, it } from "vitest";
import type { z } from "zod";
import { NO_POWER } from "../../src/decision/power.ts";
import { twelveDigits } from "../../src/report/digits.ts";
import { reportJson } from "../../src/report/json.ts";
import type { ReportJson } from "../../src/report/json-types.ts";
import { reportJsonSchema, reportSchema } from "../../src/report/schema.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import * as cases from "./cases.ts";
import { everyCase } from "./every.ts";
import { hostile } from "./hostile.ts";
import { atALook } from "./meanwhile.ts";

describe("report.json", () => {
  it.each(everyCase)("of the case %s fits its schema and survives a file", (_, inputs) => {
    const json = reportJson(inputs);
    const read: unknown = JSON.parse(JSON.stringify(json));
    expect(read).toEqual(json);
    expect(reportSchema.safeParse(read).error).toBeUndefined();
  });

  it("has the type that its schema describes, but for the figures of checks, which are open", () => {
    type Closed =
      | "experiment"
      | "conclusion"
      | "flow"
      | "provenance"
      | "format"
      | "changes"
      | "subgroups"
      | "accrual"
      | "sinceEnrolment"
      | "looks";
    expectTypeOf<Mutable<Pick<ReportJson, Closed>>>().toEqualTypeOf<Pick<z.infer<typeof reportSchema>, Closed>>();
  });

  it("writes each number with 12 significant digits", () => {
    const numbers = numbersIn(reportJson(cases.several));
    expect(numbers.length).toBeGreaterThan(200);
    for (const number of numbers) expect(Number(number.toPrecision(12))).toBe(number);
    expect(reportJson(cases.adopt).effects[0]?.difference.estimate).toBe(0.012);
  });

  it("writes null where a figure does not exist, and keeps the arms and the difference as objects", () => {
    const json = reportJson(without(cases.adopt));
    expect(json.effects[0]?.relative).toBeNull();
    expect(json.effects[0]?.difference).toMatchObject({ estimate: 0.012, low: null, high: null, z: null, p: null });
    expect(json.effects[0]?.power).toEqual({ detectable: null, unitsForWorthwhile: null });
  });

  it("holds what the test could find and the size that the worthwhile effect needs", () => {
    // the formulas of METHODS 4 by hand, from the standard error and the control's mean that the JSON itself holds
    const [booked] = reportJson(cases.adopt).effects;
    const standardError = booked?.difference.standardError ?? Number.NaN;
    const detectable = (1.959963984540054 + 0.8416212335729143) * standardError;
    expect((booked?.power.detectable ?? 0) / detectable).toBeCloseTo(1, 10);
    expect((booked?.power.unitsForWorthwhile ?? 0) / (100_301 * (detectable / (0.05 * 0.12)) ** 2)).toBeCloseTo(1, 10);
  });

  // the page told the looks, report.json did not: a program could not know that the interval was a repeated one
  it("tells the planned looks, and null where the plan has none", () => {
    const { looks, effects } = reportJson(atALook);
    expect(looks).toMatchObject({ planned: [0.25, 0.5, 0.75, 1], at: 2, spending: "obrien-fleming", reached: 0.42828 });
    expect(looks?.shares).toEqual([0.25, 0.42828]);
    // Python 3.11, statistics.NormalDist: 4 - 4 cdf(inv_cdf(1 - 0.05/4) / sqrt(0.42828))
    expect(looks?.metrics[0]?.spent).toBeCloseTo(0.0012297622041157474, 10);
    expect(looks?.metrics.map(({ metric }) => metric)).toEqual(
      effects.filter((effect) => effect.role !== "secondary").map((effect) => effect.metric),
    );
    expect(reportJson(cases.adopt).looks).toBeNull();
  });

  it("puts a check's figures beside its keys, and refuses one that would hide a key", () => {
    const [check] = reportJson(cases.undecidable).checks;
    expect(check).toMatchObject({ id: "allocation", result: "fail", chiSquare: 48.7, counts: { list: 50_148 } });
    expect(check?.parts[1]).toMatchObject({ about: "analysed", chiSquare: 48.7 });
    expect(() => reportJson(withFigure(cases.adopt, "sentence"))).toThrow(
      'the check allocation has a figure called "sentence"',
    );
  });

  it("counts a variant under its own name, even one that JavaScript knows", () => {
    const { analysed } = reportJson(hostile).flow;
    expect(Object.entries(analysed)).toEqual([
      ["constructor", 50_120],
      ["__proto__", 50_181],
    ]);
  });

  it("has ledgers that add up", () => {
    for (const [, inputs] of everyCase) {
      const { flow } = reportJson(inputs);
      expect(sum(flow.rows.map(({ rows }) => rows))).toBe(flow.rowsRead);
      expect(sum(flow.units.map(({ units }) => units))).toBe(flow.unitsSeen);
    }
  });

  it("holds the ledger of each metric's rows by the lines of all rows, with a sum where the metric takes a column", () => {
    const { flow } = reportJson(cases.several);
    expect(flow.metrics.length).toBeGreaterThan(1);
    for (const { lines } of flow.metrics) expect(lines.map(({ id }) => id)).toEqual(flow.rows.map(({ id }) => id));
    const summed = flow.metrics.flatMap(({ metric, lines }) =>
      lines.every(({ sum }) => sum !== null) ? [metric] : [],
    );
    expect(summed).toEqual(
      cases.several.plan.metrics.flatMap(({ name, of }) => ("column" in of.aggregate ? [name] : [])),
    );
    // 5 duplicates of 812.35 kr each
    const fare = flow.metrics.find(({ metric }) => metric === summed[0]);
    expect(fare?.lines[1]).toMatchObject({ id: "duplicate", rows: 5, sum: 4061.75 });
  });
});

describe("a number on its way into report.json", () => {
  it("keeps 12 significant digits, whatever its size", () => {
    expect(twelveDigits([1 / 3, 123_456_789.123_456, 1.5e-300, -0, 12])).toEqual([
      0.333333333333, 123_456_789.123, 1.5e-300, 0, 12,
    ]);
  });

  it("must exist: what is not finite, not there or not JSON is our mistake, told with its path", () => {
    expect(() => twelveDigits({ effects: [{ difference: { low: Number.NaN } }] })).toThrow(
      "report.effects[0].difference.low is NaN",
    );
    expect(() => twelveDigits({ a: Number.POSITIVE_INFINITY })).toThrow("report.a is Infinity");
    expect(() => twelveDigits({ a: undefined })).toThrow("report.a is undefined");
    expect(() => twelveDigits({ a: 1n })).toThrow("report.a is bigint");
  });
});

describe("the JSON Schema", () => {
  it("is of the current draft, closed, and names every key of the contract (DESIGN 7)", () => {
    const schema = reportJsonSchema();
    expect(schema.$schema).toBe("https://json-schema.org/draft/2020-12/schema");
    expect(schema.additionalProperties).toBe(false);
    expect(schema.required).toEqual(
      "format experiment conclusion looks flow checks effects subgroups accrual sinceEnrolment sensitivity askedAfterwards changes provenance".split(
        " ",
      ),
    );
  });
});

type Mutable<T> = T extends readonly (infer Item)[]
  ? Mutable<Item>[]
  : T extends object
    ? { -readonly [Key in keyof T]: Mutable<T[Key]> }
    : T;

function numbersIn(value: unknown): number[] {
  if (typeof value === "number") return [value];
  return typeof value === "object" && value !== null ? Object.values(value).flatMap(numbersIn) : [];
}
const sum = (counts: readonly number[]) => counts.reduce((a, b) => a + b, 0);

function without(inputs: ReportInputs): ReportInputs {
  return {
    ...inputs,
    effects: inputs.effects.map((effect) => ({
      ...effect,
      power: NO_POWER,
      contrast: {
        ...effect.contrast,
        difference: { ...effect.contrast.difference, standardError: null, low: null, high: null, z: null, p: null },
        relative: { absent: "few-units" },
        why: { absent: "few-units" },
      },
    })),
  };
}

function withFigure(inputs: ReportInputs, name: string): ReportInputs {
  return { ...inputs, checks: inputs.checks.map((check) => ({ ...check, figures: { [name]: 1 } })) };
}
