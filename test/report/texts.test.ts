import { describe, expect, it } from "vitest";
import { summaryMd } from "../../src/report/summary.ts";
import { terminalText } from "../../src/report/terminal.ts";
import { adopt, several, undecidable } from "./cases.ts";
import { everyCase } from "./every.ts";
import { hostile } from "./hostile.ts";

const paths = { report: "out/fare-calendar/report.html", summary: "out/fare-calendar/summary.md" };

describe("the text for the terminal", () => {
  it("gives the conclusion, a table, the state of the data and the files, in this order", () => {
    const lines = terminalText(adopt, paths).split("\n");
    expect(lines[0]).toBe("Fare calendar on the search page");
    expect(lines[2]).toBe("Adopt the calendar.");
    expect(lines.filter((line) => /^(Booked|Support contacts|Fare per visitor) {2}/.test(line))).toEqual([
      "Booked                   12.0%         13.2%       +10.0%   +6.5% to +13.7%   better by over 5%",
      "Support contacts   8.1 per 100   8.0 per 100        \u22121.2%   \u22126.1% to +3.9%    within 5%",
      "Fare per visitor      96.40 kr     103.90 kr        +7.8%   +2.3% to +13.5%   for information",
    ]);
    expect(lines.slice(-3)).toEqual([
      "Counted  100,301 of 104,512 visitors; all 959,425 rows accounted for",
      "Report   out/fare-calendar/report.html",
      "To paste out/fare-calendar/summary.md",
    ]);
  });

  it("keeps its columns under each other, for every variant", () => {
    const lines = terminalText(several, paths).split("\n");
    const heads = lines.flatMap((line, i) => (/^ +list .*difference +95% interval$/.test(line) ? [i] : []));
    expect(heads).toHaveLength(3);
    for (const head of heads) {
      const at = (lines[head] ?? "").indexOf("95% interval");
      for (const row of lines.slice(head + 1, head + 7)) expect(row.slice(at - 3, at + 1)).toMatch(/^ {3}[+\u2212\d]$/);
    }
  });

  it("shows no estimate when nothing can be decided", () => {
    const text = terminalText(undecidable, paths);
    expect(text).not.toMatch(/difference|interval|13\.2/);
    expect(text).toContain("No decision from this data yet.");
  });

  it("cannot be made to move the cursor, colour the screen or break its lines by a name in the plan", () => {
    const text = terminalText(hostile, paths);
    expect(text).not.toMatch(/[^\P{Cc}\n]|\p{Cf}/u);
    expect(text.replaceAll("\n", " ")).toContain("[31m new line | a | b |");
  });

  it.each(everyCase)("wraps the sentences of the case %s at 100 characters", (_, inputs) => {
    const text = terminalText(inputs, paths);
    const sentences = text.split("\n").filter((line) => !line.includes("   "));
    // a word that is longer than the line stands alone
    for (const line of sentences) expect(line.length <= 100 || !line.trim().includes(" ")).toBe(true);
  });
});

describe("the summary to paste", () => {
  it("tells the decision in about twelve lines", () => {
    const lines = summaryMd(adopt).trimEnd().split("\n");
    expect(lines.length).toBeLessThanOrEqual(12);
    expect(lines[0]).toBe(
      "**Fare calendar on the search page** (2 to 15 March 2026, each visitor followed for 7 days)",
    );
    expect(lines[2]).toBe("**Adopt the calendar.**");
    expect(lines.join("\n")).toContain("10.0% more (95% interval: 6.5% to 13.7% more)");
  });

  it.each(everyCase)("of the case %s has at most 14 lines", (_, inputs) => {
    expect(summaryMd(inputs).trimEnd().split("\n").length).toBeLessThanOrEqual(14);
  });

  it("keeps text from the plan as text: no markup, no picture, no link, no table", () => {
    const text = summaryMd(hostile);
    expect(text).not.toMatch(/(?<!\\)[<>[\]|`]/);
    expect(text).not.toMatch(/(?<!\\)\*(?!\*)(?<!\*\*)/);
  });
});
