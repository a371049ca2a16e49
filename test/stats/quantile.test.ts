import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { moved } from "../../src/stats/order-statistics.ts";
import { expectFinite, expectPrinted, expectWithin } from "./expect.ts";
import { compared, nano } from "./ordered.ts";
import { quantiles } from "./reference.ts";

/** Hours of 16 tubes in rising order: Conover 1999, 3.2, example 1; from memory. */
const TUBES = [46.9, 47.2, 49.1, 56.5, 56.8, 59.2, 59.9, 63.2, 63.3, 63.4, 63.7, 64.1, 67.1, 67.7, 73.3, 78.5];

describe("the interval of one arm", () => {
  // Conover's 90% interval of the upper quartile: X(9) = 63.3 to X(15) = 73.3, exactly 0.9094 (R 4.2.2: 0.909393603913).
  // Against an arm that is all at 0 the difference's interval is that of the arm alone.
  it("is Conover's for the upper quartile of his tubes", () => {
    const found = compared(Array<number>(1000).fill(0), TUBES, "0.75", 0.1);
    expect(found).toMatchObject({ variant: 64.1, control: 0 });
    expectPrinted(found.difference.low, "63.3");
    expectPrinted(found.difference.high, "73.3");
  });
});

describe("what two arms can move together", () => {
  // Zou's interval of two correlations, the same square-and-add: the documentation of R's cocor, cocor.indep.groups(r1.jk =
  // .6, r2.hm = .8, n1 = 20, n2 = 25), prints -0.6005 0.1055 for r1 - r2. The limits of each are Fisher's.
  it("is the root of the sum of squares, as in a published example", () => {
    const limit = (r: number, n: number, side: number) =>
      Math.tanh(Math.atanh(r) + (side * 1.959964) / Math.sqrt(n - 3));
    const [l1, u1, l2, u2] = [limit(0.6, 20, -1), limit(0.6, 20, 1), limit(0.8, 25, -1), limit(0.8, 25, 1)];
    expectPrinted(-0.2 - moved(nano(0.6) - nano(l1), nano(u2) - nano(0.8), nano(-0.2)), "-0.6005");
    expectPrinted(-0.2 + moved(nano(u1) - nano(0.6), nano(0.8) - nano(l2), nano(-0.2)), "0.1055");
  });
});

describe("the contrast of a quantile", () => {
  it.each(quantiles())("agrees with R on $name at $q", (row) => {
    const found = compared(row.control, row.variant, row.q, row.alpha);
    expectWithin(found.control, row.ofControl, 1e-15);
    expectWithin(found.variant, row.ofVariant, 1e-15);
    for (const end of ["low", "high"] as const) {
      if (row[end] === null) expect(found.difference[end]).toBeNull();
      else expectWithin(found.difference[end], row[end], 1e-13);
    }
    // R walks over rounded steps, so its z is off by a few units of the last place.
    expectWithin(found.difference.p, row.p, 1e-12);
    if (row.relative === null || "absent" in found.relative) {
      expect([row.relative, "absent" in found.relative]).toEqual([null, true]);
      return;
    }
    for (const part of ["estimate", "low", "high"] as const) {
      const expected = row.relative[part];
      if (expected === null) expect(found.relative[part]).toBeNull();
      // R finds the ratio by a root and takes 1 away.
      else expect(Math.abs((found.relative[part] ?? Number.NaN) - Number(expected))).toBeLessThan(1e-9);
    }
  });

  const values = (max: number) =>
    fc.oneof(
      fc.array(fc.integer({ min: 0, max: 6 }), { minLength: 1, maxLength: max }),
      fc.array(
        fc.integer({ min: -300, max: 3000 }).map((x) => x / 100),
        { minLength: 1, maxLength: max },
      ),
    );
  const drawn = [values(90), values(60), fc.constantFrom("0.5", "0.9", "0.25", "0.123")] as const;
  const alphas = fc.double({ min: 1e-4, max: 0.9, noNaN: true });

  it("gives interval, relative interval and p that agree about 0", () => {
    fc.assert(
      fc.property(...drawn, alphas, (control, variant, q, alpha) => {
        const { difference, relative, why } = compared(control, variant, q, alpha);
        fc.pre(why?.absent !== "no-width");
        const { low, high, p } = difference;
        expect(p).not.toBeNull();
        const excludes = (low !== null && low > 0) || (high !== null && high < 0);
        // At alpha = p itself z comes and goes through a rounding.
        if (Math.abs((p ?? 0) - alpha) > 1e-9) expect(excludes).toBe((p ?? 1) < alpha);
        if ("absent" in relative) return;
        if (relative.low !== null && low !== null) expect(signOf(relative.low)).toBe(signOf(low));
        if (relative.high !== null && high !== null) expect(signOf(relative.high)).toBe(signOf(high));
        expect(relative.low ?? -Infinity).toBeLessThanOrEqual(relative.estimate + 1e-12);
        expect(relative.high ?? Infinity).toBeGreaterThanOrEqual(relative.estimate - 1e-12);
      }),
      { numRuns: 1000 },
    );
  });

  it("turns round when the arms change places", () => {
    fc.assert(
      fc.property(...drawn, alphas, (a, b, q, alpha) => {
        const [there, back] = [compared(a, b, q, alpha).difference, compared(b, a, q, alpha).difference];
        const turned = (end: number | null) => (end === null ? null : 0 - end);
        expect({ ...back, estimate: turned(back.estimate), low: turned(back.high), high: turned(back.low) }).toEqual({
          ...there,
          estimate: turned(turned(there.estimate)),
          low: turned(turned(there.low)),
          high: turned(turned(there.high)),
        });
      }),
    );
  });

  it("moves with a shift and stretches with a scale, p with neither", () => {
    fc.assert(
      fc.property(...drawn, fc.integer({ min: -50, max: 50 }), (a, b, q, by) => {
        const [plain, shifted] = [
          compared(a, b, q, 0.05),
          compared(
            a.map((x) => x + by),
            b.map((x) => x + by),
            q,
            0.05,
          ),
        ];
        const stretched = compared(
          a.map((x) => x * 4),
          b.map((x) => x * 4),
          q,
          0.05,
        );
        for (const end of ["estimate", "low", "high"] as const) {
          const there = plain.difference[end];
          expect(shifted.difference[end] === null).toBe(there === null);
          expect(Math.abs((shifted.difference[end] ?? 0) - (there ?? 0))).toBeLessThan(1e-12);
          expect(Math.abs((stretched.difference[end] ?? 0) - 4 * (there ?? 0))).toBeLessThan(1e-12);
        }
        expect(shifted.difference.p).toBe(plain.difference.p);
        expect(stretched.difference.p).toBe(plain.difference.p);
      }),
    );
  });

  it("holds nothing that is not a number, whatever the values", () => {
    fc.assert(
      fc.property(...drawn, alphas, fc.constantFrom(1, 1e-9, 1e8), (a, b, q, alpha, unit) => {
        const scaled = (xs: readonly number[]) => xs.map((x) => Math.round(x * 100) * unit);
        const { rounds, ...found } = compared(scaled(a), scaled(b), q, alpha);
        expectFinite(found);
        expect(found.difference).toMatchObject({ standardError: null, z: null, method: "quantile" });
      }),
      { numRuns: 500 },
    );
  });
});

/** -1, 0 or 1; of -0 too. */
function signOf(value: number): number {
  return value === 0 ? 0 : Math.sign(value);
}
