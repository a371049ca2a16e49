import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import type { Plan } from "../../src/plan/types.ts";
import { oracle } from "../oracle/oracle.ts";
import { type Outcome, outcomeOfEngine, outcomeOfOracle } from "../oracle/outcome.ts";
import { planFromYaml } from "../oracle/plan.ts";
import { readLists, readLog } from "../oracle/read.ts";
import { runEngine } from "../property/run.ts";

// A case is a folder: plan.yaml, its log, and expected.json, worked out by hand ("how" says how). A new case adds no code.
// Facts that a case does not speak of are left out of its expected.json; everything else is there in full.
const CASES = new URL("cases/", import.meta.url).pathname;

interface Expected extends Outcome {
  readonly how: readonly string[];
}

describe.each(readdirSync(CASES).sort())("the log of %s", (name) => {
  const folder = join(CASES, name);
  const { how, ...expected } = JSON.parse(readFileSync(join(folder, "expected.json"), "utf8")) as Expected;
  const plan = planFromYaml(readFileSync(join(folder, "plan.yaml"), "utf8"));

  it("says how its figures were worked out", () => {
    expect(how.length).toBeGreaterThan(0);
  });
  it("ends as worked out by hand, in the oracle", () => {
    expectOutcome(outcomeOfOracle(plan, oracle(plan, readLog(plan, folder), readLists(plan, folder))), expected, plan);
  });
  it("ends as worked out by hand, in the engine", async () => {
    const { reduction, quantiles } = await runEngine(join(folder, "plan.yaml"));
    expectOutcome(outcomeOfEngine(plan, reduction, quantiles), expected, plan);
  });
});

function expectOutcome(outcome: Outcome, expected: Omit<Expected, "how">, plan: Plan): void {
  expect(outcome).toMatchObject(expected);
  expect(Object.keys(outcome.rowLines)).toEqual(Object.keys(expected.rowLines));
  expect(Object.keys(outcome.unitLines)).toEqual(Object.keys(expected.unitLines));
  expect(outcome.metrics.map(({ metric }) => metric)).toEqual(plan.metrics.map(({ name }) => name));
}
