import { existsSync, readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { traceUnit } from "../src/engine/index.ts";
import { trace } from "../src/index.ts";
import { loadPlan } from "../src/plan/index.ts";
import { trace as traced } from "./oracle/oracle.ts";
import { planFromYaml } from "./oracle/plan.ts";
import { randomCase, rawFiles, rawLists, writeCase } from "./oracle/random/case.ts";
import { PLAIN } from "./oracle/random/write.ts";
import { inPlantedFolder, plantedLog } from "./planted-log.ts";
import { inFolder } from "./property/temporary.ts";

// The case whose ledgers are worked out by hand in its expected.json.
const CASE = new URL("engine/cases/the-rows-of-each-metric/", import.meta.url).pathname;

async function said(unit: string): Promise<{ head: string; rows: string[] }> {
  const outcome = await trace(join(CASE, "plan.yaml"), unit);
  if (outcome.status !== 0) throw new Error(outcome.text);
  const [head = "", table = ""] = outcome.terminal.split("\n\n");
  const rows = table.split("\n").slice(1);
  return { head: head.replaceAll("\n", " "), rows: rows.map((row) => row.replace(/ {2,}/g, " | ")) };
}

describe("a unit's way through the ledger", () => {
  it("tells each row in order of time, with its value, its file and the line on which it ended", async () => {
    const { head, rows } = await said("a");
    expect(head).toBe(
      'Unit "a" is counted: it was first enrolled in "list" on 2026-03-02 10:00:00, and its rows count until before 2026-03-03 10:00:00.',
    );
    expect(rows).toEqual([
      "2026-03-02 09:00:00 | booking | 3 | log.csv | before the unit was enrolled",
      "2026-03-02 10:00:00 | search | list | log.csv | within the follow-up: counted in Fare a search and Rows; this row enrolled it",
      "2026-03-02 11:00:00 | booking | 10.5 | log.csv | within the follow-up: counted in Booked, Fare, Fare a search and Rows",
      "2026-03-02 11:00:00 | booking | 10.5 | log.csv | duplicates: a row with the same event id came before",
      '2026-03-02 12:00:00 | booking | 1 | log.csv | removed by the filter "load test"',
      "2026-03-02 12:00:00 | booking | log.csv | rejected: not a number: fare",
      "2026-03-02 13:00:00 | booking | log.csv | within the follow-up: counted in Booked, Fare, Fare a search and Rows",
      "2026-03-03 10:00:00 | booking | 7 | log.csv | after the follow-up had ended",
    ]);
  });

  it("says why a unit is not counted", async () => {
    expect((await said("b")).head).toBe(
      'Unit "b" is not counted: the filter "staff" removed it; it was first enrolled in "calendar" on 2026-03-02 10:00:00.',
    );
    expect((await said("c")).head).toBe(
      'Unit "c" is not counted: no row of it names a variant in the event "search", so it was never enrolled.',
    );
    expect((await said("d")).head).toBe(
      'Unit "d" is not counted: it was first enrolled in "calendar" on 2026-03-04 10:00:00, and the log ends on 2026-03-04 11:00:00, before 1 day has passed.',
    );
    expect((await said("e")).head).toBe(
      'Unit "e" is not counted: the row that enrolled it names "map", which the plan does not.',
    );
  });

  it("is refused with the nearest id where no row has the unit, and with the plan's mistakes where it has some", async () => {
    await inPlantedFolder(plantedLog(), async (plan) => {
      expect(await trace(plan, "V77x")).toEqual({
        status: 2,
        text: 'No row of the log has the visitor "V77x".\nThe nearest that is there is "v77".\nAn id is compared letter by letter, blanks included; a row that could not be cut into cells shows none.',
      });
      const far = await trace(plan, "somebody else");
      expect(far.status === 0 ? "" : far.text).not.toContain("nearest");
      expect(await trace(`${plan}.not-there`, "v1")).toMatchObject({ status: 2 });
    });
  });

  it("writes no file, and prints no sign that could move the cursor", async () => {
    const odd = "visitor,at,event,arm,fare,id,staff\n\u001b[31mred,2026-03-02T06:00:00Z,search,list,,1,false\n";
    await inPlantedFolder(odd, async (plan, folder) => {
      const before = readdirSync(folder).map((name) => [name, readFileSync(join(folder, name), "utf8")]);
      const outcome = await trace(plan, "\u001b[31mred");
      expect(outcome.status).toBe(0);
      expect(outcome.status === 0 ? outcome.terminal : "").not.toMatch(/[^\P{Cc}\n]|\p{Cf}/u);
      expect(readdirSync(folder).map((name) => [name, readFileSync(join(folder, name), "utf8")])).toEqual(before);
      expect(existsSync("out/planted")).toBe(false);
    });
  });

  // Each unit of some random logs, held against the oracle: the same rows on the same lines.
  it.each([3, 11, 42, 105])("ends row by row as in the oracle, random log %i", async (seed) => {
    await inFolder(async (folder) => {
      const drawn = randomCase(seed);
      const { text } = writeCase(folder, drawn, PLAIN);
      const plan = planFromYaml(text);
      const { ended, units, rows } = traced(plan, rawFiles(drawn), rawLists(drawn));
      const loaded = loadPlan(text);
      if (!("plan" in loaded)) throw new Error("the plan has mistakes");
      for (const unit of new Set(rows.flatMap((row) => row.unit ?? []))) {
        const found = await traceUnit(loaded.plan, loaded.source, folder, unit, { threads: 1 });
        if (!("rows" in found)) throw new Error(`no rows of ${unit}`);
        const own = ended.filter((row) => row.unit === unit);
        expect(found.rows.map(({ line }) => line).sort()).toEqual(own.map(({ line }) => line).sort());
        const seen = units.find((one) => one.unit === unit);
        expect([found.line, found.enrolledUs]).toEqual([seen?.line ?? null, seen?.enrolledUs ?? null]);
        expect(found.rows.filter(({ enrolled }) => enrolled)).toHaveLength(seen?.enrolling == null ? 0 : 1);
      }
    });
  });
});
