import { describe, expect, it } from "vitest";
import { effectsCsv } from "../../src/report/csv.ts";
import { renderReport } from "../../src/report/index.ts";
import { reportJson } from "../../src/report/json.ts";
import { terminalText } from "../../src/report/terminal.ts";
import { adjustedCase } from "./adjusted-case.ts";
import { sectionOf, textOf } from "./markup.ts";

describe("an adjusted measure", async () => {
  const { html, json } = await renderReport(adjustedCase);
  const section = textOf(sectionOf(html, "metrics")).replace(/\s+/g, " ");

  it("shows both contrasts, the one that decides first", () => {
    expect(section).toMatch(
      /calendar, adjusted \+7\.7 .*for information calendar, not adjusted \+7\.5 .* shown beside/,
    );
  });

  it("says for what, by how much, what it saves and how the covariate lies in the groups", () => {
    expect(section).toContain(
      "Adjusted for the same in the 14 days before enrolment: for each 1 of it above the mean of both groups, 61, a visitor\u2019s value counts 0.62 less, and for each 1 below it 0.62 more.",
    );
    expect(section).toContain(
      "That takes away 36.0% of the variance of the difference, as about 1.6 times as many visitors would.",
    );
    expect(section).toContain(
      "Its mean was 60.80 with \u201ccalendar\u201d and 61.20 with \u201clist\u201d (p = 0.79 for a difference).",
    );
  });

  it("says how many have no value of it, turns the words with the sign, and does not praise what saves nothing", () => {
    expect(section).toContain("a visitor\u2019s value counts 0.1 more, and for each 1 below it 0.1 less.");
    expect(section).toContain("That takes away next to none of the variance of the difference.");
    expect(section).toContain(
      "1,205 visitors without it count with the mean of both groups: 1,204 with \u201clist\u201d, 1 with \u201ccalendar\u201d.",
    );
  });

  it("says why one could not be adjusted", () => {
    expect(section).toContain(
      "Not adjusted for \u201calways_5\u201d at enrolment, since what it would be adjusted for is the same for every visitor of a group.",
    );
    expect(json.effects[0]?.adjusted).toBeNull();
  });

  it("is drawn and told adjusted on page one, and the reader is told so", () => {
    const decision = textOf(sectionOf(html, "decision")).replace(/\s+/g, " ");
    expect(decision).toContain("96.30 \u2192 104.00 kr");
    expect(decision).toContain(
      "Fare per visitor: levels and difference are adjusted for the same in the 14 days before enrolment.",
    );
    const lines = terminalText(adjustedCase, { report: "r", summary: "s" }).split("\n");
    const at = lines.findIndex((line) => line.startsWith("Adjusted "));
    expect(lines.slice(at, at + 2)).toEqual([
      'Adjusted Support contacts for "past_contacts" at enrolment; Fare per visitor for the same in the 14',
      "         days before enrolment",
    ]);
  });

  it("keeps arms and difference unadjusted in report.json, beside the adjusted one", () => {
    const effect = json.effects[2];
    expect(effect?.arms.control.mean).toBe(96.4);
    expect(effect?.difference).toMatchObject({ estimate: 7.5, pAdjusted: 0.0049 });
    expect(effect?.adjusted).toMatchObject({ theta: 0.62, varianceReduction: 0.36 });
    expect(effect?.adjusted?.difference).toMatchObject({ estimate: 7.7, method: "normal" });
    expect(Object.keys(effect?.adjusted ?? {})).toEqual(["difference", "relative", "theta", "varianceReduction"]);
  });

  it("has columns of its own in effects.csv", () => {
    const [head = "", ...rows] = effectsCsv(reportJson(adjustedCase).effects).trimEnd().split("\r\n");
    const at = head.split(",").indexOf("adjusted_difference");
    expect(rows.map((row) => row.split(",")[at])).toEqual(["", "-0.0012", "7.7"]);
  });
});
