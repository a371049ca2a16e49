import { describe, expect, it } from "vitest";
import { armsAlike } from "../../src/checks/arms.ts";
import { groupsAlike, groupsOff } from "../../src/checks/groups.ts";
import { planOf } from "./make.ts";

// R 4.2.2, chisq.test(correct = FALSE) of the tables as pooled here by hand
describe("groups of units that split alike", () => {
  it("pool those with an expected count under 5", () => {
    const found = groupsAlike([
      [500, 500],
      [300, 360],
      [4, 4],
      [3, 5],
      [2, 3],
    ]);
    expect(found?.df).toBe(2);
    expect(found?.p).toBeCloseTo(0.1714458, 7);
  });
  it("add what is still too small to the smallest of the others", () => {
    const found = groupsAlike([
      [500, 500],
      [300, 360],
      [4, 4],
    ]);
    expect(found?.df).toBe(1);
    expect(found?.p).toBeCloseTo(0.0720744, 7);
  });
  it("leave out an arm and a group without units", () => {
    const two = groupsAlike([
      [500, 500, 0],
      [300, 360, 0],
      [0, 0, 0],
    ]);
    expect(two?.df).toBe(1);
  });
  it.each([
    ["one group", [[500, 400]]],
    [
      "one arm",
      [
        [500, 0],
        [20, 0],
      ],
    ],
    [
      "only small ones",
      [
        [1, 2],
        [2, 1],
      ],
    ],
    ["none", []],
  ] as const)("say nothing of %s", (_, groups) => {
    expect(groupsAlike(groups)).toBeNull();
  });
});

describe("the groups that are off", () => {
  it("are those that do not split as planned", () => {
    expect(
      groupsOff(planOf(), [
        [500, 500],
        [500, 350],
        [2, 0],
        [480, 520],
      ]),
    ).toEqual([1]);
  });
  it("are, where none is by itself, the one that departs most", () => {
    expect(
      groupsOff(planOf(), [
        [500, 500],
        [500, 460],
        [440, 500],
      ]),
    ).toEqual([2]);
  });
});

// R 4.2.2: fisher.test of each arm against the two others, the smallest p times 3: 0, 0 and 5 of 5,000 0.0123292225,
// 6 0.004107000092, 8 0.0004555423618; fisher.test is exact where the chi-square of 6 would say 0.0025
describe("three arms of which few have a property", () => {
  it.each([
    [5, 0.0123292225],
    [6, 0.004107000092],
    [8, 0.0004555423618],
  ])("none, none and %i of 5,000 have the p of Fisher's tests", (n, p) => {
    expect(armsAlike([0, 0, n], [5000, 5000, 5000])).toBeCloseTo(p, 10);
  });
  it("are alike where all have as many", () => {
    expect(armsAlike([1, 1, 1], [5000, 5000, 5000])).toBe(1);
  });
});
