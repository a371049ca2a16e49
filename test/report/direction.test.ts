import { describe, expect, it } from "vitest";
import { directed, namesToIsolate } from "../../src/report/direction.ts";
import { renderReport } from "../../src/report/index.ts";
import { textOf } from "./markup.ts";
import { wide } from "./wide.ts";

const HEBREW = "\u05d4\u05d6\u05de\u05e0\u05d5\u05ea";

describe("texts from right to left", () => {
  it("are closed before the figures that follow them, each name of the plan by itself", () => {
    expect(directed(`${HEBREW} 3: 12.1 of 100`, [`${HEBREW} 3`])).toBe(`\u2068${HEBREW} 3\u2069: 12.1 of 100`);
    expect(directed(`event ${HEBREW}, 5 rows`, [])).toBe(`event ${HEBREW}\u200e, 5 rows`);
    expect(directed(`${HEBREW} ${HEBREW}: 5`, [])).toBe(`${HEBREW} ${HEBREW}\u200e: 5`);
  });

  it("leave every other text as it is", () => {
    expect(directed("Booked: 12.1 of 100, \u5730\u56f3 5", [HEBREW])).toBe("Booked: 12.1 of 100, \u5730\u56f3 5");
  });

  it("are told from the others, longer names first", () => {
    expect(namesToIsolate(["list", HEBREW, `${HEBREW} 2`, HEBREW])).toEqual([`${HEBREW} 2`, HEBREW]);
  });

  it("are isolated all over the page", async () => {
    const { html } = await renderReport(wide);
    // the accessible name of a drawing is read, not laid out
    const text = textOf(html.replace(/<(title|desc) [^>]*>.*?<\/\1>/gs, ""));
    const name = wide.plan.metrics[2]?.name ?? "";
    const places = text.split(name);
    expect(places.length).toBeGreaterThan(5);
    for (const before of places.slice(0, -1)) expect(before.slice(-1)).toBe("\u2068");
  });
});
