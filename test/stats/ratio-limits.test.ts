import { describe, it } from "vitest";
import { moverRatio } from "../../src/stats/mover.ts";
import { lowerRatioLimit, upperRatioLimit } from "../../src/stats/ratio-limits.ts";
import { expectWithin, present } from "./expect.ts";
import { relativeEnds } from "./reference.ts";

describe("the ends of a relative interval", () => {
  it.each(relativeEnds().fieller)(
    "keep their digits where the textbook roots cancel: $variant against $control",
    (terms) => {
      const { control, variant, halfControl, halfVariant, low, high } = terms;
      const rest = {
        difference: variant - control,
        half: Math.hypot(halfControl, halfVariant),
      };
      expectWithin(lowerRatioLimit({ control, variant, halfControl, halfVariant, ...rest }), low, 1e-14);
      expectWithin(upperRatioLimit({ control, variant, halfControl, halfVariant, ...rest }), high, 1e-14);
    },
  );

  it.each(relativeEnds().mover)(
    "keep their digits with few events and a wide interval: $variant against $control",
    (expected) => {
      const [control, variant] = [expected.control, expected.variant].map(([successes, n]) => ({ successes, n })) as [
        { successes: number; n: number },
        { successes: number; n: number },
      ];
      const found = present(moverRatio(control, variant, expected.z));
      expectWithin(found.low, expected.low, 1e-13);
      expectWithin(found.high, expected.high, 1e-13);
    },
  );
});
