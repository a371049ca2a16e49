import { join } from "node:path";
import { beforeAll, describe, expect, it } from "vitest";
import { type BlindJson, check, closeout, type ReportJson } from "../src/index.ts";
import { blindSchema } from "../src/report/check/schema.ts";
import { inPlantedFolder, PLANTED_COUNTS, plantedLog, textsIn } from "./planted-log.ts";
import { textOf } from "./report/markup.ts";

interface Both {
  readonly json: BlindJson;
  readonly html: string;
  readonly terminal: string;
  readonly report: ReportJson;
  /** The report's files before the check, and all files of the folder after it. */
  readonly before: Readonly<Record<string, string>>;
  readonly after: Readonly<Record<string, string>>;
}

const report = (log: string): Promise<Both> =>
  inPlantedFolder(log, async (plan, folder) => {
    const out = join(folder, "report");
    const full = await closeout(plan, { out });
    if (full.status !== 0) throw new Error(full.text);
    const before = textsIn(out);
    const blind = await check(plan, { out });
    if (blind.status !== 0) throw new Error(blind.text);
    const after = textsIn(out);
    const html = after["check.html"] ?? "";
    return { json: blind.check, html, terminal: blind.terminal, report: full.report, before, after };
  });

describe("a blind check of a log whose variants differ in everything that visitors do", () => {
  let found: Both;
  beforeAll(async () => {
    found = await report(plantedLog());
  });

  it("holds none of the report's figures of an effect or an arm, in JSON, page or terminal", () => {
    const allowed = new Set(numbersIn(found.json.schedule).concat(2, 400, 800));
    const { effects, sensitivity } = found.report;
    const secret = numbersIn([effects, sensitivity]).filter((n) => !allowed.has(n) && Math.abs(n) !== 1 && n !== 0);
    expect(secret.length).toBeGreaterThan(200);
    const shown = new Set(numbersIn(found.json));
    expect(secret.filter((n) => shown.has(n))).toEqual([]);
    const texts = textOf(found.html) + found.terminal;
    const digits = [...new Set(secret.map((n) => Math.abs(n).toPrecision(4)))].filter((text) => !text.includes("e"));
    expect(digits.filter((text) => new RegExp(`(?<![\\d.,])${text.replace(".", "\\.")}`).test(texts))).toEqual([]);
  });

  it("holds none of the planted counts of what visitors of one variant did", () => {
    const { checks, flow } = found.json;
    const numbers = new Set(numbersIn([checks, flow.units, flow.analysed]));
    expect(PLANTED_COUNTS.filter((n) => numbers.has(n))).toEqual([]);
    const texts = textOf(found.html).replace(/SHA-256.*/, "") + found.terminal;
    const told = PLANTED_COUNTS.flatMap(
      (n) => texts.match(new RegExp(`.{20}(?<![\\d.,:-])${n}(?![\\d.,:%-]).{20}`)) ?? [],
    );
    expect(told.map(String)).toEqual([]);
    // their sums are no secret: 88 rejected rows, 92 copies, 114 seen in two
    expect(checks.find(({ id }) => id === "rejected")).toMatchObject({ rows: 88 });
    expect(checks.find(({ id }) => id === "duplicates")).toMatchObject({ rows: 92 });
    expect(checks.find(({ id }) => id === "switched")).toMatchObject({ units: 114 });
  });

  it("names a variant only where units are counted and where they are compared by what came before enrolment", () => {
    expect([...new Set(pathsTo(["list", "calendar"], found.json))].sort()).toEqual([
      "checks/allocation/analysed/counts",
      "checks/allocation/counts",
      "checks/allocation/parts/counts",
      "checks/allocation/parts/sentence",
      "checks/allocation/sentence",
      "checks/balance/parts/sentence",
      "checks/balance/parts/variants/variant",
      "checks/balance/sentence",
      "checks/filters/parts/byVariant",
      "flow/analysed",
      "flow/units/byVariant",
      "provenance/plan/text",
      "rule/sentences",
    ]);
  });

  it("says what the plan asks for, in words", () => {
    expect(found.json.rule.metrics[0]?.asked).toBe('at least 5% more visitors with at least one "booking" row');
    expect(found.terminal).toContain('"calendar" is adopted when Booked is shown to be better than with "list"');
    expect(textOf(found.html)).toContain("at least 5% more visitors with at least one “booking” row");
  });

  it("fits its schema, survives a file, and leaves the report's files alone", () => {
    expect(blindSchema.safeParse(JSON.parse(found.after["check.json"] ?? "")).error).toBeUndefined();
    expect(JSON.parse(found.after["check.json"] ?? "")).toEqual(found.json);
    expect(Object.keys(found.after).filter((name) => !(name in found.before))).toEqual([
      "check-rejects.csv",
      "check.html",
      "check.json",
    ]);
    for (const [name, text] of Object.entries(found.before)) expect(found.after[name]).toBe(text);
  });

  it("says that the planned size is reached and everybody is followed", () => {
    const { schedule } = found.json;
    expect(schedule).toMatchObject({
      enrolment: { first: "2026-03-02", last: "2026-03-12", plannedLast: "2026-03-15", isOpen: false },
      units: { enrolled: 800, followed: 800, planned: 800 },
      followUpCompleteOn: "2026-03-19",
    });
    expect(schedule.sentences).toContain("Every visitor is followed for all of 7 days.");
  });
});

describe("a blind check while the log still grows", () => {
  // 40 visitors every 12 hours: on 6 March at noon 4.25 days' worth are enrolled, nobody is followed for 7 days.
  it("finds no fault in follow-up that is not complete, and says when it and the planned size will be", async () => {
    const { json, terminal } = await blind(plantedLog("2026-03-06T12:00:00Z"));
    expect(json.schedule).toMatchObject({
      logEnd: "2026-03-06",
      enrolment: { first: "2026-03-02", last: "2026-03-06", isOpen: true },
      units: { enrolled: 341, followed: 0, planned: 800 },
      // 80 a day since 2 March 6:00, by hand: 341 + 459 / 80 days after 6 March 12:00; 7 days after the last 15 March
      plannedSizeOn: "2026-03-12",
      followUpCompleteOn: "2026-03-23",
    });
    expect(json.schedule.perDay.seen).toBeCloseTo(80.2, 0);
    expect(json.checks.map(({ id }) => id)).not.toContain("follow-up");
    expect(json.checks.filter(({ result }) => result === "fail").map(({ id }) => id)).toEqual(["rejected"]);
    expect(terminal.replaceAll("\n", " ")).toContain(
      "at this pace the planned size is reached on 12 March 2026, before enrolment ends.",
    );
  });

  it("is possible before anybody is enrolled who would be counted", async () => {
    const { json } = await blind("visitor,at,event,arm,fare,id,staff\nv1,2026-03-02T06:00:00Z,search,list,,1,true\n");
    expect(json.schedule.units).toEqual({ enrolled: 0, followed: 0, planned: 800, byPlannedEnd: null });
    expect(json.schedule.sentences.join(" ")).toContain("No visitor is enrolled yet that would be counted.");
  });
});

async function blind(log: string): Promise<{ json: BlindJson; terminal: string }> {
  return inPlantedFolder(log, async (plan, folder) => {
    const outcome = await check(plan, { out: join(folder, "report") });
    if (outcome.status !== 0) throw new Error(outcome.text);
    return { json: outcome.check, terminal: outcome.terminal };
  });
}

function numbersIn(value: unknown): number[] {
  if (typeof value === "number") return [value];
  return typeof value === "object" && value !== null ? Object.values(value).flatMap(numbersIn) : [];
}

/** Where a variant's name stands, as a key or in a text; places in lists are left out, a check goes by its id. */
function pathsTo(names: readonly string[], value: unknown, path = ""): string[] {
  const says = (text: string) =>
    names.some((name) => text === name || text.includes(`"${name}"`) || /\bname: list\b/.test(text));
  if (typeof value === "string") return says(value) ? [path] : [];
  if (typeof value !== "object" || value === null) return [];
  return Object.entries(value).flatMap(([key, item]) => {
    if (!Array.isArray(value) && names.includes(key)) return [path];
    const step = Array.isArray(value) ? (path === "checks" ? `/${(item as { id: string }).id}` : "") : `/${key}`;
    return pathsTo(names, item, `${path}${step}`.replace(/^\//, ""));
  });
}
