import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { bandCritical } from "../../src/stats/index.ts";
import { expectWithin } from "./expect.ts";

interface Case {
  readonly units: number;
  readonly alpha: number;
  readonly planned: number;
  readonly critical: string;
}
const CASES = JSON.parse(readFileSync(new URL("../reference/band.json", import.meta.url), "utf8")) as Case[];

describe("the half-width of the time-uniform band", () => {
  it.each(CASES)("at $units units, alpha $alpha, made for $planned, is where the mixture reaches 1 / alpha", (one) => {
    expectWithin(bandCritical(one.units, one), one.critical, 1e-13);
  });

  // r^2 is an approximation to the best: a hundredth beside it must be no better by more than a millionth.
  it.each([0.05, 0.01, 0.1])("is least, of all bands at alpha %f, at the number of units it is made for", (alpha) => {
    const at = (planned: number) => bandCritical(10_000, { alpha, planned });
    for (const factor of [0.5, 0.8, 0.99, 1.01, 1.25, 2])
      expect(at(10_000 * factor)).toBeGreaterThan(at(10_000) * (1 - 1e-3));
    expect(at(5_000)).toBeGreaterThan(at(10_000));
    expect(at(20_000)).toBeGreaterThan(at(10_000));
  });

  it("is wider than the interval of one moment, and grows without end as the logarithm's root", () => {
    const at = (units: number) => bandCritical(units, { alpha: 0.05, planned: 1_000 });
    expect(at(1_000)).toBeGreaterThan(1.96);
    expect(at(1e12)).toBeGreaterThan(at(1e6));
    expect(at(1e12)).toBeLessThan(Math.sqrt(Math.log(1e12) + 20));
  });
});
