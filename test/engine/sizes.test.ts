import { describe, expect, it } from "vitest";
import type { SizeTable } from "../../src/engine/types.ts";
import { wrongSizes } from "../property/sizes.ts";
import { fares, reduced } from "./small.ts";

const log = (values: readonly string[]) =>
  `visitor,event,arm,fare\n${values.map((fare, i) => `v${i},s,${i % 2 === 0 ? "list" : "calendar"},${fare}`).join("\n")}\n`;
const PLAN = fares({ columns: "unit: visitor, event: event, variant: arm" });

async function sizesOf(values: readonly string[], plan = PLAN): Promise<SizeTable | null> {
  const { reduction } = await reduced(plan, { "log.csv": log(values) });
  return reduction.metrics[0]?.sizes ?? null;
}

const rows = (table: SizeTable | null) =>
  table?.units.map((units, i) => [table.variant[i], table.sign[i], table.quarter[i], units]);

describe("units by the size of their value", () => {
  it("are counted in four steps to each doubling, below zero and above, zero apart", async () => {
    // 1 -> 4 * 0 + 0, 1.3 -> + 1, 7.9 -> 4 * 2 + 3, 8 -> 4 * 3, 0.5 -> 4 * -1
    expect(rows(await sizesOf(["1", "1.3", "1.2", "7.9", "8", "0", "-0.5", "0", "0", "-6"]))).toEqual([
      [0, -1, -4, 1],
      [0, 0, null, 1],
      [0, 1, 0, 2],
      [0, 1, 12, 1],
      [1, -1, 10, 1],
      [1, 0, null, 2],
      [1, 1, 1, 1],
      [1, 1, 11, 1],
    ]);
  });

  it("keep to their edges at every power of two, the least step of the log beside it included", async () => {
    const edges = Array.from({ length: 56 }, (_, i) => i - 9).flatMap((k) =>
      [0, 0.25, 0.5, 0.75].map((j) => ({ k, j })),
    );
    const nanos = edges.flatMap(({ k, j }) => {
      const edge = BigInt(2 ** (k + 9)) * BigInt(4 + 4 * j) * 10n ** 9n;
      const nano = edge / 4n / 512n;
      return [nano - 1n, nano, nano + 1n, -nano];
    });
    const text = (nano: bigint) => {
      const size = nano < 0n ? -nano : nano;
      return `${nano < 0n ? "-" : ""}${size / 10n ** 9n}.${String(size % 10n ** 9n).padStart(9, "0")}`;
    };
    const sizes = await sizesOf(nanos.map(text));
    const values = nanos.map((of, i) => ({ unit: `v${i}`, variant: i % 2, bucket: 0, of, per: null, x: null }));
    const plan = {
      metrics: [{ name: "Fare", summary: "mean" }],
    } as unknown as Parameters<typeof wrongSizes>[0];
    const oracle = { metric: "Fare", values } as unknown as Parameters<typeof wrongSizes>[1];
    expect(wrongSizes(plan, oracle, { sizes })).toEqual([]);
  });

  it("are taken after the cap", async () => {
    const capped = PLAN.replace("of: {sum: fare}", "of: {sum: fare}, cap: {at: 4}");
    expect(rows(await sizesOf(["1", "2", "100", "5"], capped))).toEqual([
      [0, 1, 0, 1],
      [0, 1, 8, 1],
      [1, 1, 4, 1],
      [1, 1, 8, 1],
    ]);
  });

  it("are not kept of a share: with and without are all there is", async () => {
    expect(
      await sizesOf(["1", "0"], PLAN.replace("summary: mean, of: {sum: fare}", "summary: proportion, of: {event: s}")),
    ).toBe(null);
  });
});
