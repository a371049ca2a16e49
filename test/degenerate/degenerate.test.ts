import { afterEach, describe, expect, it, vi } from "vitest";
import { z } from "zod";
import { reportJsonSchema } from "../../src/index.ts";
import type { ReportJson } from "../../src/report/json-types.ts";
import { textOf } from "../report/markup.ts";
import { EDGE_LOGS } from "./logs.ts";
import { type Run, run } from "./run.ts";

// DESIGN 4, rule 10, and METHODS 8: what cannot be computed has its sentence on the page and is null in report.json; the
// exit status is 0 whatever the conclusion.

type Figure = "estimate" | "standardError" | "low" | "high" | "z" | "p" | "pAdjusted" | "relative";
const NONE: readonly Figure[] = ["estimate", "standardError", "low", "high", "z", "p", "pAdjusted", "relative"];
const NO_INTERVAL: readonly Figure[] = ["standardError", "low", "high", "z", "p", "pAdjusted", "relative"];
const NOTHING = /No visitor with .* was counted, so there is nothing to compare/;

interface Expected {
  readonly decision: ReportJson["conclusion"]["decision"];
  /** What the page says of it. */
  readonly says: RegExp;
  /** Of the first measure's contrast, what does not exist; all else does. */
  readonly nulls: readonly Figure[];
}

/** By the rules of METHODS 1, 2 and 7, worked out for each log. */
const EXPECTED: Readonly<Record<string, Expected>> = {
  "nobody enrolled": { decision: "undecidable", says: NOTHING, nulls: NONE },
  "one variant only": { decision: "undecidable", says: NOTHING, nulls: NONE },
  "the other variant only": { decision: "undecidable", says: NOTHING, nulls: NONE },
  "variants that the plan lacks only": { decision: "undecidable", says: NOTHING, nulls: NONE },
  "nobody left by a filter": { decision: "undecidable", says: NOTHING, nulls: NONE },
  "nobody followed to the end": { decision: "undecidable", says: NOTHING, nulls: NONE },
  "three variants of which one has nobody": { decision: "undecidable", says: NOTHING, nulls: [] },
  // 20 against 1, planned half and half: chance does so in about one test in 30,000. The estimate of one visitor stands.
  "an arm of one": { decision: "undecidable", says: /should be of one size/, nulls: ["standardError", "z"] },
  "one in each arm": { decision: "not-settled", says: /not settled/i, nulls: ["standardError", "z", "relative"] },
  "three in each arm": { decision: "not-settled", says: /fewer to .* more/, nulls: ["z"] },
  "three in each arm who pay": { decision: "not-settled", says: /does not settle/, nulls: [] },
  // Both arms' means are 100; where only one arm varies the interval is that arm's.
  "no spread in one arm": { decision: "not-settled", says: /no difference/, nulls: [] },
  "no spread in the other arm": { decision: "not-settled", says: /no difference/, nulls: [] },
  "no spread at all, alike": { decision: "not-settled", says: /every visitor has the same value/, nulls: NO_INTERVAL },
  "no spread at all, apart": { decision: "not-settled", says: /every visitor has the same value/, nulls: NO_INTERVAL },
  "a control mean of 0": { decision: "adopt", says: /No percentage is given/, nulls: ["relative"] },
  "a control without any value but 0": { decision: "adopt", says: /No percentage is given/, nulls: ["relative"] },
  "no counted rows": {
    decision: "not-settled",
    says: /No percentage is given/,
    nulls: ["standardError", "z", "relative"],
  },
  "none against none": {
    decision: "not-settled",
    says: /No percentage is given/,
    nulls: ["standardError", "z", "relative"],
  },
  // The effect asked for is a share of a level of 0: whether it was reached cannot be told.
  "none against all": {
    decision: "not-settled",
    says: /Whether that is so cannot be told/,
    nulls: ["standardError", "z", "relative"],
  },
  "all against all": { decision: "not-settled", says: /no difference/, nulls: ["standardError", "z"] },
  "a ratio without a denominator": { decision: "not-settled", says: /divided by adds up to 0/, nulls: NONE },
  "a ratio whose denominator lacks in one arm": {
    decision: "not-settled",
    says: /divided by adds up to 0/,
    nulls: NONE,
  },
  "a ratio without a numerator": { decision: "not-settled", says: /No interval can be given/, nulls: NO_INTERVAL },
  "nobody with a value": {
    decision: "not-settled",
    says: /one of the groups has no visitor with a value/,
    nulls: ["standardError", "z", "relative"],
  },
  "one visitor in an arm with a value": {
    decision: "keep-control",
    says: /fewer than two visitors with a value/,
    nulls: ["z"],
  },
  "the largest numbers there are": { decision: "adopt", says: /10\^18|10¹⁸|× 10/, nulls: ["relative"] },
  "the smallest numbers there are": { decision: "adopt", says: /33\.3% higher/, nulls: [] },
  "a table without times": { decision: "not-settled", says: /does not settle/, nulls: ["z"] },
};

/** PAGES: words that no page, message or file of ours uses; none of them stands in these plans and logs. */
const NEVER =
  /\b(lift|uplift|winners?|losers?|champion|chance to beat|probability to be best|conversions?|exposures?|scorecard|health|segments?|ship|roll out|traffic|variations?|stat sig|\d+% confident|improvements?|baseline(?! table))\b/i;
const MISSING = /\bNaN\b|\bundefined\b|\bInfinity\b|∞|\[object/;

const schema = z.fromJSONSchema(reportJsonSchema() as Parameters<typeof z.fromJSONSchema>[0]);

afterEach(() => vi.useRealTimers());

const runs = new Map<string, Promise<Run>>();
const runOf = (log: (typeof EDGE_LOGS)[number]): Promise<Run> => {
  const known = runs.get(log.name) ?? run(log.plan, log.files);
  runs.set(log.name, known);
  return known;
};

function reportOf({ outcome }: Run): ReportJson {
  if (outcome.status !== 0) throw new Error(outcome.text);
  return outcome.report;
}

it("has an expectation for every log", () => {
  expect(Object.keys(EXPECTED).sort()).toEqual(EDGE_LOGS.map(({ name }) => name).sort());
});

describe.each(EDGE_LOGS)("a log with $name", (log) => {
  const expected = EXPECTED[log.name];

  it("ends with status 0, its decision, and a sentence on the page", async () => {
    const found = await runOf(log);
    const report = reportOf(found);
    expect(report.conclusion.decision).toBe(expected?.decision);
    expect(textOf(found.files["report.html"] ?? "")).toMatch(expected?.says ?? /^$/);
    expect(report.conclusion.sentence).toMatch(/^[A-Z].*[.]$/s);
    expect(report.conclusion.reasons.length).toBeGreaterThan(0);
  });
  it("has null for what does not exist, and a number for what does", async () => {
    const [effect] = reportOf(await runOf(log)).effects;
    const figures = { ...effect?.difference, relative: effect?.relative };
    const nulls = NONE.filter((figure) => figures[figure] === null);
    expect(nulls).toEqual(NONE.filter((figure) => expected?.nulls.includes(figure)));
  });
  it("writes its files, none with a word that stands for no number, or one that we never use", async () => {
    const { files, left, outcome } = await runOf(log);
    expect(left).toEqual(["report"]);
    const names = ["cells.json", "effects.csv", "rejects.csv", "report.html", "report.json", "summary.md"];
    expect(Object.keys(files)).toEqual(names);
    const texts = Object.entries({ ...files, terminal: outcome.status === 0 ? outcome.terminal : "" });
    for (const [name, text] of texts) {
      const read = name === "report.html" ? textOf(text) : text;
      expect(MISSING.exec(text)?.[0], name).toBeUndefined();
      // keys of cells are our own words among ourselves
      if (name !== "cells.json") expect(NEVER.exec(read)?.[0], name).toBeUndefined();
      if (!name.endsWith(".json")) expect(/\bnull\b/.exec(read)?.[0], name).toBeUndefined();
    }
  });
  it("comes out of its cells again, to the last byte, without the log", async () => {
    const { withoutLog } = await runOf(log);
    expect(withoutLog).toMatchObject({ status: 0, text: expect.stringContaining("holds.") });
  });
  it("has a report.json that is the report, by the schema that we print, and that adds up", async () => {
    const found = await runOf(log);
    const written: unknown = JSON.parse(found.files["report.json"] ?? "");
    expect(schema.safeParse(written).error).toBeUndefined();
    const { flow } = reportOf(found);
    expect(flow.rows.reduce((sum, line) => sum + line.rows, 0)).toBe(flow.rowsRead);
    expect(flow.units.reduce((sum, line) => sum + line.units, 0)).toBe(flow.unitsSeen);
    expect(written).toEqual(JSON.parse(JSON.stringify(reportOf(found))));
  });
  it("gives the same bytes in another folder and another year, and no path of the machine", async () => {
    const found = await runOf(log);
    vi.useFakeTimers({ toFake: ["Date"], now: new Date("2041-07-09T03:02:01Z") });
    const again = await run(log.plan, log.files);
    expect(again.files).toEqual(found.files);
    for (const [name, text] of Object.entries(found.files)) {
      expect(text.includes(found.folder), name).toBe(false);
      expect(/\/(tmp|home|root|work|Users|private)\//.exec(text)?.[0], name).toBeUndefined();
    }
  });
});

describe("the schema of report.json", () => {
  it("refuses what is no report: a key more, a key less, a word for a number", async () => {
    const [log] = EDGE_LOGS;
    if (log === undefined) throw new Error("no logs");
    const report = JSON.parse((await runOf(log)).files["report.json"] ?? "") as Record<string, unknown>;
    const { flow, ...less } = report;
    expect(schema.safeParse(report).success).toBe(true);
    expect(schema.safeParse({ ...report, more: 1 }).success).toBe(false);
    expect(schema.safeParse(less).success).toBe(false);
    expect(schema.safeParse({ ...report, flow: { ...(flow as object), rowsRead: "many" } }).success).toBe(false);
    expect(schema.safeParse({ ...report, format: 2 }).success).toBe(false);
  });
});
