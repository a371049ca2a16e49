import { expect, it } from "vitest";
import { exact } from "../../src/words/index.ts";

it("writes an exact decimal with every digit, thousands set apart and a true minus sign", () => {
  expect(exact(0n)).toBe("0");
  expect(exact(1_204_377_500_000_000n)).toBe("1,204,377.5");
  expect(exact(-1n)).toBe("\u22120.000000001");
  expect(exact(-1_000_000_000_000n)).toBe("\u22121,000");
  // more digits than a double holds
  expect(exact(987_654_321_012_345_678_912_345_678n)).toBe("987,654,321,012,345,678.912345678");
});
