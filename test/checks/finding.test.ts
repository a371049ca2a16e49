import { describe, expect, it } from "vitest";
import { asCheck, type Finding, passed } from "../../src/checks/finding.ts";

function caution(about: string, strong: boolean): Finding {
  return { about, result: "caution", strong, sentence: `${about}.`, remedy: `mend ${about}`, figures: {} };
}

describe("a check", () => {
  it("speaks with its worst part: fail before strong caution before caution before pass, the first of equals", () => {
    const parts = [passed("a", "a.", {}), caution("b", false), caution("c", true), caution("d", true)];
    expect(asCheck("x", parts, {})).toMatchObject({
      result: "caution",
      strong: true,
      sentence: "c.",
      remedy: "mend c",
    });
    const worse = [...parts, { ...caution("e", false), result: "fail" as const }];
    expect(asCheck("x", worse, {})).toMatchObject({ result: "fail", strong: false, sentence: "e." });
    expect(asCheck("x", parts.slice(0, 2), {})).toMatchObject({ result: "caution", strong: false, sentence: "b." });
  });

  it("keeps its parts in their own order, each with its remedy", () => {
    expect(asCheck("x", [caution("b", true), passed("a", "a.", { n: 1 })], { m: 2 })).toEqual({
      id: "x",
      result: "caution",
      strong: true,
      sentence: "b.",
      remedy: "mend b",
      figures: { m: 2 },
      parts: [
        { about: "b", result: "caution", sentence: "b.", figures: {}, remedy: "mend b" },
        { about: "a", result: "pass", sentence: "a.", figures: { n: 1 }, remedy: "" },
      ],
    });
  });

  it("is none without a part", () => expect(asCheck("x", [], {})).toBeNull());
});
