import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { benjaminiHochberg, holm } from "../../src/stats/index.ts";
import { expectPrinted, expectWithin } from "./expect.ts";
import { adjustedPs } from "./reference.ts";

const ps = fc.array(fc.oneof(fc.double({ min: 0, max: 1, noNaN: true }), fc.constantFrom(0, 1, 0.01, 0.05)), {
  maxLength: 12,
});

/** R 4.2.2, example(p.adjust), as printed: set.seed(123), 50 tests of which 25 have an effect, p in rising order. */
const PRINTED = {
  holm: `0.000 0.001 0.001 0.005 0.005 0.006 0.006 0.007 0.009 0.016 0.024 0.063 0.125 0.131 0.189 0.239 0.240 0.291
    0.301 0.350 0.635 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000
    1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000 1.000`.split(/\s+/),
  benjaminiHochberg: `0.000 0.000 0.000 0.001 0.001 0.001 0.001 0.001 0.001 0.002 0.003 0.007 0.013 0.013 0.017 0.021
    0.021 0.024 0.025 0.028 0.050 0.112 0.130 0.130 0.148 0.159 0.160 0.213 0.326 0.343 0.356 0.446 0.462 0.684 0.684
    0.684 0.719 0.741 0.741 0.763 0.763 0.763 0.763 0.782 0.799 0.880 0.880 0.930 0.930 0.944`.split(/\s+/),
};

describe.each([
  ["holm", holm],
  ["benjaminiHochberg", benjaminiHochberg],
] as const)("p adjusted by %s", (name, adjust) => {
  it("matches R's documented example to the digits printed", () => {
    const [example] = adjustedPs();
    const found = adjust((example?.p ?? []).map(Number));
    expect(found).toHaveLength(50);
    found.forEach((p, i) => {
      expectPrinted(p, PRINTED[name][i] ?? "");
    });
  });

  it.each(adjustedPs())("agrees with R on $name", (family) => {
    const found = adjust(family.p.map((p) => (p === null ? null : Number(p))));
    family[name].forEach((expected, i) => {
      if (expected === null) expect(found[i]).toBeNull();
      else expectWithin(found[i] ?? null, expected, 1e-14);
    });
  });

  it("is never under p nor over 1, keeps the order of the p, and is one test's own p", () => {
    fc.assert(
      fc.property(ps, (family) => {
        const found = adjust(family);
        family.forEach((p, i) => {
          expect(found[i]).toBeGreaterThanOrEqual(p);
          expect(found[i]).toBeLessThanOrEqual(1);
          for (const [j, other] of family.entries()) {
            if (p <= other) expect(found[i]).toBeLessThanOrEqual(found[j] ?? Number.NaN);
          }
        });
      }),
    );
    expect(adjust([0.3])).toEqual([0.3]);
    expect(adjust([])).toEqual([]);
  });

  it("stays with its test when the tests change places", () => {
    fc.assert(
      fc.property(ps, (family) => {
        expect(adjust([...family].reverse())).toEqual(adjust(family).reverse());
      }),
    );
  });

  it("leaves a missing p out of the family", () => {
    expect(adjust([0.01, null, 0.04])).toEqual([0.02, null, adjust([0.01, 0.04])[1]]);
    expect(adjust([null, null])).toEqual([null, null]);
  });
});

/** Benjamini and Hochberg 1995, section 4.1: 15 outcomes of a study of thrombolysis. */
const PAPER = [
  0.0001, 0.0004, 0.0019, 0.0095, 0.0201, 0.0278, 0.0298, 0.0344, 0.0459, 0.324, 0.4262, 0.5719, 0.6528, 0.759, 1,
];

describe("the example of Benjamini and Hochberg", () => {
  // Their text, from memory: at 0.05 the stepwise control of any false rejection leaves the three smallest, theirs four.
  it("rejects three by Holm and four by their own procedure", () => {
    expect(holm(PAPER).filter((p) => p <= 0.05)).toHaveLength(3);
    expect(benjaminiHochberg(PAPER).filter((p) => p <= 0.05)).toHaveLength(4);
  });
});

describe("the procedures as their authors state them", () => {
  const alpha = fc.double({ min: 0.001, max: 0.999, noNaN: true });

  it("Holm: stop at the first p(i) above alpha / (m - i + 1)", () => {
    fc.assert(
      fc.property(ps, alpha, (family, a) => {
        const rising = [...family].sort((p, q) => p - q);
        const stop = rising.findIndex((p, i) => (rising.length - i) * p > a);
        expect(holm(family).filter((p) => p <= a)).toHaveLength(stop === -1 ? rising.length : stop);
      }),
    );
  });

  it("Benjamini and Hochberg: all up to the last p(i) at most i q / m", () => {
    fc.assert(
      fc.property(ps, alpha, (family, q) => {
        const rising = [...family].sort((a, b) => a - b);
        const last = rising.findLastIndex((p, i) => (rising.length / (i + 1)) * p <= q);
        expect(benjaminiHochberg(family).filter((p) => p <= q)).toHaveLength(last + 1);
      }),
    );
  });
});
