import { readFileSync } from "node:fs";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { loadPlan, type Problem, placeProblems, unreadablePlan } from "../../src/plan/index.ts";
import { nearest } from "../../src/plan/nearest.ts";
import { messageOf, planText } from "./plans.ts";

describe("a message", () => {
  it("about a tab is the only one about indents: the tab upsets what stands below", () => {
    const text = "metrics:\n  - name: M\n\trole: primary\n    summary: mean\n";
    expect(messageOf(loadPlan(text))).toBe(`plan.yaml has 1 mistake. Nothing was computed and no file was written.

plan.yaml:3:1
    role: primary
    ^
    A tab indents this line. YAML takes spaces only.`);
  });

  it("shows of a long line the part that is meant", () => {
    const names = Array.from({ length: 30 }, (_, i) => `file-${i}.csv`).join(", ");
    const log = `log: [{files: [${names}, 5, last.csv, and-one-more.csv], columns: {unit: v, time: t, variant: a, event: e}}]`;
    const [, , line = "", carets = ""] = messageOf(loadPlan(planText({ log })))
      .split("\n")
      .slice(1);
    expect(line.length).toBeLessThan(112);
    expect(line.slice(carets.indexOf("^"), carets.lastIndexOf("^") + 1)).toBe("5");
    expect([line.trim().at(0), line.at(-1)]).toEqual(["…", "…"]);
  });

  it("lets no character of plan or log steer the terminal", () => {
    const { source } = loadPlan(planText({ owner: 'owner: 5 # "\u001b[2J"' }));
    const problem: Problem = {
      path: ["owner"],
      at: "value",
      message: "a\u0007b",
      nearest: "c\u009bd",
      context: "e\u0008\nf",
    };
    const message = placeProblems(source, "plan\u001b.yaml", [problem]);
    expect(message.replaceAll("\n", "")).not.toMatch(/\p{Cc}/u);
    expect(message.endsWith("    a\u{fffd}b Did you mean c\u{fffd}d?\n    e\u{fffd}\n    f")).toBe(true);
  });

  it("finds the nearest place above, where a path leads past the tree", () => {
    const { source } = loadPlan(planText());
    const message = placeProblems(source, "plan.yaml", [
      { path: ["metrics", 0, "of", "sum"], at: "value", message: "x" },
    ]);
    expect(message).toContain("plan.yaml:13:5  metrics, Booked\n    of: {event: booking}\n    ^^\n    x");
  });

  it("for an empty file needs no line", () => {
    expect(messageOf(loadPlan(""))).toBe(`plan.yaml has 1 mistake. Nothing was computed and no file was written.

plan.yaml:1:1
    The plan is empty. Expected keys such as experiment:, question:, log:, variants: and metrics:.`);
  });

  it.each([
    ["ENOENT", "p.yaml is not there. Look at the path; it is read from the current folder."],
    ["EISDIR", "p.yaml is a folder. Name the plan's file in it."],
    ["EACCES", "p.yaml may not be read by you. Ask for the right to read it."],
    ["EIO", "p.yaml cannot be read (EIO)."],
  ])("for a file that cannot be read says why: %s", (code, sentence) => {
    expect(unreadablePlan("p.yaml", code)).toBe(`${sentence} Nothing was computed and no file was written.`);
  });

  it("counts and places by the text's own lines, whatever ends them", () => {
    const text = planText({ experiment: "experiment: 5", owner: "owner: 5" });
    expect(messageOf(loadPlan(`\uFEFF${text.replaceAll("\n", "\r\n")}`))).toBe(messageOf(loadPlan(text)));
  });
});

it("has an answer to any text: a plan, or places that lie in the text", () => {
  const texts = ["fare-calendar.yaml", "whole-format.yaml"].map((name) =>
    readFileSync(new URL(`fixtures/${name}`, import.meta.url), "utf8"),
  );
  const junk = fc.constantFrom(
    "",
    "\n",
    " ",
    "  ",
    ":",
    "- ",
    "{",
    "]",
    ",",
    "'",
    "&a ",
    "*a",
    "null",
    "[]",
    "{}",
    "0x1F",
    "5%",
    "-1",
    "~",
    "#",
    "\t",
    "true",
    "x: y",
  );
  const edits = fc.array(fc.tuple(fc.nat(), fc.nat(30), junk), { minLength: 1, maxLength: 4 });
  fc.assert(
    fc.property(fc.constantFrom(...texts), edits, (text, changes) => {
      const changed = changes.reduce((now, [at, drop, put]) => {
        const start = at % now.length;
        return now.slice(0, start) + put + now.slice(start + drop);
      }, text);
      const loaded = loadPlan(changed);
      if ("plan" in loaded) return;
      expect(loaded.problems.length).toBeGreaterThan(0);
      const lines = changed.split("\n");
      for (const [, line, column] of messageOf(loaded).matchAll(/^plan\.yaml:(\d+):(\d+)/gm)) {
        expect((lines[Number(line) - 1] ?? "").length + 1).toBeGreaterThanOrEqual(Number(column));
      }
      expect(messageOf(loaded)).not.toMatch(/undefined|NaN|\[object|Invalid input/);
    }),
    { numRuns: Number(process.env.FUZZ ?? 150) },
  );
});

it("is done in time with a plan that nests or repeats without end", () => {
  const many = `a: &a [${"x, ".repeat(50)}x]\nb: &b [${"*a, ".repeat(50)}*a]\nc: &c [${"*b, ".repeat(50)}*b]\nd: [${"*c, ".repeat(50)}*c]\n`;
  for (const text of [
    "[".repeat(100_000),
    "- ".repeat(100_000),
    `experiment: ${"{a: ".repeat(5000)}`,
    "a: &a [*a]\n",
    many,
  ]) {
    expect(messageOf(loadPlan(text))).toContain("Nothing was computed");
  }
});

describe("the nearest word", () => {
  const keys = ["worthwhile", "margin", "good-is", "of", "per", "in"];
  it.each([
    ["worthwile", "worthwhile"],
    ["Worthwhile", "worthwhile"],
    ["good_is", "good-is"],
    ["goodis", "good-is"],
    ["off", "of"],
    ["pre", undefined],
    ["threshold", undefined],
    ["x", undefined],
    ["", undefined],
  ])("to %j is %j", (word, near) => expect(nearest(word, keys)).toBe(near));

  it("is never the word itself", () => expect(nearest("margin", ["margin", "margins"])).toBe("margins"));
});
