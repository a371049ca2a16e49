import { existsSync, readdirSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { draw } from "../../src/report/charts/draw.ts";
import { type ForestRow, forestAxis, forestScale, forestStrip } from "../../src/report/charts/forest.ts";
import { lineStyle } from "../../src/report/charts/theme.ts";

const row = (low: number | null, estimate: number, high: number | null, over: Partial<ForestRow> = {}): ForestRow => ({
  relative: { estimate, low, high },
  mark: 0.05,
  decides: true,
  style: lineStyle(0, 1),
  ...over,
});

/** Where an x of the axis lies on a drawing 300 wide. */
const place = (x: number, axis: { low: number; high: number }) => (300 * (x - axis.low)) / (axis.high - axis.low);

describe("the axis of the forest plot", () => {
  it("holds zero, every end, estimate and mark of the rows that decide, with room at both sides", () => {
    const axis = forestAxis([row(0.065, 0.1, 0.137), row(-0.06, -0.012, 0.038)]);
    expect(axis.low).toBeLessThan(-0.06);
    expect(axis.high).toBeGreaterThan(0.137);
    expect(axis.ticks).toEqual([-0.05, 0, 0.05, 0.1]);
  });

  it("is stretched by a row for information to no more than twice what the others need", () => {
    const axis = forestAxis([row(-0.1, 0, 0.1), row(-9, 0, 9, { decides: false })]);
    expect(axis.low).toBeCloseTo(-0.1 - 0.1 - 0.05 * 0.4, 10);
    expect(axis.high).toBeCloseTo(0.1 + 0.1 + 0.05 * 0.4, 10);
  });

  it("has ticks of round numbers, three to eight of them, for any size of effect", () => {
    for (const size of [1e-6, 3e-4, 0.011, 0.07, 0.5, 2, 47, 1e5]) {
      const { ticks, low, high } = forestAxis([row(-size / 3, size / 2, size, { mark: null })]);
      expect(ticks.length).toBeGreaterThanOrEqual(3);
      expect(ticks.length).toBeLessThanOrEqual(8);
      expect(ticks).toContain(0);
      for (const tick of ticks) expect(tick >= low && tick <= high).toBe(true);
    }
  });

  it("stands even where nothing is known but a point at zero", () => {
    const axis = forestAxis([row(null, 0, null, { mark: null })]);
    expect(axis.high).toBeGreaterThan(axis.low);
    expect(forestAxis([]).high).toBeGreaterThan(forestAxis([]).low);
  });
});

describe("a row of the forest plot", () => {
  it("draws interval, estimate, zero and mark where they belong", async () => {
    const axis = { low: -0.1, high: 0.2, ticks: [0] };
    const { svg } = await draw(forestStrip(row(0.065, 0.1, 0.137), axis), "f", null);
    const lines = [...svg.matchAll(/<line transform="translate\(([-\d.]+),([-\d.]+)\)" x2="([-\d.]+)"/g)].map((m) =>
      m.slice(1).map(Number),
    );
    expect(lines.map(([x]) => x)).toEqual([0, 0.05, 0.065].map((x) => expect.closeTo(place(x, axis), 1)));
    const interval = lines[2] ?? [];
    expect(interval[2]).toBeCloseTo(place(0.137, axis) - place(0.065, axis), 1);
    expect(svg).toMatch(/<path transform="translate\(200,200\)" d="M-4,-4h8v8h-8Z" fill="currentColor"/);
  });

  it("runs to the frame where an end has no limit or lies beyond it, and leaves out a square beyond it", async () => {
    const axis = { low: -0.1, high: 0.2, ticks: [0] };
    const open = (await draw(forestStrip(row(0.05, 0.1, null, { mark: null }), axis), "f", null)).svg;
    expect(open).toContain('<line transform="translate(150,200)" x2="150"');
    const beyond = (await draw(forestStrip(row(0.5, 0.7, 0.9, { mark: null }), axis), "f", null)).svg;
    expect(beyond).toContain('<line transform="translate(294,200)" x2="6"');
    expect(beyond).not.toContain("v8h-8Z");
  });

  it("holds no colour of its own: ink, or a custom property of the style sheet", async () => {
    const axis = forestAxis([row(-0.1, 0, 0.1)]);
    const specs = [
      forestStrip(row(-0.1, 0, 0.1, { style: lineStyle(1, 3) }), axis),
      forestStrip(null, axis),
      forestScale(axis, String),
    ];
    for (const spec of specs) {
      const { svg } = await draw(spec, "f", null);
      const colours = [...svg.matchAll(/(?:fill|stroke)="([^"]*)"/g)].map((match) => match[1]);
      for (const colour of colours) expect(colour).toMatch(/^(none|currentColor|transparent|var\(--[a-z0-9-]+\))$/);
    }
  });

  it("tells several variants apart by their dashes before colour, and a lone one by nothing", () => {
    const styles = [0, 1, 2, 3].map((i) => lineStyle(i, 4));
    expect(new Set(styles.map(({ dash }) => dash.join())).size).toBe(4);
    expect(new Set(styles.map(({ fill }) => fill)).size).toBe(4);
    expect(lineStyle(0, 1).fill).toBe("currentColor");
  });
});

describe("a drawing", () => {
  const axis = forestAxis([row(-0.1, 0, 0.1)]);

  it("repeats to the byte, in whatever order drawings are made", async () => {
    const spec = () => forestStrip(row(-0.1, 0.02, 0.1), axis);
    const first = await draw(spec(), "a", null);
    await draw(forestScale(axis, String), "b", null);
    expect(await draw(spec(), "a", null)).toEqual(first);
  });

  it("of which several are made at once comes out as if alone", async () => {
    const alone = await draw(forestStrip(row(-0.1, 0.02, 0.1), axis), "a", null);
    const [one, two] = await Promise.all([
      draw(forestStrip(row(-0.1, 0.02, 0.1), axis), "a", null),
      draw(forestStrip(row(-0.1, 0.02, 0.1), axis), "a", null),
    ]);
    expect([one, two]).toEqual([alone, alone]);
  });

  it("is refused when it compiles with a warning", async () => {
    const spec = {
      data: { values: [] },
      mark: "bar",
      encoding: { x: { field: "a", type: "quantitative", scale: { type: "nonsense" } } },
    };
    await expect(draw(spec as never, "a", null)).rejects.toThrow("does not compile");
  });

  it("escapes its words, names them to a screen reader, and is hidden from it where words stand beside it", async () => {
    const { svg } = await draw(
      forestScale(axis, () => "<b>&"),
      "axis",
      { title: "<i>", description: "a & b" },
    );
    expect(svg).toContain('role="img" aria-labelledby="axis-title axis-desc"');
    expect(svg).toContain('<title id="axis-title">&lt;i&gt;</title><desc id="axis-desc">a &amp; b</desc>');
    expect(svg).toContain("&lt;b&gt;&amp;</text>");
    expect(svg).not.toContain("<b>");
    expect((await draw(forestStrip(null, axis), "z", null)).svg).toContain('aria-hidden="true"');
  });

  it("counts its ids from one copy of vega-scenegraph: a second one would make them differ from run to run", () => {
    const modules = new URL("../../node_modules/", import.meta.url);
    const copies = readdirSync(modules).filter((name) =>
      existsSync(new URL(`${name}/node_modules/vega-scenegraph`, modules)),
    );
    expect(copies).toEqual([]);
    expect(existsSync(new URL("vega-scenegraph", modules))).toBe(true);
  });
});
