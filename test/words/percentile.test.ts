import { expect, it } from "vitest";
import { percentile } from "../../src/words/index.ts";

it.each([
  ["0.5", "median"],
  ["0.50", "median"],
  ["0.95", "95th percentile"],
  ["0.9", "90th percentile"],
  ["0.01", "1st percentile"],
  ["0.02", "2nd percentile"],
  ["0.03", "3rd percentile"],
  ["0.11", "11th percentile"],
  ["0.12", "12th percentile"],
  ["0.13", "13th percentile"],
  ["0.21", "21st percentile"],
  ["0.93", "93rd percentile"],
  ["0.999", "99.9th percentile"],
  ["0.0005", "0.05th percentile"],
  ["0.501", "50.1th percentile"],
])("the quantile %s is called the %s", (share, called) => {
  expect(percentile(share)).toBe(called);
});
