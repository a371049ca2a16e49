import type { Arm } from "../../src/cells/types.ts";

/** The arm of a yes-or-no metric: every power of 0 and 1 is itself, so each sum is the number of successes. */
export function share(successes: number, n = 50_000): Arm {
  const sum = BigInt(successes) << 120n;
  return {
    kind: "proportion",
    sums: {
      n,
      pivot: "0",
      scale: 1,
      powers: [sum, sum, sum, sum],
      total: BigInt(successes) * 10n ** 9n,
      smallest: n === 0 ? null : 0,
      largest: n === 0 ? null : successes > 0 ? 1 : 0,
    },
  };
}
