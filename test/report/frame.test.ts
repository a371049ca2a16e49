import { expect, it } from "vitest";
import { draw } from "../../src/report/charts/draw.ts";
import { framed } from "../../src/report/charts/frame.ts";

// "100,000" at the end of the axis was cut after "100,0".
it("keeps the last number of an axis inside the drawing", async () => {
  const x = { low: 0, high: 100_000, ticks: [0, 50_000, 100_000] };
  const y = { low: -1, high: 1, ticks: [0] };
  const spec = framed(x, y, { xTitle: "units", xLabel: (n) => n.toLocaleString("en-GB"), yLabel: String }, []);
  const { svg } = await draw(spec, "axis", null);
  const [, , width = 0] = (/viewBox="([^"]*)"/.exec(svg)?.[1] ?? "").split(" ").map(Number);
  const place = /translate\(([\d.]+),[\d.]+\)"[^>]*>100,000</.exec(svg)?.[1];
  // seven letters of 12 pixels are some 44 wide
  expect(Number(place) + 22).toBeLessThanOrEqual(width);
});
