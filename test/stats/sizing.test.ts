import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  type Ahead,
  dunnettCritical,
  enrolmentDays,
  meanVariances,
  normalCritical,
  powerWith,
  shareVariances,
  sizing,
} from "../../src/stats/index.ts";
import { expectWithin } from "./expect.ts";
import { power as fromR } from "./reference.ts";

/** Units of one arm of two alike, before rounding up: the total of a million times the precision, over a million. */
function perArm(variances: Ahead["variances"], distance: number, alpha: number, power: number): number {
  const found = sizing({ variances, allocation: [1, 1], distance: distance / 1000, alpha, power });
  return (found.units[0] ?? Number.NaN) / 1e6;
}

describe("units for a test to come", () => {
  // Chow, Shao and Wang 2008, p. 89: 0.85 against 0.65 at 5% and 80%, 70 in each arm; p. 59: a difference of 5% at a
  // standard deviation of 10%, 63 in each arm. The first as quoted by sample-size pages that cite it, the second from memory.
  it("are those of the printed examples", () => {
    const shares = sizing({
      variances: shareVariances(0.65, 0.2, 1),
      allocation: [1, 1],
      distance: 0.2,
      alpha: 0.05,
      power: 0.8,
    });
    expect(shares.units).toEqual([70, 70]);
    expect(shares.total).toBe(140);
    const means = sizing({
      variances: meanVariances(0.1, 1),
      allocation: [1, 1],
      distance: 0.05,
      alpha: 0.05,
      power: 0.8,
    });
    expect(means.units).toEqual([63, 63]);
  });

  // R pools the standard error under no difference, ours does not: with V = p1 q1 + p2 q2 and d = p2 - p1 the pooled
  // variance is V + d^2 / 2, so R's n is ((z_a sqrt(V + d^2 / 2) + z_b sqrt V) / d)^2, and nothing else differs.
  it.each(fromR().shares)(
    "differ from power.prop.test by the pooled standard error only, $control to $variant",
    (row) => {
      const d = row.variant - row.control;
      const found = perArm(shareVariances(row.control, d, 1), Math.abs(d), row.alpha, row.power);
      const v = row.control * (1 - row.control) + row.variant * (1 - row.variant);
      const [za, both] = [normalCritical(row.alpha), Math.sqrt((found * d * d) / v)];
      expectWithin(((za * Math.sqrt(v + (d * d) / 2) + (both - za) * Math.sqrt(v)) / d) ** 2, row.n, 1e-5);
      expect(Number(row.n)).toBeGreaterThan(found);
      // ... which is about z_a (z_a + z_b) / 2 units an arm: under 3 at 5% and 80%.
      expect(Number(row.n) - found).toBeLessThan((za * both) / 2 + (za * d) ** 2 / v);
    },
  );

  // R takes Student's t. Guenther 1981, The American Statistician 35, 243-244: z(1 - alpha/2)^2 / 4 units more in each arm.
  it.each(fromR().means)("differ from power.t.test by the one unit that t costs, $delta at $sd", (row) => {
    const found = perArm(meanVariances(row.sd, 1), row.delta, row.alpha, row.power);
    const more = Number(row.n) - found;
    expect(more).toBeGreaterThan(0);
    expect(Math.abs(more - normalCritical(row.alpha) ** 2 / 4)).toBeLessThan(0.1);
  });

  it("have the power asked for with the difference supposed, in the variant that needs most", () => {
    const positive = fc.double({ min: 0.1, max: 10, noNaN: true });
    fc.assert(
      fc.property(
        fc.array(fc.tuple(positive, positive), { minLength: 2, maxLength: 5 }),
        fc.double({ min: 0.01, max: 0.1, noNaN: true }),
        fc.double({ min: 0.3, max: 0.99, noNaN: true }),
        (arms, distance, power) => {
          const [variances, allocation] = [
            arms.map(([v]) => v) as unknown as Ahead["variances"],
            arms.map(([, a]) => a),
          ];
          const { critical, units, total } = sizing({ variances, allocation, distance, alpha: 0.05, power });
          const powers = units.slice(1).map((n, i) => {
            const standardError = Math.sqrt((variances[0] ?? 0) / (units[0] ?? 0) + (variances[i + 1] ?? 0) / n);
            return powerWith({ units: total, critical, standardError, distance }, total);
          });
          // Rounding up gives an arm at most one unit too many.
          expect(Math.min(...powers)).toBeGreaterThanOrEqual(power - 1e-9);
          expect(Math.min(...powers)).toBeLessThan(power + 0.05);
          expect(total).toBe(units.reduce((a, b) => a + b));
        },
      ),
    );
  });

  it("of several variants are held at Dunnett's critical value, from the shares planned", () => {
    const found = sizing({
      variances: meanVariances(1, 2),
      allocation: [2, 1, 1],
      distance: 0.1,
      alpha: 0.05,
      power: 0.8,
    });
    // v_c = 1 / (1/2), v_i = 1 / (1/4): lambda^2 = 2 / (4 + 2).
    const critical = dunnettCritical([Math.sqrt(1 / 3), Math.sqrt(1 / 3)], 0.05);
    expectWithin(found.critical, critical, 1e-12);
    const needed = ((critical + 0.8416212335729143) / 0.1) ** 2 * 6;
    expect(found.units).toEqual([Math.ceil(needed / 2), Math.ceil(needed / 4), Math.ceil(needed / 4)]);
  });

  it("ask for the same whatever number the shares add up to", () => {
    const with_ = (allocation: number[]) =>
      sizing({ variances: meanVariances(3, 1), allocation, distance: 0.2, alpha: 0.05, power: 0.9 }).units;
    expect(with_([90, 10])).toEqual(with_([0.9, 0.1]));
  });

  // rpact 3.3.4: an inflation of 1.02472 for five looks of the O'Brien-Fleming type at 5% and 80%
  it("are more with planned looks by what these cost, alpha shared out evenly over the variants", () => {
    const ahead = { allocation: [1, 1], distance: 0.001, alpha: 0.05, power: 0.8 };
    const looks = { shares: [0.2, 0.4, 0.6, 0.8, 1], spending: "obrien-fleming", isLast: true } as const;
    const [alone, with_] = [undefined, looks].map(
      (planned) =>
        sizing({ ...ahead, variances: meanVariances(1, 1), ...(planned === undefined ? {} : { looks: planned }) })
          .total,
    );
    expectWithin((with_ ?? 0) / (alone ?? 1), 1.02472, 5e-6);
    const two = sizing({ ...ahead, allocation: [1, 1, 1], variances: meanVariances(1, 2), looks });
    const half = sizing({ ...ahead, alpha: 0.025, variances: meanVariances(1, 1), looks });
    expect([two.critical, two.units[0]]).toEqual([half.critical, half.units[0]]);
  });

  it("are never under two in an arm, for one alone has no spread", () => {
    const variances = meanVariances(1, 1);
    expect(sizing({ variances, allocation: [1, 9], distance: 1e9, alpha: 0.05, power: 0.8 }).units).toEqual([2, 2]);
  });

  it("take as many whole days as they need", () => {
    expect(enrolmentDays(1000, 100)).toBe(10);
    expect(enrolmentDays(1001, 100)).toBe(11);
  });

  it("refuse a share beyond 1, and shares that are not one an arm", () => {
    expect(() => shareVariances(0.9, 0.2, 1)).toThrow("0.9 cannot move by 0.2");
    expect(() =>
      sizing({ variances: meanVariances(1, 1), allocation: [1], distance: 1, alpha: 0.05, power: 0.8 }),
    ).toThrow("1 shares for 2 arms");
  });
});
