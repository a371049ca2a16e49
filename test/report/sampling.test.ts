import { describe, expect, it } from "vitest";
import type { Effect } from "../../src/decision/index.ts";
import { draw } from "../../src/report/charts/draw.ts";
import { sampling } from "../../src/report/charts/sampling.ts";
import { renderReport } from "../../src/report/index.ts";
import { histogram } from "../../src/stats/histogram.ts";
import { isNotDrawn } from "../../src/stats/index.ts";
import { undecidable } from "./cases.ts";
import { farAndCorrected, farFromNormal } from "./drawn.ts";
import { sectionOf, textOf } from "./markup.ts";

const label = (value: number) => String(value);
/** 340 wide, from -5 to 5. */
const place = (t: number) => 34 * (t + 5);

/** 100 values, of which 10 lie in the bin from -2.25 and 5 in the one from 2. */
const drawnValues = histogram(
  Float64Array.from([...Array(10).fill(-2.2), ...Array(40).fill(-0.3), ...Array(45).fill(0.3), ...Array(5).fill(2.1)]),
);
const row = { label: "at full size", histogram: drawnValues, below: "10.0% below", above: "5.0% above" };

describe("the drawing of drawn distributions", () => {
  it("marks the critical values and writes what lies beyond them", async () => {
    const { svg } = await draw(sampling([row], 1.96, label), "s", null);
    const uprights = [...svg.matchAll(/<line transform="translate\(([\d.]+),17\)" x2="0"/g)].map(([, x]) => Number(x));
    expect(uprights).toEqual([expect.closeTo(place(-1.96), 1), expect.closeTo(place(1.96), 1)]);
    const texts = [...svg.matchAll(/<text [^>]*>([^<]*)</g)].map(([, text]) => text);
    expect(texts).toEqual(expect.arrayContaining(["-1.96", "1.96", "at full size", "10.0% below", "5.0% above", "0"]));
  });

  it("darkens the outline beyond them, cut at them, and nothing between", async () => {
    const { svg } = await draw(sampling([row], 1.96, label), "s", null);
    const areas = [...svg.matchAll(/<path d="([^"]*)" fill="currentColor" opacity="0.6"/g)].map(([, d = ""]) =>
      [...d.matchAll(/[ML](-?[\d.]+),/g)].map(([, x]) => Number(x)),
    );
    expect(areas).toHaveLength(2);
    const [left = [], right = []] = areas;
    expect([Math.min(...left), Math.max(...left)]).toEqual([0, expect.closeTo(place(-1.96), 1)]);
    expect([Math.min(...right), Math.max(...right)]).toEqual([expect.closeTo(place(1.96), 1), 340]);
  });

  it("stands one below the other, over one axis", async () => {
    const { svg } = await draw(sampling([row, { ...row, label: "at 1/4" }], 2.5, label), "s", null);
    const heights = ["at full size", "at 1/4"].map((text) =>
      Number(new RegExp(`translate\\(0,([\\d.]+)\\)[^>]*>${text}<`).exec(svg)?.[1]),
    );
    expect((heights[1] ?? 0) - (heights[0] ?? 0)).toBe(78);
    expect(svg.match(/>4</g)).toHaveLength(1);
  });
});

describe("section 5 on the normal approximation", async () => {
  const { html, json } = await renderReport(farFromNormal);
  const metrics = textOf(sectionOf(html, "metrics").concat(html.slice(html.indexOf('<section id="metrics"'))));
  const [booked, contacts] = farFromNormal.effects as [Effect, Effect, Effect];

  it("has one figure a contrast that was drawn, with a title, a text alternative and its numbers", () => {
    const figures = [...html.matchAll(/<section class="sampling wide".*?<\/section>/gs)].map(([figure]) => figure);
    expect(figures).toHaveLength(3);
    expect(figures.map((figure) => figure.includes("<svg"))).toEqual([true, true, false]);
    expect(textOf(figures[0] ?? "")).toContain(
      "\u201ccalendar\u201d against \u201clist\u201d: how near the normal curve",
    );
    const description = /<desc id="sampling-1-drawing-desc">([^<]*)</.exec(html)?.[1] ?? "";
    expect(description).toMatch(/^Beyond 1\.96 on either side lie, with 1\/16 of the visitors [\d.]+% below and/);
    expect(figures[0]).toContain("The numbers behind it");
  });

  it("lists as many draws as were made, at each size, and what the normal curve would have", () => {
    const [, table = ""] = /id="sampling-1-numbers">.*?<tbody>(.*?)<\/tbody>/s.exec(html) ?? [];
    const rows = [...table.matchAll(/<tr>(.*?)<\/tr>/gs)].map(([, cells = ""]) =>
      [...cells.matchAll(/<td class="number">([^<]*)</g)].slice(1).map(([, n = ""]) => Number(n.replace(",", ""))),
    );
    const sums = rows.reduce((all, cells) => all.map((sum, i) => sum + (cells[i] ?? 0)), [0, 0, 0, 0]);
    expect(sums.slice(0, 3)).toEqual([1000, 1000, 1000]);
    expect(sums[3]).toBeGreaterThan(990);
    expect(sums[3]).toBeLessThan(1000.5);
  });

  it("says tails, corrected interval and conclusion in words, and what was drawn and dealt", () => {
    expect(metrics).toMatch(
      /the nominal 2\.5% tails are about 2\.5% \(the interval wholly below the truth\) and 2\.6% \(wholly above\), near enough\. The corrected interval is [^;]* more, the same as the normal one to these digits; the conclusion stays\./,
    );
    const { bootstrap, randomisation } = booked.resampled ?? {};
    if (bootstrap === undefined || isNotDrawn(bootstrap) || randomisation === undefined || isNotDrawn(randomisation))
      throw new Error("nothing was drawn");
    const { low, high } = bootstrap;
    expect(metrics).toContain(
      `Bootstrap-t interval, from 1,000 draws of the groups\u2019 own values: ${(100 * low).toFixed(2)} to ${(100 * high).toFixed(2)} percentage points higher.`,
    );
    expect(metrics).toMatch(/Randomisation test, 1,000 deals: p = [\d.]+\./);
    expect(metrics).toContain("Nothing was drawn from the groups\u2019 values: one has fewer than 20 visitors.");
    expect(metrics).toContain("The corrected interval counts, ");
  });

  it("says from how many visitors on the tails are near, or that it cannot be told", () => {
    expect(metrics).toContain(
      "From about 36 visitors in all on, at least, both tails are within a fifth of the nominal one; here there were 100,301.",
    );
    expect(metrics).toContain(
      "From how many visitors on both tails are within a fifth of the nominal one cannot be told from these data.",
    );
    expect(metrics).toContain("No visitor holds more than 31.0% of a group\u2019s spread.");
  });

  it("gives report.json the worse tails, the corrected interval, the stricter rule of thumb and the larger share", () => {
    const [first, second, third] = json.effects.map(({ normality }) => normality);
    expect(first).toMatchObject({
      lowerTail: 0.0245,
      upperTail: 0.0256,
      unitsForTails: 36,
      unitsByRule: 277,
      largestShare: null,
    });
    expect(second).toMatchObject({ lowerTail: 0.071, unitsForTails: null, largestShare: 0.31 });
    expect(third?.skewCorrected.low).toBeCloseTo(farFromNormal.effects[2]?.normality?.corrected.low ?? 0, 9);
    expect(json.effects[2]?.difference.method).toBe("skew-corrected");
    expect(contacts.normality?.largest?.variant?.ofSquares).toBe(0.31);
  });

  it("names its methods and their sources", () => {
    const methods = textOf(html.slice(html.indexOf('<section id="methods"')));
    for (const name of ["Normal approximation", "Corrected interval", "Draws and deals", "One value"]) {
      expect(methods).toContain(name);
    }
    expect(methods).toContain("It counts, as the plan asks.");
  });
});

describe("page one", () => {
  it("tells, where tails are far off, how far, what the corrected interval is and that the conclusion stays", async () => {
    const { html } = await renderReport(farFromNormal);
    const first = textOf(sectionOf(html, "decision"));
    expect(first).toMatch(
      /what matters most: Support contacts: one visitor with .* holds 31\.0% of its group’s spread \(of the sum of squares about the mean\), so no interval for it can be relied on\. Support contacts: the nominal 2\.5% tails are about 7\.1% \(the interval wholly below the truth\) and 0\.40% \(wholly above\), off by more than half\. The corrected interval is 4\.1% fewer to 6\.0% more, the normal one 6\.1% fewer to 3\.9% more; the conclusion changes: by the corrected one, not settled\./,
    );
  });

  it("says once that the corrected interval counts", async () => {
    const { html } = await renderReport(farAndCorrected);
    const first = textOf(sectionOf(html, "decision"));
    expect(first).toContain(
      "off by more than half. The corrected interval counts, 4.1% fewer to 6.0% more, the normal one is",
    );
    expect(textOf(sectionOf(html, "trust"))).toContain("The corrected interval counts here.");
  });

  it("gives no corrected interval where nothing can be decided, and section 5 speaks of no conclusion", async () => {
    const { html } = await renderReport({
      ...farFromNormal,
      reduction: undecidable.reduction,
      conclusion: undecidable.conclusion,
    });
    expect(textOf(sectionOf(html, "decision"))).not.toContain("The corrected interval");
    const metrics = textOf(html.slice(html.indexOf('<section id="metrics"')));
    expect(metrics).toContain("The corrected interval is");
    expect(metrics).not.toMatch(/the conclusion (stays|changes)/);
  });
});

describe("section 5 at an early look", () => {
  const at = async (critical: number) => {
    const effects = farFromNormal.effects.map((effect) =>
      effect.normality === null ? effect : { ...effect, normality: { ...effect.normality, critical } },
    );
    const { html } = await renderReport({ ...farFromNormal, effects });
    return { text: textOf(html), drawings: html.match(/-drawing/g)?.length ?? 0 };
  };

  it("takes no interval from draws that do not reach its boundary, and draws none that it would leave", async () => {
    const near = await at(2.36);
    expect(near.text).toContain("Bootstrap-t interval, from 1,000 draws");
    const early = await at(4.33); // 1,000 draws would hold 0.01 beyond it
    expect(early.text).not.toContain("Bootstrap-t interval, from");
    expect(early.text).toContain(
      "No interval is taken from the 1,000 draws: this look\u2019s boundary lies farther out than they reach.",
    );
    expect(early.drawings).toBe(near.drawings);
    expect((await at(7.8)).drawings).toBe(0);
  });
});
