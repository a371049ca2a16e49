import type { Arm } from "../../src/cells/types.ts";
import { nanoOf, sumsTogether } from "./arms.ts";

/** Arms of one quantile that know every order statistic of theirs. */
export function quantileArms(q: string, values: readonly (readonly number[])[]): Arm[] {
  const sums = sumsTogether(values);
  return values.map((own, i) => {
    const sorted = [...own].sort((a, b) => a - b);
    const found = sums[i];
    if (found === undefined) throw new Error(`no sums for arm ${i}`);
    return { kind: "quantile", sums: found, q, ordered: new Map(sorted.map((x, at) => [at + 1, nanoOf(x)])) };
  });
}
