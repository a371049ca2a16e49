import { expect, it } from "vitest";
import { renderReport } from "../../src/report/index.ts";
import { sectionOf, textOf } from "./markup.ts";
import { quantiles } from "./quantiles.ts";

const rendered = renderReport(quantiles);

it("shows a quantile's arms by its name, without what a quantile has not", async () => {
  const page = textOf(sectionOf((await rendered).html, "metrics"));
  // 400 values from 1 s, a hundredth apart: the 200th is 2.99; 420 from 0.1 s: the 210th is 2.19.
  expect(page).toContain(
    "Variant Visitors Median, s Smallest, s Largest, s list 400 2.990 1.0000 4.990 calendar 420 2.190 0.1000 4.290",
  );
  expect(page).toContain("Variant Visitors 90th percentile, s Smallest, s Largest, s");
  expect(page).toContain(
    "The 90th percentile over visitors of the largest \u201cseconds\u201d of \u201csearch_opened\u201d rows in the 7 days after enrolment: at least 90 of 100 visitors have no more; a visitor without such rows is left out. Lower is better.",
  );
  expect(page).toContain("at least 999 of 1,000 visitors have no more");
  expect(page).toContain("order statistics");
});

it("says why a quantile has no interval, or one that is open", async () => {
  const page = textOf(sectionOf((await rendered).html, "metrics"));
  expect(page).toContain(
    "There is no interval, since too many visitors have the very same value for an interval to have a width.",
  );
  expect(page).toContain(
    "One end of the interval is open, since one of the groups has too few visitors with a value to say how far it can be off.",
  );
});

it("tells on page one the quantile of each group, and names the sources of the method", async () => {
  const { html, json } = await rendered;
  // Ranks of n 400: 200 -+ 1.96 x 10, 180 and 220; of n 420: 210 -+ 1.96 x 10.25, 189 and 231. -0.8 -+ sqrt(0.2^2 + 0.21^2)
  expect(textOf(sectionOf(html, "decision"))).toContain(
    "Wait for the fares: of visitors with a value the median was 2.190 s with \u201ccalendar\u201d and 2.990 s with \u201clist\u201d, 0.80 s lower (95% interval: 1.09 to 0.51 s lower).",
  );
  const methods = textOf(sectionOf(html, "methods"));
  expect(methods).toMatch(/Quantiles .*Conover 1999/);
  // Nothing here is a mean, so no method for means is named.
  expect(methods).not.toMatch(/Neyman 1923|Fieller 1954|Welch 1947/);
  expect(textOf(sectionOf(html, "power"))).toContain(
    "For Wait for the fares no size is computed, since it is a quantile.",
  );
  expect(json.effects[0]).toMatchObject({
    summary: "quantile",
    zone: "worthwhile",
    difference: { estimate: -0.8, standardError: null, low: -1.09, high: -0.51, z: null, method: "quantile" },
    power: { detectable: null, unitsForWorthwhile: null },
    normality: null,
  });
});
