import { describe, expect, it } from "vitest";
import { asSentence, capital, dateSpan, dateText, list, plural, quoted, rates } from "../../src/words/index.ts";

describe("nouns", () => {
  it("has one of one, many of none and of many", () => {
    expect(plural(1, "visitor", "visitors")).toBe("1 visitor");
    expect(plural(0, "visitor", "visitors")).toBe("0 visitors");
    expect(plural(1204, "visitor", "visitors")).toBe("1,204 visitors");
  });

  it("joins a list with commas and one and", () => {
    expect(list([])).toBe("");
    expect(list(["a"])).toBe("a");
    expect(list(["a", "b"])).toBe("a and b");
    expect(list(["a", "b", "c"])).toBe("a, b and c");
    expect(list(["a", "b", "c"], "or")).toBe("a, b or c");
  });

  it("changes the first letter and nothing else", () => {
    expect(capital("the log")).toBe("The log");
    expect(capital("øst")).toBe("Øst");
    expect(capital("")).toBe("");
    expect(quoted("robots")).toBe('"robots"');
  });
});

describe("proportions as people count them", () => {
  it("counts of 100, or of more where the share is small", () => {
    expect(rates([0.12, 0.132])).toEqual({ of: "100", texts: ["12.0", "13.2"] });
    expect(rates([0.0012, 0.0013])).toEqual({ of: "1,000", texts: ["1.2", "1.3"] });
    expect(rates([0, 0])).toEqual({ of: "100", texts: ["0.0", "0.0"] });
  });

  it("tells apart two shares that differ in a later digit", () => {
    expect(rates([0.12003, 0.12051]).texts).toEqual(["12.00", "12.05"]);
  });
});

describe("days", () => {
  it.each([
    [{ year: 2026, month: 3, day: 2 }, { year: 2026, month: 3, day: 15 }, "2 to 15 March 2026"],
    [{ year: 2026, month: 2, day: 28 }, { year: 2026, month: 3, day: 3 }, "28 February to 3 March 2026"],
    [{ year: 2025, month: 12, day: 28 }, { year: 2026, month: 1, day: 3 }, "28 December 2025 to 3 January 2026"],
    [{ year: 2026, month: 3, day: 2 }, { year: 2026, month: 3, day: 2 }, "2 March 2026"],
  ])("%j to %j is %s", (first, last, text) => expect(dateSpan(first, last)).toBe(text));

  it("knows twelve months", () => {
    expect(dateText({ year: 2026, month: 12, day: 24 })).toBe("24 December 2026");
    expect(() => dateText({ year: 2026, month: 13, day: 1 })).toThrow("1 to 12");
  });
});

describe("a text from the plan", () => {
  it.each([
    ["cards were refused", "cards were refused."],
    ["cards were refused. ", "cards were refused. "],
    ["why?", "why?"],
    ["and so on\u2026", "and so on\u2026"],
  ])("%j as a sentence is %j", (text, sentence) => expect(asSentence(text)).toBe(sentence));
});
