import { describe, expect, it } from "vitest";
import { duplicates } from "../../src/checks/duplicates.ts";
import { rejected } from "../../src/checks/rejected.ts";
import { planOf, reductionOf, variantsOf } from "./make.ts";

const plan = planOf();
const ENROLLED = [5000, 5000];

describe("rejected rows", () => {
  // METHODS 7: over 0.1% caution, over 1% fails. Over is exact: 10 of 10,000 is not over.
  it.each([
    [0, "pass"],
    [10, "pass"],
    [11, "caution"],
    [100, "caution"],
    [101, "fail"],
  ])("%d of 10,000 is a %s", (rows, result) => {
    const found = rejected(plan, reductionOf(plan, { rowsRead: 10_000, rows: { rejected: rows } }));
    expect(found?.result).toBe(result);
    expect(found?.figures).toEqual({ rows, share: rows / 10_000 });
  });

  // R 4.2.2: chisq.test(matrix(c(20, n, 4980, 5000 - n), 2, byrow = TRUE), correct = FALSE)$p.value prints
  // 0.01310442044, 0.009604010428, 0.00132277349, 0.0009340233339.
  it.each([
    [39, "pass", 0.01310442044],
    [40, "caution", 0.009604010428],
    [46, "caution", 0.00132277349],
    [47, "fail", 0.0009340233339],
  ])("of 20 against %d visitors in two arms of 5,000 are a %s", (other, result, p) => {
    const found = rejected(plan, reductionOf(plan, { enrolled: ENROLLED, facts: { withRejected: [20, other] } }));
    expect(found?.result).toBe(result);
    expect(found?.parts[1]?.result).toBe(result);
    expect(found?.parts[1]?.figures.p).toBeCloseTo(p, 10);
    expect(found?.parts[1]?.figures.units).toEqual({ list: 20, calendar: other });
  });

  // R 4.2.2: fisher.test of the same table with 0 against 7, 8 and 9 (expected counts under 5) prints 0.01559220063,
  // 0.007790639222, 0.00389220086; with 1 of 9,000 against 4 of 1,000 0.0004576627994. With 0 against 10 the expected
  // count is 5, so the chi-square counts: 0.001556916762.
  it.each([
    [ENROLLED, [0, 7], "pass", 0.01559220063],
    [ENROLLED, [0, 8], "caution", 0.007790639222],
    [ENROLLED, [0, 9], "caution", 0.00389220086],
    [ENROLLED, [0, 10], "caution", 0.001556916762],
    [[9000, 1000], [1, 4], "fail", 0.0004576627994],
  ])("uses Fisher's exact test where few are expected: %j, %j", (enrolled, withRejected, result, p) => {
    const found = rejected(plan, reductionOf(plan, { enrolled, facts: { withRejected } }));
    expect(found?.parts[1]?.result).toBe(result);
    expect(found?.parts[1]?.figures.p).toBeCloseTo(p, 10);
  });

  it("compares three arms at once", () => {
    const three = planOf({ variants: variantsOf({ list: 1, calendar: 1, map: 1 }) });
    const shape = { enrolled: [5000, 5000, 5000], facts: { withRejected: [20, 20, 50] } };
    // R 4.2.2: chisq.test(matrix(c(20, 20, 50, 4980, 4980, 4950), 2, byrow = TRUE), correct = FALSE): p-value = 4.274e-05
    expect(rejected(three, reductionOf(three, shape))?.parts[1]?.figures.p).toBeCloseTo(4.274e-5, 8);
  });

  it("has no second part where arms cannot be compared", () => {
    for (const shape of [{ enrolled: [500, 0], facts: { withRejected: [3, 0] } }, { enrolled: [500, 500] }]) {
      expect(rejected(plan, reductionOf(plan, shape))?.parts).toHaveLength(1);
    }
  });

  it("names the commonest reasons and where to look", () => {
    const found = rejected(
      plan,
      reductionOf(plan, {
        rows: { rejected: 101 },
        rejectReasons: [
          { reason: "no unit", rows: 100 }, // what the plan calls a visitor
          { reason: "no readable time", rows: 1 },
        ],
      }),
    );
    expect(found?.sentence).toBe(
      "101 rows of 10,000 (1.0%) could not be used, most often: no visitor (100 rows) and no readable time (1 row).",
    );
    expect(found?.remedy).toContain("rejects.csv");
  });
});

describe("duplicates", () => {
  it.each([
    [0, "pass", false],
    [10, "pass", false],
    [11, "caution", false],
    [100, "caution", false],
    [101, "caution", true],
  ])("%d of 10,000 rows are a %s, strong: %s", (rows, result, strong) => {
    const shape = { rowsRead: 10_000, rows: { duplicate: rows }, facts: { duplicateIds: rows } };
    const found = duplicates(plan, reductionOf(plan, shape));
    expect([found?.result, found?.strong]).toEqual([result, strong]);
    expect(found?.figures).toMatchObject({ rows, share: rows / 10_000, ids: rows });
  });

  it.each([
    [39, "pass"],
    [40, "caution"],
    [400, "caution"],
  ])("of 20 against %d visitors in two arms of 5,000 are a %s, and never fail", (other, result) => {
    const found = duplicates(plan, reductionOf(plan, { enrolled: ENROLLED, facts: { withDuplicate: [20, other] } }));
    expect([found?.result, found?.strong]).toEqual([result, false]);
  });

  it("cautions for a single copy that differs, or that belongs to another unit", () => {
    const shape = (facts: object) =>
      reductionOf(plan, { rows: { duplicate: 3 }, facts: { duplicateIds: 3, ...facts } });
    expect(duplicates(plan, shape({}))?.result).toBe("pass");
    const differ = duplicates(plan, shape({ copiesThatDiffer: 3 }));
    expect(differ?.result).toBe("caution");
    expect(differ?.sentence).toBe("3 event-ids came more than once with different content; the first was counted.");
    const others = duplicates(plan, shape({ copiesOfOtherUnits: 1 }));
    expect(others?.sentence).toBe("1 event-id came from more than one visitor; the first was counted.");
    expect(others?.result).toBe("caution");
  });

  it("lets a strong caution speak before a plain one", () => {
    const facts = { duplicateIds: 101, copiesThatDiffer: 3 };
    const found = duplicates(plan, reductionOf(plan, { rows: { duplicate: 101 }, facts }));
    expect(found?.strong).toBe(true);
    expect(found?.sentence).toContain("101 rows of 10,000 (1.0%)");
    expect(found?.parts.map((part) => part.result)).toEqual(["caution", "caution"]);
  });

  it("is left out where no row has an event-id", () => {
    expect(duplicates(plan, reductionOf(plan, { facts: { hasEventId: false } }))).toBeNull();
  });
});
