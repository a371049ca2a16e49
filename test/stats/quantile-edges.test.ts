import { describe, expect, it } from "vitest";
import { answeredLater, normalCritical, quantileContrast } from "../../src/stats/index.ts";
import { expectPrinted, expectWithin } from "./expect.ts";
import { compared } from "./ordered.ts";

/** A hundred units of which so many have the first value and the rest the second: at q 0.5, ranks 40, 50 and 60. */
const hundred = (first: number, units: number, second: number) => [
  ...Array<number>(units).fill(first),
  ...Array<number>(100 - units).fill(second),
];

describe("an interval at its edges", () => {
  // 5, 12 and 13 millionths: by doubles alone the root of the squares is 1.3000000000000001e-5, and 0 would lie inside.
  it("that ends at just 0 does so for the difference and the relative difference", () => {
    const found = compared(hundred(1, 55, 1.000012), hundred(1.000008, 45, 1.000013), "0.5", 0.05);
    expect(found.difference).toMatchObject({ estimate: 0.000013, low: 0 });
    expect(found.relative).toMatchObject({ low: 0 });
    // Beyond z = 1 both ranks have stepped. R 4.2.2: 2 * pnorm(-1).
    expectWithin(found.difference.p, 0.317310507862914, 1e-14);
  });

  it("is the estimate where neither arm can move that way", () => {
    const equal = compared(hundred(1, 45, 3), hundred(3, 40, 3), "0.5", 0.05);
    expect(equal.difference).toMatchObject({ estimate: 0, low: 0, high: 2, p: 1 });
    expect(equal.relative).toMatchObject({ estimate: 0, low: 0 });
    const apart = compared(hundred(2, 45, 4), hundred(3, 40, 3), "0.5", 0.05);
    expect(apart.difference).toMatchObject({ estimate: -1, low: -1, high: 1 });
    expect(apart.relative).toMatchObject({ estimate: -0.25, low: -0.25 });
  });

  it("is a whole loss where the variant can be at 0, however wide the control", () => {
    for (const doubled of [1, 1.5, 2, 2.5, 7]) {
      const found = compared(hundred(1, 55, doubled), hundred(0, 55, 5), "0.5", 0.05);
      expect(found.relative).toMatchObject({ estimate: -1, low: -1 });
      const owing = compared(hundred(1, 55, doubled), hundred(-5, 45, 0), "0.5", 0.05);
      expect(owing.relative).toMatchObject({ estimate: -1, high: -1 });
      // r c + 1 = |r| (u_c - c), by the definition with c = 1: r = -1 / u_c.
      const below = compared(hundred(1, 55, doubled), hundred(-5, 45, -1), "0.5", 0.05);
      expectWithin("absent" in below.relative ? null : below.relative.high, -1 / doubled - 1, 1e-14);
    }
  });

  // The smallest and largest r with |Q_t - r Q_c| just within the root, by the definition; r below 0 turns the control round.
  it("crosses to a loss of more than all where the variant can be below 0", () => {
    const found = compared(hundred(2, 45, 4), hundred(-3, 45, 5), "0.5", 0.05);
    expect(found).toMatchObject({ control: 4, variant: 5 });
    if ("absent" in found.relative) throw new Error(found.relative.absent);
    const r = 1 + (found.relative.low ?? Number.NaN);
    expect(r).toBeLessThan(0);
    // l_t = -3; at r below 0 the control's lower half counts, 4 - l_c.
    expectWithin(5 - r * 4, Math.sqrt(8 ** 2 + (r * (4 - 2)) ** 2), 1e-14);
  });
});

describe("a contrast of quantiles that lacks something", () => {
  it("has no interval where neither arm has a width, however far apart they are", () => {
    const found = compared(Array<number>(500).fill(0), Array<number>(400).fill(1), "0.5", 0.05);
    expect(found).toMatchObject({
      control: 0,
      variant: 1,
      why: { absent: "no-width" },
      relative: { absent: "no-width" },
    });
    expect(found.difference).toMatchObject({ estimate: 1, low: null, high: null, p: null });
  });

  it("is one arm's interval where only the other has a width", () => {
    const spread = Array.from({ length: 100 }, (_, i) => i);
    const found = compared(Array<number>(500).fill(10), spread, "0.5", 0.05);
    // n 100, q 0.5: ranks 50 - 9.8 and 50 + 9.8, so 40 and 60, of 0..99.
    expect(found.difference).toMatchObject({ estimate: 39, low: 29, high: 49 });
    expect(found.why).toBeNull();
  });

  it("has open ends where an arm is too small, and says so when both are", () => {
    const spread = Array.from({ length: 100 }, (_, i) => i + 1);
    expect(compared(spread, [5], "0.5", 0.05)).toMatchObject({
      why: { absent: "few-for-rank" },
      difference: { estimate: -45, low: null, high: null },
      relative: { estimate: -0.9, low: null, high: null },
    });
    // n 20, q 0.9: 18 - 2.6 and 18 + 2.6, so only the lower rank exists.
    const one = compared(spread, spread.slice(0, 20), "0.9", 0.05);
    expect(one.why).toBeNull();
    expect(one.difference.high).toBeNull();
    expect(one.difference.low).not.toBeNull();
    expect(compared([5], spread, "0.5", 0.05).relative).toEqual({ absent: "few-for-rank" });
  });

  it("has no relative difference where the control is not clearly above 0", () => {
    const zeros = [...Array<number>(60).fill(0), ...Array<number>(60).fill(2)];
    const spread = Array.from({ length: 100 }, (_, i) => i + 1);
    expect(compared(zeros, spread, "0.5", 0.05).relative).toEqual({ absent: "control-near-zero" });
    expect(compared(zeros, spread, "0.55", 0.05).relative).toEqual({ absent: "control-near-zero" });
    expect(
      compared(
        spread.map((x) => -x),
        spread,
        "0.5",
        0.05,
      ).relative,
    ).toEqual({ absent: "control-near-zero" });
    // A lower end of 10^-9 beside a level of a billion leaves nothing to divide by.
    const wide = [...Array<number>(50).fill(1e-9), ...Array<number>(60).fill(1e9)];
    expect(compared(wide, spread, "0.5", 0.05).relative).toEqual({ absent: "control-near-zero" });
  });

  it("has nothing without units", () => {
    const nothing = { estimate: null, low: null, high: null, p: null };
    expect(compared([], [1, 2], "0.5", 0.05)).toMatchObject({
      control: null,
      variant: 1,
      difference: nothing,
      relative: { absent: "no-units" },
      why: { absent: "no-units" },
    });
    expect(compared([], [], "0.5", 0.05)).toMatchObject({ control: null, variant: null, rounds: [] });
  });

  it("has p 1 for equal quantiles, and 0 where no double holds it", () => {
    expect(compared([1, 2, 3], [2, 2, 5], "0.5", 0.05).difference.p).toBe(1);
    const many = Array.from({ length: 20_000 }, (_, i) => i / 100_000);
    expect(
      compared(
        many,
        many.map((x) => x + 10),
        "0.5",
        0.05,
      ).difference.p,
    ).toBe(0);
  });
});

describe("the search for the values", () => {
  const units = { control: 2_000_000_000, variant: 1_000_000_000 };
  const ask = (q: string) => quantileContrast(units, q, normalCritical(0.05));

  it("asks few rounds and never twice, even of billions of units", async () => {
    const seen = new Set<string>();
    let rounds = 0;
    const answer = (arm: "control" | "variant", by: bigint) => (rank: number) => {
      expect(rank >= 1 && rank <= units[arm]).toBe(true);
      expect(seen.has(`${arm} ${rank}`)).toBe(false);
      seen.add(`${arm} ${rank}`);
      return BigInt(rank) * by;
    };
    const found = await answeredLater(ask("0.5"), async (asked) => {
      rounds++;
      expect(asked.control.length + asked.variant.length).toBeGreaterThan(0);
      expect([...asked.control]).toEqual([...asked.control].sort((a, b) => a - b));
      return { control: asked.control.map(answer("control", 1n)), variant: asked.variant.map(answer("variant", 2n)) };
    });
    expect(rounds).toBeLessThanOrEqual(8);
    // Q at rank n / 2 in both: 10^9 of 10^-9 against 10^9 of the same.
    expect(found.difference).toMatchObject({ estimate: 0, p: 1 });
  });

  it("finds p where the ends meet 0, to the last rank", async () => {
    let rounds = 0;
    const found = await answeredLater(ask("0.5"), async (asked) => {
      rounds++;
      return {
        control: asked.control.map((rank) => BigInt(rank)),
        variant: asked.variant.map((rank) => 2n * BigInt(rank) + 50_000n),
      };
    });
    expect(rounds).toBeLessThanOrEqual(8);
    // h_c = sqrt(2e9) / 2, h_t = sqrt(1e9) / 2: the ends move by z h_c and 2 z h_t, at 50,000 z^2 (h_c^2 + 4 h_t^2) = 50,000^2.
    const z = 50_000 / Math.sqrt(2e9 / 4 + 1e9);
    expectPrinted(found.difference.estimate, "0.00005");
    // R 4.2.2: 2 * pnorm(-50000 / sqrt(1.5e9)); a step of one rank is 3e-5 of z.
    expect(z).toBeCloseTo(1.2909944, 6);
    expectWithin(found.difference.p, 0.196705602, 1e-4);
  });

  it("refuses an answer of the wrong length", async () => {
    await expect(answeredLater(ask("0.5"), async () => ({ control: [], variant: [] }))).rejects.toThrow(
      "0 values for 3 ranks",
    );
  });
});
