import { describe, expect, it } from "vitest";
import { beyond, shape } from "../../src/cells/index.ts";
import type { SizeTable } from "../../src/engine/types.ts";

const table: SizeTable = {
  variant: [0, 0, 0, 0, 1, 0, 0],
  sign: [-1, 0, 1, 1, 1, 1, 1],
  quarter: [-4, null, 0, 4, 4, 7, 11],
  units: [2, 10, 3, 5, 99, 7, 1],
};

describe("the shape of an arm's values", () => {
  it("has each size between its edges, from below 0 upwards, and 0 apart", () => {
    // quarter -4 is [0.5, 0.625), 0 is [1, 1.25), 4 is [2, 2.5), 7 is [3.5, 4), 11 is [7, 8)
    expect(shape(table, 0, false)).toEqual({
      units: 28,
      zero: 10,
      bins: [
        { from: -0.625, to: -0.5, units: 2 },
        { from: 1, to: 1.25, units: 3 },
        { from: 2, to: 2.5, units: 5 },
        { from: 3.5, to: 4, units: 7 },
        { from: 7, to: 8, units: 1 },
      ],
    });
  });

  it("gives each whole number up to 7 a bin of its own", () => {
    const { bins } = shape(table, 0, true);
    expect(bins.filter(({ from }) => from > 0)).toEqual([
      { from: 1, to: 2, units: 3 },
      { from: 2, to: 3, units: 5 },
      { from: 3, to: 4, units: 7 },
      { from: 7, to: 8, units: 1 },
    ]);
  });

  it("counts what lies beyond an edge, on either side of 0", () => {
    const own = shape(table, 0, false);
    expect([beyond(own, 1), beyond(own, 2), beyond(own, 8), beyond(own, -0.5), beyond(own, -1)]).toEqual([
      16, 13, 0, 2, 0,
    ]);
  });

  it("is empty for an arm without a unit", () => {
    expect(shape(table, 2, false)).toEqual({ units: 0, zero: 0, bins: [] });
  });
});
