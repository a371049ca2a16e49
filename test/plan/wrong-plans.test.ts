import { describe, expect, it } from "vitest";
import { loadPlan } from "../../src/plan/index.ts";
import { messageOf } from "./plans.ts";
import { expectation, type WrongPlan } from "./wrong/case.ts";
import { COMBINATIONS } from "./wrong/combinations.ts";
import { LOOKS } from "./wrong/looks.ts";
import { METRICS } from "./wrong/metrics.ts";
import { SHAPE } from "./wrong/shape.ts";
import { VALUES } from "./wrong/values.ts";
import { YAML } from "./wrong/yaml.ts";

const tables: readonly (readonly [string, readonly WrongPlan[]])[] = [
  ["a plan whose shape is wrong", SHAPE],
  ["a plan whose values are wrong", VALUES],
  ["a plan whose keys do not go together", COMBINATIONS],
  ["a plan whose looks or incidents are wrong", LOOKS],
  ["a metric whose keys do not go together", METRICS],
  ["a text that is no plan", YAML],
];

describe.each(tables)("%s", (_, table) => {
  it.each(table.map((wrong) => [wrong.title, wrong] as const))("says all that is wrong, and where: %s", (__, wrong) => {
    const { text, message } = expectation(wrong);
    expect(messageOf(loadPlan(text, { later: [] }))).toBe(message); // what is not built yet has a test of its own
  });
});
