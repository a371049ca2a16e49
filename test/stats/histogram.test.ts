import { expect, it } from "vitest";
import { histogram } from "../../src/stats/histogram.ts";

it("counts values into quarters from -5 to 5, a bin's left end its own, and what lies below and above", () => {
  const { from, width, counts, below, above } = histogram(
    Float64Array.from([-5.01, -5, -4.76, -4.75, 0, 0.1, 4.99, 5, 6, 1e300]),
  );
  expect([from, width, counts.length]).toEqual([-5, 0.25, 40]);
  expect([below, above]).toEqual([1, 3]);
  expect([counts[0], counts[1], counts[20], counts[39]]).toEqual([2, 1, 2, 1]);
  expect(counts.reduce((sum, n) => sum + n, 0)).toBe(6);
});
