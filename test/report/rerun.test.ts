import { describe, expect, it } from "vitest";
import { ordinal, shownTexts } from "../../src/report/changes/words.ts";
import { renderReport } from "../../src/report/index.ts";
import { reportSchema } from "../../src/report/schema.ts";
import { sectionOf, textOf } from "./markup.ts";
import { contacts } from "./plans.ts";
import { firstRun, secondRun, thirdRun, undecidableRerun } from "./rerun-case.ts";

const second = await renderReport(secondRun);
const third = await renderReport(thirdRun);
const pageOne = (html: string) => textOf(sectionOf(html, "decision"));

describe("page one of a rerun", () => {
  it("tells in the order of PAGES: which run, what the first said, what changed, whom it removed, each estimate twice, the rule, the counted, the runs", () => {
    expect(textOf(second.html)).toContain(
      `second run, replaces the report with fingerprint ${firstRun.sha256.slice(0, 4)} ${firstRun.sha256.slice(4, 8)}`,
    );
    const page = pageOne(second.html);
    const order = [
      "Adopt the calendar.",
      "The first run said the same.",
      "What changed: the filter \u201cstaff accounts\u201d was added (staff book for training). The log is the same.",
      "\u201cstaff accounts\u201d removed 1,204 visitors: 614 with \u201clist\u201d and 590 with \u201ccalendar\u201d, as even as chance would make it.",
      "Booked",
      "+10.0% (+6.5% to +13.7%)",
      "at least 5% more",
      "limit 5% more",
      "Why it moved: Booked, of the visitors left out, 30.5 of 100 with \u201clist\u201d (187 of 614; of those who stayed 12.0 of 100) and 42.9 of 100 with \u201ccalendar\u201d (253 of 590; of those who stayed 13.2 of 100).",
      "The rule did not change",
      "Counted: 100,301 visitors (first run: 101,505).",
      "Runs so far: 2. The first is kept in history/.",
    ];
    const places = order.map((sentence) => page.indexOf(sentence));
    expect(order.filter((_, i) => (places[i] ?? -1) < 0)).toEqual([]);
    expect(places).toEqual([...places].sort((a, b) => a - b));
  });

  // Pearson's chi-square of 614 against 400 by hand: 107^2 / 507 twice, 45.2 on 1 degree of freedom; of 3 against 1 nothing is said.
  it("says when a filter that came new removed more from one variant than chance would", async () => {
    const withStaff = async (removed: readonly number[]) => {
      const units = removed.reduce((sum, n) => sum + n, 0);
      const unitLines = secondRun.reduction.unitLines.map((line) =>
        line.id === "filter:staff accounts" ? { ...line, units, byVariant: removed } : line,
      );
      return pageOne((await renderReport({ ...secondRun, reduction: { ...secondRun.reduction, unitLines } })).html);
    };
    expect(await withStaff([614, 400])).toMatch(/less even than chance would make it \(p\s<\s0\.0001\)/);
    expect(await withStaff([3, 1])).toMatch(/3 with \u201clist\u201d and 1 with \u201ccalendar\u201d\. /);
  });

  it("draws a caution for a plan that was changed after a result, and says both versions of a changed rule", () => {
    expect(pageOne(second.html)).toContain("The plan was changed after a result had been seen");
    const page = pageOne(third.html);
    expect(page).toContain(
      "The rule was changed after a result had been seen: \u201cmetrics, Booked: worthwhile\u201d was {relative: 5%} in the first run and is {relative: 3%} now.",
    );
    expect(second.json.checks.find(({ id }) => id === "plan-changed")).toMatchObject({
      result: "caution",
      strong: false,
    });
    expect(third.json.checks.find(({ id }) => id === "plan-changed")).toMatchObject({
      result: "caution",
      strong: true,
    });
  });

  it("names the one change that moved the conclusion", () => {
    expect(pageOne(third.html)).toContain(
      "Of the changes only \u201cmetrics, Booked: worthwhile\u201d moves the conclusion by itself.",
    );
  });

  it("shows no estimate where nothing can be decided, of neither run", async () => {
    const page = pageOne((await renderReport(undecidableRerun)).html);
    expect(page).toContain("What changed");
    expect(page).not.toMatch(/10\.0%|10\.8%|interval|Why it moved/);
  });
});

describe("section 2", () => {
  const section = textOf(sectionOf(third.html, "changes"));

  it("stands between 1 and 3, and in the contents", () => {
    const heads = [...third.html.matchAll(/<h2 id="[^"]*"><span class="number">(\d)/g)].map(([, n]) => n);
    expect(heads).toEqual(["1", "2", "3", "4", "5", "6", "7"]);
    expect(third.html).toContain('<a href="#changes">');
  });

  it("gives each key in the plan's own words, before and now", () => {
    expect(section).toMatch(/metrics, Booked: worthwhile belongs to the rule \{relative: 5%\} \{relative: 3%\}/);
    expect(section).toMatch(/metrics, Fare per visitor: cap \{quantile: 0\.999\} \{quantile: 0\.99\}/);
  });

  it("names the file of the log that is another, by both fingerprints", () => {
    expect(section).toMatch(/data\/\S+ [\d,]+ rows, [0-9a-f]{4} [0-9a-f]{4} [\d,]+ rows, abab abab/);
  });

  it("gives the ledger line by line, a line that came new with a dash", () => {
    const other = textOf(sectionOf(second.html, "changes"));
    expect(other).toMatch(/removed by the filter \u201cstaff accounts\u201d \u2013 1,204 \u2013/);
    expect(other).toMatch(/counted 101,505 100,301 \u22121,204/);
  });

  it("draws every estimate twice on one axis", () => {
    const figure = /<figure class="wide forest choices" aria-labelledby="changes-estimates">.*?<\/figure>/s.exec(
      third.html,
    );
    expect(figure?.[0].match(/<svg/g)).toHaveLength(2 * 3 + 1);
  });

  it("shows each change alone and added, and says of one that is no plan by itself that it is none", () => {
    expect(section).toMatch(/metrics, Booked: worthwhile alone/);
    expect(section).toMatch(/metrics, Fare per visitor: cap alone .*no plan by itself/);
    expect(section).toMatch(/metrics, Fare per visitor: cap added to those above \+2\.1%/);
  });
});

describe("changes in report.json", () => {
  it("is null in a first report and else as the schema says", () => {
    expect(reportSchema.parse(second.json).changes).toMatchObject({ run: 2, replaces: firstRun.sha256 });
    expect(reportSchema.parse(third.json).changes).toMatchObject({
      run: 3,
      rule: [{ place: "metrics, Booked: worthwhile" }],
    });
  });

  it("carries the first plan along, to which every later rule is held", () => {
    expect(third.json.changes?.first).toEqual(second.json.changes?.first);
    expect(third.json.changes?.first.text).not.toContain("staff accounts");
  });
});

it("counts runs in words, and from the eleventh on in figures", () => {
  expect([1, 2, 3, 10, 11, 12, 13, 21, 22, 23, 24, 111].map(ordinal)).toEqual([
    "first",
    "second",
    "third",
    "tenth",
    "11th",
    "12th",
    "13th",
    "21st",
    "22nd",
    "23rd",
    "24th",
    "111th",
  ]);
});

it("gives a measure whose limit is in its own unit its differences in that unit, and draws them in percent", () => {
  const shown = (relative: number, estimate: number) => ({
    estimate,
    low: estimate - 0.01,
    high: estimate + 0.01,
    relative: { estimate: relative, low: relative - 0.01, high: relative + 0.01 },
    zone: "within" as const,
    units: { control: 9, variant: 9 },
    totals: { control: 1, variant: 1 },
  });
  const metric = { ...contacts, unitOfMeasure: "s", margin: { kind: "absolute" as const, value: 0.1 } };
  const { before, after } = shownTexts({ before: shown(0.02, 0.04), after: shown(0.01, 0.02) }, metric);
  expect([before.estimate, after.estimate]).toEqual(["+0.040 s", "+0.020 s"]);
  expect(after.drawn?.estimate).toBe(0.01);
});
