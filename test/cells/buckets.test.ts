import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { bucketNumbers, bucketPairs, bucketSums, withoutX } from "../../src/cells/index.ts";
import { cellTable, pairTables, scoreTable, type Unit } from "./tables.ts";

const value = fc.integer({ min: -1000, max: 100_000 }).map((n) => n / 100);
const unit = fc.tuple(fc.nat(2), fc.nat(1023), value);
const pair = fc.tuple(fc.nat(1), fc.constantFrom(0, 3, 1023), value, fc.option(value));

// Nine digits: the doubles here are taken from the pivot by subtraction, which the cells are not.
describe("sums by bucket", () => {
  it("are n, the sum and the sum of squares of the units of each bucket, and 0 where there are none", () => {
    fc.assert(
      fc.property(fc.array(unit, { minLength: 1, maxLength: 30 }), (units) => {
        const table = cellTable(units);
        const found = bucketSums(table, 4);
        expect(found).toHaveLength(4);
        for (const [v, { n, s1, s2 }] of found.entries()) {
          expect([n.length, s1.length, s2.length]).toEqual([1024, 1024, 1024]);
          for (const bucket of [0, 17, 1023, ...units.map(([, b]) => b)]) {
            const us = heldBy(units, v, bucket).map((x) => (x - Number(table.pivot)) / table.scale);
            expect(n[bucket]).toBe(us.length);
            expect(s1[bucket]).toBeCloseTo(total(us), 9);
            expect(s2[bucket]).toBeCloseTo(total(us.map((u) => u * u)), 9);
          }
        }
      }),
    );
  });

  it("take scores as they are", () => {
    const table = scoreTable([
      [0, 5, -0.75],
      [0, 5, 0.5],
      [1, 5, 3],
    ]);
    const [first] = bucketSums(table, 2);
    expect((first?.s1[5] ?? 0) * table.scale).toBeCloseTo(-0.25, 14);
    expect((first?.s2[5] ?? 0) * table.scale ** 2).toBeCloseTo(0.8125, 14);
  });

  it("refuse a bucket that there is not: it is our mistake", () => {
    expect(() => bucketSums(cellTable([[0, 1024, 1]]), 1)).toThrow("1024");
  });

  it("of pairs are those of the two values and of their products, a missing x put where the caller says", () => {
    fc.assert(
      fc.property(fc.array(pair, { minLength: 1, maxLength: 30 }), (units) => {
        const { of, joint } = pairTables(units);
        const [pivot, scale] = [Number(joint.pivots[1]), joint.scales[1]];
        const missing = 0.375;
        const all = bucketSums(of, 2);
        for (const [v, own] of bucketPairs(joint, 2).entries()) {
          const filled = withoutX(all[v] ?? raise(), own, missing);
          for (const bucket of [0, 3, 1023]) {
            const held = units.filter(([variant, b]) => variant === v && b === bucket);
            const us = held.map(([, , y]) => (y - Number(of.pivot)) / of.scale);
            const ws = held.map(([, , , x]) => (x === null ? missing : (x - pivot) / scale));
            expect(filled.n[bucket]).toBe(held.length);
            expect(filled.y[bucket]).toBeCloseTo(total(us), 9);
            expect(filled.x[bucket]).toBeCloseTo(total(ws), 9);
            expect(filled.yy[bucket]).toBeCloseTo(total(us.map((u) => u * u)), 9);
            expect(filled.yx[bucket]).toBeCloseTo(total(us.map((u, i) => u * (ws[i] ?? 0))), 9);
            expect(filled.xx[bucket]).toBeCloseTo(total(ws.map((w) => w * w)), 9);
          }
        }
      }),
    );
  });

  it("are told apart by whole numbers that know no order of the cells", () => {
    const units: Unit[] = [
      [0, 9, 1],
      [1, 2, 5],
      [0, 2, 3],
    ];
    const numbers = (of: readonly Unit[]) => {
      const table = cellTable(of);
      return bucketNumbers(table, [table.n, table.high1], 2);
    };
    expect(numbers(units.toReversed())).toEqual(numbers(units));
    expect(numbers([...units.slice(0, 2), [0, 3, 3]])).not.toEqual(numbers(units));
  });
});

function heldBy(units: readonly Unit[], variant: number, bucket: number): number[] {
  return units.filter(([v, b]) => v === variant && b === bucket).map(([, , x]) => x);
}
function total(values: readonly number[]): number {
  return values.reduce((sum, x) => sum + x, 0);
}
function raise(): never {
  throw new Error("no sums");
}
