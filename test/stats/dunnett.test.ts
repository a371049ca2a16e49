import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  bonferroniCritical,
  bonferroniP,
  criticalOfSimultaneous,
  dunnettCritical,
  dunnettP,
  normalCritical,
  normalTwoSided,
  pOfSimultaneous,
} from "../../src/stats/index.ts";
import { expectPrinted, expectWithin } from "./expect.ts";
import { dunnett, dunnettByMvtnorm } from "./reference.ts";

/** lambda of arms of one size: correlation 1/2. */
const HALF = Math.SQRT1_2;
const equal = (k: number) => Array<number>(k).fill(HALF);
const lambda = fc.double({ min: 0, max: 1, noNaN: true });
const lambdas = fc.array(lambda, { minLength: 2, maxLength: 6 });

describe("Dunnett's tail", () => {
  // mpmath 1.3.0, test/reference/dunnett.py. METHODS 8 asks for 1e-12 of a plain tail; here ten digits at least.
  it.each(dunnett().tails)("beyond %f for lambdas %j keeps eleven digits", (z, of, p) => {
    expectWithin(dunnettP(z, of), p, 1e-11);
    expect(dunnettP(-z, of)).toBe(dunnettP(z, of));
  });

  // R 4.2.2 with mvtnorm 1.1-3, test/reference/dunnett.R: the rectangle probability by Miwa's recursion, no such integral.
  it.each(dunnettByMvtnorm())("agrees with the multivariate normal beyond $z for lambdas $lambdas", (row) => {
    // Against 30 digits the integral is off by 1e-14 where the recursion is by 4e-12 and, near lambda 1, 5e-11.
    expect(Math.abs(dunnettP(row.z, row.lambdas) - Number(row.p))).toBeLessThan(1e-11 + 8 * Number(row.off));
  });

  it("of one variant is the normal's, to the last bit", () => {
    for (const z of [0, 0.3, 1.96, -2.5, 37, 50]) expect(dunnettP(z, [HALF])).toBe(normalTwoSided(z));
    expect(dunnettCritical([HALF], 0.05)).toBe(normalCritical(0.05));
  });

  // Independent Z: 1 - (1 - p)^k (Sidak 1967, JASA 62, 626-633). One and the same Z: p.
  it("is Sidak's without a common part and the normal's where all is common, however far out", () => {
    for (const z of [0.01, 1, 3, 8.3, 20, 37]) {
      const p = normalTwoSided(z);
      expectWithin(dunnettP(z, [0, 0, 0]), -Math.expm1(3 * Math.log1p(-p)), 1e-12);
      expectWithin(dunnettP(z, [1, 1, 1]), p, 1e-12);
    }
  });

  it("lies between the normal's and both Sidak's and Bonferroni's, falls with z, and is blind to the order of variants", () => {
    fc.assert(
      fc.property(lambdas, fc.double({ min: 0.01, max: 37, noNaN: true }), (of, z) => {
        const [p, found] = [normalTwoSided(z), dunnettP(z, of)];
        expect(found).toBeGreaterThanOrEqual(p);
        expect(found).toBeLessThanOrEqual(-Math.expm1(of.length * Math.log1p(-p)) * (1 + 1e-11)); // Sidak 1967
        expect(found).toBeLessThanOrEqual(bonferroniP(p, of.length));
        expect(dunnettP(z * 1.01, of)).toBeLessThan(found);
        expectWithin(dunnettP(z, [...of].reverse()), found, 1e-11);
      }),
    );
  });

  it("takes a control far better known than the variants, and far worse, and none of both", () => {
    for (const near of [1 - 1e-4, 1 - 1e-8, 1 - 1e-12]) {
      // Nearly one Z: above the normal's tail by no more than the spread s of the rest allows.
      const found = dunnettP(3, [near, near]) / normalTwoSided(3);
      expect(found).toBeGreaterThan(1);
      expect(found).toBeLessThan(1 + 4 * Math.sqrt(2 * (1 - near)));
    }
    expectWithin(dunnettP(3, [1e-9, 1e-9]), dunnettP(3, [0, 0]), 1e-12);
    expect(dunnettP(0, [0.5, 0.5])).toBe(1);
    expect(dunnettP(1e-9, [0.5, 0.5])).toBeLessThanOrEqual(1);
    expect(dunnettP(60, [0.5, 0.5])).toBe(0);
  });

  it("refuses to compare nothing", () => {
    expect(() => dunnettP(2, [])).toThrow("no variant");
  });
});

describe("Dunnett's critical value", () => {
  // Dunnett 1964, Biometrics 20, 482-491, tables II and III, two-sided, infinite degrees of freedom; quoted from memory.
  // At 0.01 the table has 2.92 for three; to 16 digits it is 2.914999294 (dunnett.py), so the table's last place is one up.
  it.each([
    [0.05, ["2.21", "2.35", "2.44", "2.51", "2.57", "2.61", "2.65", "2.69"]],
    [0.01, ["2.79", "2.91", "3.00", "3.06", "3.11", "3.15", "3.19", "3.22"]],
  ] as const)("at %f for two to nine variants of one size is the one in Dunnett's table", (alpha, printed) => {
    printed.forEach((value, i) => {
      expectPrinted(dunnettCritical(equal(i + 2), alpha), value);
    });
  });

  it.each(dunnett().critical)("at %f for lambdas %j has eleven digits", (alpha, of, critical) => {
    expectWithin(dunnettCritical(of, alpha), critical, 1e-11);
  });

  it("has the tail that was asked for, between the normal's and Bonferroni's", () => {
    fc.assert(
      fc.property(lambdas, fc.double({ min: 1e-9, max: 0.9, noNaN: true }), (of, alpha) => {
        const critical = dunnettCritical(of, alpha);
        expect(critical).toBeGreaterThanOrEqual(normalCritical(alpha));
        expect(critical).toBeLessThanOrEqual(bonferroniCritical(alpha, of.length));
        expectWithin(dunnettP(critical, of), alpha, 1e-10);
      }),
    );
  });
});

describe("intervals of several variants at once", () => {
  it("take lambda from the variances of the levels", () => {
    // v_c 1, v_i 1, 3 and 0.5: lambda^2 1/2, 1/4 and 2/3.
    const of = [Math.sqrt(1 / 2), Math.sqrt(1 / 4), Math.sqrt(2 / 3)];
    expectWithin(criticalOfSimultaneous(1, [1, 3, 0.5], 0.05), dunnettCritical(of, 0.05), 1e-12);
    expect(criticalOfSimultaneous(4, [9], 0.05)).toBe(normalCritical(0.05));
  });

  it("are Bonferroni's where a level has no variance", () => {
    for (const [c, ts] of [
      [0, [1, 1]],
      [1, [0, 2]],
      [0, [0, 0]],
    ] as const) {
      expect(criticalOfSimultaneous(c, ts, 0.05)).toBe(bonferroniCritical(0.05, 2));
      expect(pOfSimultaneous(0.01, c, ts)).toBe(0.02);
    }
  });

  it("exclude 0 exactly when the adjusted p is under alpha", () => {
    const v = fc.double({ min: 1e-6, max: 1e6, noNaN: true });
    fc.assert(
      fc.property(
        v,
        fc.array(v, { minLength: 1, maxLength: 4 }),
        fc.double({ min: 0.1, max: 6, noNaN: true }),
        (c, ts, z) => {
          const critical = criticalOfSimultaneous(c, ts, 0.05);
          fc.pre(Math.abs(z / critical - 1) > 1e-9);
          expect(pOfSimultaneous(normalTwoSided(z), c, ts) < 0.05).toBe(z > critical);
        },
      ),
    );
  });

  it("leave one variant's p as it is, and the ends of p where they are", () => {
    expect(pOfSimultaneous(0.0123, 1, [2])).toBe(0.0123);
    expect(pOfSimultaneous(1, 1, [2, 2])).toBe(1);
    expect(pOfSimultaneous(0, 1, [2, 2])).toBe(0);
    expectWithin(pOfSimultaneous(1e-300, 1, [1, 1]), 2e-300, 1e-6);
  });
});
