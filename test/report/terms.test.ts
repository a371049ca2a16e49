import { describe, expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { termParts } from "../../src/report/terms.ts";
import { everyCase } from "./every.ts";

describe.each(everyCase)("the terms of the case %s", async (_, inputs) => {
  const { html } = await renderReport(inputs);
  const lines = [...html.matchAll(/<div id="(method-[a-z-]+)"/g)].map(([, id = ""]) => id);
  const links = [...html.matchAll(/<a class="term" href="#([^"]*)"/g)].map(([, id = ""]) => id);

  it("lead to each line of Methods from at least one place", () => {
    expect(lines.filter((id) => !links.includes(id))).toEqual([]);
  });

  it("lead nowhere else", () => {
    expect(links.filter((id) => !lines.includes(id))).toEqual([]);
  });
});

describe("a sentence with terms", () => {
  const known = { "method-draws-and-deals": "", "method-corrected-interval": "" };

  it("is cut at the terms that the report has a line on, and nothing of it is lost", () => {
    const text = "Bootstrap-t interval: 2 to 3. The corrected interval is the score interval.";
    expect(
      termParts(text, known)
        .map(({ text: part }) => part)
        .join(""),
    ).toBe(text);
    expect(termParts(text, known)[0]).toEqual({ text: "Bootstrap-t interval", to: "method-draws-and-deals" });
    expect(termParts("the score interval", known)).toEqual([{ text: "the score interval", to: "" }]);
  });
});
