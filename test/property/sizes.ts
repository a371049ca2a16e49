import type { MetricCells } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { nanoText } from "../oracle/number.ts";
import type { OracleMetric } from "../oracle/types.ts";

/** Units by size of their value against a count of all values one by one: what is wrong, one line each. */
export function wrongSizes(plan: Plan, oracle: OracleMetric, { sizes }: Pick<MetricCells, "sizes">): string[] {
  const isShare = plan.metrics.find(({ name }) => name === oracle.metric)?.summary === "proportion";
  if (sizes === null) return isShare ? [] : ["no sizes"];
  if (isShare) return ["sizes of a share"];
  const expected = new Map<string, number>();
  for (const { variant, of } of oracle.values) {
    const key = `${variant}/${sizeOf(of)}`;
    expected.set(key, (expected.get(key) ?? 0) + 1);
  }
  const found = new Map(
    sizes.units.map((units, i) => [
      `${sizes.variant[i]}/${sizes.sign[i] === 0 ? "0" : `${sizes.sign[i]} ${sizes.quarter[i]}`}`,
      units,
    ]),
  );
  return [...new Set([...expected.keys(), ...found.keys()])].flatMap((key) =>
    expected.get(key) === found.get(key) ? [] : [`size ${key}: ${expected.get(key)} units, engine ${found.get(key)}`],
  );
}

/** By comparing with each edge in turn, from far above downwards: no logarithm. */
export function sizeOf(nano: bigint): string {
  if (nano === 0n) return "0";
  const size = Math.abs(Number(nanoText(nano)));
  for (let k = 90; k >= -40; k--) {
    for (const j of [3, 2, 1, 0]) {
      if (size >= 2 ** k * (1 + j / 4)) return `${nano < 0n ? -1 : 1} ${4 * k + j}`;
    }
  }
  throw new Error(`no size of ${nano}`);
}
