import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, it } from "vitest";
import { oracle } from "../oracle/oracle.ts";
import { planFromYaml } from "../oracle/plan.ts";
import { randomCase, rawFiles, rawLists, writeCase } from "../oracle/random/case.ts";
import { diceOf } from "../oracle/random/dice.ts";
import { drawForm } from "../oracle/random/write.ts";
import { readLists, readLog } from "../oracle/read.ts";

// What the random logs hold is what their files say: else a fault of the writer would pass for one of the engine.
it("reads from the files of a random log what was written to them", () => {
  const folder = mkdtempSync(join(tmpdir(), "closeout-oracle-"));
  try {
    for (let seed = 0; seed < 100; seed++) {
      const drawn = randomCase(seed);
      const here = join(folder, String(seed));
      const { text } = writeCase(here, drawn, drawForm(diceOf(seed)));
      const plan = planFromYaml(text);
      const ofFiles = oracle(plan, readLog(plan, here), readLists(plan, here));
      expect(sorted(ofFiles), `seed ${seed}`).toEqual(sorted(oracle(plan, rawFiles(drawn), rawLists(drawn))));
    }
  } finally {
    rmSync(folder, { recursive: true });
  }
});

/** Units come in the order of their first row, which a shuffled file changes. */
function sorted(result: ReturnType<typeof oracle>): ReturnType<typeof oracle> {
  const byUnit = <Of extends { readonly unit: string }>(units: readonly Of[]): Of[] =>
    [...units].sort((a, b) => (a.unit < b.unit ? -1 : 1));
  return {
    ...result,
    metrics: result.metrics.map((metric) => ({
      ...metric,
      values: byUnit(metric.values),
      since: metric.since === null ? null : { ...metric.since, units: byUnit(metric.since.units) },
    })),
  };
}
