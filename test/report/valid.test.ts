import { HtmlValidate } from "html-validate";
import { describe, expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { everyCase } from "./every.ts";

const validator = new HtmlValidate({
  extends: ["html-validate:recommended"],
  rules: {
    "doctype-style": ["error", { style: "lowercase" }],
    // rows of the pictures are laid out as grids, which takes the table's roles from them: they are named again
    "no-redundant-role": "off",
    // of templates, and no reader sees it
    "no-trailing-whitespace": "off",
    // it holds the decision, for the reader with many of these open
    "long-title": "off",
  },
});

describe.each(everyCase)("the page of the case %s", (_, inputs) => {
  it("is valid HTML", async () => {
    const { results } = await validator.validateString((await renderReport(inputs)).html);
    const faults = results.flatMap(({ messages }) =>
      messages.map((one) => `${one.line}: ${one.message} (${one.ruleId})`),
    );
    expect(faults).toEqual([]);
  });
});

it("the validator finds what is wrong", async () => {
  const { html } = await renderReport(everyCase[0]?.[1] ?? never());
  const { valid } = await validator.validateString(html.replace("</main>", "</div></main>"));
  expect(valid).toBe(false);
});

function never(): never {
  throw new Error("no case");
}
