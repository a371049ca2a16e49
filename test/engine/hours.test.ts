import { describe, expect, it } from "vitest";
import { hourOf } from "../../src/engine/sql/hours.ts";
import { sql } from "../../src/engine/sql/index.ts";
import { inEngine, inOrder } from "./duck.ts";

const HOUR = 3_600_000_000n;
/** The end of the calendar that plans are read with, on either side of 1970. */
const LAST = 8_640_000_000_000_000_000n;

/** The largest whole number of hours that is not after an instant. */
const byRule = (us: bigint) => (us >= 0n ? us / HOUR : -((-us + HOUR - 1n) / HOUR));

describe("the hour of the epoch in which a row lies", () => {
  it.each([
    ["after 1970", [HOUR * 5n, HOUR * 5n + 1n, HOUR * 6n - 1n, HOUR * 6n, HOUR * 900_000n]],
    ["before 1970", [-HOUR * 3n, -HOUR * 3n + 1n, -HOUR - 1n, -HOUR, -1n, 0n, 1n]],
    [
      "over the whole calendar, which 64 bits do not hold from end to end",
      [-LAST, -HOUR * 2n - 1n, -1n, 0n, HOUR, LAST],
    ],
    ["at one instant", [-LAST]],
  ])("%s", async (_, times) => {
    const span = { firstUs: times[0] ?? 0n, lastUs: times.at(-1) ?? 0n };
    const found = await inEngine((engine) =>
      inOrder(
        engine,
        times.map((us) => sql`CAST(${us} AS BIGINT)`),
        hourOf(sql`x`, span),
      ),
    );
    expect(found.map((hour) => BigInt(String(hour)))).toEqual(times.map(byRule));
  });
});
