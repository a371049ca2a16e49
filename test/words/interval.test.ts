import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  endInWords,
  endSize,
  estimateInWords,
  estimateSize,
  HIGHER,
  intervalInWords,
  intervalSizes,
  MORE,
  type Scale,
  signedEstimate,
  signedInterval,
} from "../../src/words/index.ts";

const PERCENT: Scale = { kind: "percent" };
const KRONER: Scale = { kind: "amount", unit: "kr" };
const POINTS: Scale = { kind: "points" };
const gain = { estimate: 0.1, low: 0.065, high: 0.137 };
const either = { estimate: -0.012, low: -0.06, high: 0.038 };
const loss = { estimate: -0.061, low: -0.094, high: -0.027 };

// The sentences of the product's own first pages.
describe("an interval in signs", () => {
  it("has a sign at every number", () => {
    expect(signedEstimate(gain, PERCENT)).toBe("+10.0%");
    expect(signedInterval(gain, PERCENT)).toBe("+6.5% to +13.7%");
    expect(signedInterval(either, PERCENT)).toBe("−6.0% to +3.8%");
  });

  it("names the unit of measure once", () => {
    expect(signedInterval({ estimate: 7.5, low: 2.41, high: 12.6 }, KRONER)).toBe("+2.4 to +12.6 kr");
    expect(signedEstimate({ estimate: 7.5, low: 2.41, high: 12.6 }, KRONER)).toBe("+7.5 kr");
    expect(signedInterval({ estimate: 0.012, low: 0.008, high: 0.016 }, POINTS)).toBe(
      "+0.80 to +1.60 percentage points",
    );
  });

  it("says where an end has no limit", () => {
    expect(signedInterval({ ...gain, high: null }, PERCENT)).toBe("+6.5% and up");
    expect(signedInterval({ ...gain, low: null }, PERCENT)).toBe("no lower limit to +13.7%");
    expect(signedInterval({ ...gain, low: null, high: null }, PERCENT)).toBe("no interval");
  });
});

describe("an interval in words", () => {
  it.each([
    [gain, "6.5% to 13.7% more", "10.0% more"],
    [either, "6.0% fewer to 3.8% more", "1.2% fewer"],
    [loss, "9.4% to 2.7% fewer", "6.1% fewer"],
    [{ estimate: 0, low: -0.01, high: 0.01 }, "1.0% fewer to 1.0% more", "no difference"],
    [{ estimate: 0, low: 0, high: 0 }, "no difference", "no difference"],
    [{ estimate: 0.1, low: 0.065, high: null }, "at least 6.5% more", "10.0% more"],
    [{ estimate: 0.1, low: null, high: 0.137 }, "any amount fewer to 13.7% more", "10.0% more"],
    [{ estimate: -0.1, low: null, high: -0.027 }, "at least 2.7% fewer", "10.0% fewer"],
    [{ estimate: -0.1, low: -0.12, high: null }, "12.0% fewer to any amount more", "10.0% fewer"],
  ])("%j", (interval, whole, estimate) => {
    expect(intervalInWords(interval, PERCENT, MORE)).toBe(whole);
    expect(estimateInWords(interval, PERCENT, MORE)).toBe(estimate);
  });

  it("says higher and lower of an amount", () => {
    const fares = { estimate: -2, low: -4.2, high: 0.3 };
    expect(intervalInWords(fares, KRONER, HIGHER)).toBe("4.2 kr lower to 0.3 kr higher");
    expect(estimateSize(fares, KRONER)).toBe("2.0 kr");
    expect(endInWords(fares, "high", KRONER, HIGHER)).toBe("0.3 kr higher");
    expect(endSize(fares, "low", KRONER)).toBe("4.2 kr");
    expect(endSize({ ...fares, high: null }, "high", KRONER)).toBeNull();
    expect(signedInterval({ estimate: 12, low: 8, high: 16 }, { kind: "amount", unit: null, places: 0 })).toBe(
      "+8 to +16",
    );
    expect(endInWords({ ...fares, low: null }, "low", KRONER, HIGHER)).toBeNull();
  });
});

describe("the sizes of an interval", () => {
  it("stand alone where the whole interval is on one side", () => {
    expect(intervalSizes({ estimate: -0.031, low: -0.05, high: -0.012 }, PERCENT)).toBe("5.0% to 1.2%");
    expect(intervalSizes({ estimate: 14, low: 8, high: 20 }, KRONER)).toBe("8.0 to 20.0 kr");
    expect(intervalSizes(either, PERCENT)).toBeNull();
    expect(intervalSizes({ ...gain, high: null }, PERCENT)).toBeNull();
  });
});

describe("the digits of an interval", () => {
  it("grow until an end that is above zero does not read as zero", () => {
    expect(intervalInWords({ estimate: 0.02, low: 0.0001, high: 0.04 }, PERCENT, MORE)).toBe("0.01% to 4.00% more");
    expect(signedInterval({ estimate: 0.02, low: -0.0001, high: 0.04 }, PERCENT)).toBe("−0.01% to +4.00%");
  });

  it("grow until an end on one side of what was asked for does not read as equal to it", () => {
    const nearly = { estimate: 0.08, low: 0.0499, high: 0.11 };
    expect(signedInterval(nearly, PERCENT)).toBe("+5.0% to +11.0%");
    expect(signedInterval(nearly, PERCENT, [0.05])).toBe("+4.99% to +11.00%");
    expect(signedEstimate(nearly, PERCENT, [0.05])).toBe("+8.00%");
  });

  it("follow the width, so that a narrow interval keeps its ends apart", () => {
    expect(signedInterval({ estimate: 0.001, low: 0.0008, high: 0.0012 }, PERCENT)).toBe("+0.080% to +0.120%");
    expect(signedInterval({ estimate: 3, low: -40, high: 46 }, PERCENT)).toBe("−4,000% to +4,600%");
  });

  it("keep low, estimate and high in order and on their sides of zero for any interval", () => {
    const size = fc.double({ min: 1e-4, max: 10, noNaN: true });
    fc.assert(
      fc.property(fc.double({ min: -5, max: 5, noNaN: true }), size, size, (estimate, down, up) => {
        const interval = { estimate, low: estimate - down, high: estimate + up };
        const [low = 0, high = 0] = signedInterval(interval, PERCENT).split(" to ").map(read);
        const middle = read(signedEstimate(interval, PERCENT));
        expect(low).toBeLessThan(high);
        expect(low).toBeLessThanOrEqual(middle);
        expect(middle).toBeLessThanOrEqual(high);
        if (Math.abs(interval.low) > 1e-6) expect(Math.sign(low)).toBe(Math.sign(interval.low));
        if (Math.abs(interval.high) > 1e-6) expect(Math.sign(high)).toBe(Math.sign(interval.high));
      }),
    );
  });
});

function read(text: string): number {
  return Number(text.replace("−", "-").replace(/[%+,]/g, ""));
}
