import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { gainZone, guardrailZone, placed } from "../../src/decision/zones.ts";
import type { Metric } from "../../src/plan/types.ts";
import { metricOf } from "../checks/make.ts";
import { contrastOf, type Ends, unmeasurable, withoutRelative } from "./make.ts";

const end = fc.oneof(fc.constantFrom(null, 0, 0.05, -0.05), fc.double({ min: -0.2, max: 0.2, noNaN: true }));
const ends = fc
  .tuple(end, end)
  .map(([a, b]) => (a !== null && b !== null && a > b ? { low: b, high: a } : { low: a, high: b }));
const size = fc.constantFrom(0, 0.05, 0.1);

describe("the zones of a primary", () => {
  // METHODS 2, each line read alone; the first that holds is the zone.
  it.each([
    [{ low: 0.051, high: 0.2 }, 0.05, "worthwhile"],
    [{ low: 0.05, high: 0.2 }, 0.05, "better"],
    [{ low: -0.2, high: -0.001 }, 0.05, "worse"],
    [{ low: -0.2, high: -0.001 }, 0, "worse"],
    [{ low: 0.001, high: 0.049 }, 0.05, "too-small"],
    [{ low: 0.001, high: 0.05 }, 0.05, "better"],
    [{ low: 0.001, high: 0.049 }, 0, "better"],
    [{ low: 0, high: 0.049 }, 0.05, "no-worthwhile-gain"],
    [{ low: -0.2, high: 0 }, 0.05, "no-worthwhile-gain"],
    [{ low: 0, high: 0.05 }, 0.05, "not-settled"],
    [{ low: -0.2, high: 0 }, 0, "not-settled"],
    [{ low: 0, high: 0 }, 0, "not-settled"],
    [{ low: null, high: null }, 0.05, "not-settled"],
    [{ low: 0.06, high: null }, 0.05, "worthwhile"],
    [{ low: 0.01, high: null }, 0.05, "better"],
    [{ low: null, high: 0.04 }, 0.05, "no-worthwhile-gain"],
    [{ low: null, high: -0.01 }, 0.05, "worse"],
  ])("%j against %d is %s", (interval, w, zone) => expect(gainZone(interval, w)).toBe(zone));

  it("leave no interval without a zone and none with two", () => {
    fc.assert(
      fc.property(ends, size, ({ low, high }, w) => {
        const [lowest, highest] = [low ?? Number.NEGATIVE_INFINITY, high ?? Number.POSITIVE_INFINITY];
        const gains = low !== null && lowest > 0;
        const underW = high !== null && highest < w;
        const loses = high !== null && highest < 0;
        const overW = low !== null && lowest > w;
        const holding = [
          w > 0 && overW ? "worthwhile" : null,
          loses ? "worse" : null,
          w > 0 && gains && underW ? "too-small" : null,
          gains && !(w > 0 && (overW || underW)) ? "better" : null,
          w > 0 && !gains && !loses && underW ? "no-worthwhile-gain" : null,
          !gains && !loses && !(w > 0 && underW) ? "not-settled" : null,
        ].filter((zone) => zone !== null);
        expect(holding).toEqual([gainZone({ low, high }, w)]);
      }),
    );
  });
});

describe("the zones of a guardrail", () => {
  it.each([
    [{ low: -0.049, high: 0.1 }, "within"],
    [{ low: -0.05, high: 0.1 }, "not-settled"],
    [{ low: -0.04, high: -0.01 }, "within"],
    [{ low: -0.2, high: -0.051 }, "beyond"],
    [{ low: -0.2, high: -0.05 }, "not-settled"],
    [{ low: null, high: -0.06 }, "beyond"],
    [{ low: -0.01, high: null }, "within"],
    [{ low: null, high: null }, "not-settled"],
  ])("%j against a margin of 0.05 is %s", (interval, zone) => expect(guardrailZone(interval, 0.05)).toBe(zone));

  it("look at the harm side only", () => {
    fc.assert(
      fc.property(ends, ends, ({ low }, other) => {
        fc.pre(low !== null && low > -0.05);
        expect(guardrailZone({ low, high: other.high }, 0.05)).toBe("within");
      }),
    );
  });
});

const ROLES: readonly Partial<Metric>[] = [
  { role: "primary", worthwhile: { kind: "relative", value: 0.05 } },
  { role: "primary", worthwhile: { kind: "absolute", value: 0.006 } },
  { role: "primary" },
  { role: "guardrail", margin: { kind: "relative", value: 0.05 } },
  { role: "guardrail", margin: { kind: "absolute", value: 0.006 } },
  { role: "secondary" },
];
const roles = fc.constantFrom(...ROLES);

describe("the place of a contrast", () => {
  it("is the same for a gain where higher is good and the mirrored one where lower is good", () => {
    const estimate = fc.double({ min: -0.2, max: 0.2, noNaN: true });
    fc.assert(
      fc.property(ends, estimate, roles, ({ low, high }, middle, role) => {
        const mirrored: Ends = [high === null ? null : -high, -middle, low === null ? null : -low];
        const up = placed(metricOf({ name: "m", ...role, goodIs: "higher" }), contrastOf(0.12, [low, middle, high]));
        const down = placed(metricOf({ name: "m", ...role, goodIs: "lower" }), contrastOf(0.12, mirrored));
        expect(down).toEqual(up);
      }),
    );
  });

  it("holds a relative rule against the relative interval and an absolute one against the difference", () => {
    // the difference is 0.12 times the relative interval: a gain of 6% to 14% is 0.0072 to 0.0168
    const contrast = contrastOf(0.12, [0.06, 0.1, 0.14]);
    const zone = (worthwhile: Metric["worthwhile"]) =>
      placed(metricOf({ name: "m", role: "primary", worthwhile }), contrast).zone;
    expect(zone({ kind: "relative", value: 0.05 })).toBe("worthwhile");
    expect(zone({ kind: "relative", value: 0.15 })).toBe("too-small");
    expect(zone({ kind: "absolute", value: 0.05 })).toBe("too-small");
    expect(zone({ kind: "absolute", value: 0.007 })).toBe("worthwhile");
    expect(zone(null)).toBe("better");
  });

  it("is not settled for a relative rule without a relative interval, however clear the difference", () => {
    const clear = withoutRelative(contrastOf(0.12, [-0.3, -0.2, -0.1]));
    for (const role of ROLES) {
      const zone = placed(metricOf({ name: "m", ...role }), clear).zone;
      const relative = role.worthwhile?.kind === "relative" || role.margin?.kind === "relative";
      expect(zone === "not-settled", JSON.stringify(role)).toBe(relative);
    }
  });

  it("gives a secondary metric the zones of a primary without a worthwhile effect", () => {
    fc.assert(
      fc.property(ends, ({ low, high }) => {
        const contrast = contrastOf(0.12, [low, 0, high]);
        const secondary = placed(metricOf({ name: "m", worthwhile: { kind: "relative", value: 0.05 } }), contrast);
        expect(secondary).toEqual(placed(metricOf({ name: "m", role: "primary" }), contrast));
      }),
    );
  });

  it("says either way only when a worthwhile loss is excluded too", () => {
    const primary = metricOf({ name: "m", role: "primary", worthwhile: { kind: "relative", value: 0.05 } });
    expect(placed(primary, contrastOf(0.12, [-0.049, 0, 0.04]))).toEqual({
      zone: "no-worthwhile-gain",
      eitherWay: true,
    });
    expect(placed(primary, contrastOf(0.12, [-0.05, 0, 0.04]))).toEqual({
      zone: "no-worthwhile-gain",
      eitherWay: false,
    });
    expect(placed(primary, contrastOf(0.12, [null, 0, 0.04])).eitherWay).toBe(false);
    expect(placed(primary, contrastOf(0.12, [0.01, 0.02, 0.04])).eitherWay).toBe(false);
  });

  it("is not settled without an interval", () => {
    for (const role of ROLES) {
      expect(placed(metricOf({ name: "m", ...role }), unmeasurable(0.12, "zero-variance")).zone).toBe("not-settled");
    }
  });

  it("refuses a guardrail without a margin, which the plan does not let through", () => {
    expect(() => placed(metricOf({ name: "m", role: "guardrail" }), contrastOf(0.12, [0, 0, 0]))).toThrow(
      "without a margin",
    );
  });
});
