import { describe, expect, it } from "vitest";
import type { ChoiceCells } from "../../src/engine/types.ts";
import { nanoText } from "../oracle/number.ts";
import { fares, reduced, type Small } from "./small.ts";

const HEAD = "visitor,at,event,arm,fare,country,port";
const row = (visitor: string, at: string, arm: string, fare: string, country = "NO", port = "") =>
  [visitor, at, arm === "" ? "booking" : "search", arm, fare, country, port].join(",");
/** Two visitors of each arm at each time, with a fare of 1, 2, 4, … so that a sum tells who is in it. */
const TIMES = [
  "2026-03-04T07:59:59.999999",
  "2026-03-04T08:00:00",
  "2026-03-04T13:59:59.999999",
  "2026-03-04T14:00:00",
];
const LOG = [
  HEAD,
  ...TIMES.flatMap((at, i) =>
    ["list", "calendar"].flatMap((arm) =>
      ["NO", "SE"].map((country, j) => row(`${arm}${i}${country}`, at, arm, String(2 ** (2 * i + j)), country)),
    ),
  ),
].join("\n");

/** Per arm "units: total" of the choice without an incident; null where it is no choice. */
function without({ reduction }: Small, name: string): string[] | null {
  const found = reduction.metrics[0]?.choices.find(({ choice }) => choice === `without-incident:${name}`);
  return found === undefined || found.choice === "log" ? null : armsOf(found.of);
}
const armsOf = ({ n, total }: Extract<ChoiceCells, { of: unknown }>["of"]) =>
  n.map((units, i) => `${units}: ${nanoText(total[i] ?? 0n)}`);

const planWith = (incidents: string, more = "") =>
  fares({ rest: `timezone: Europe/Oslo\n${more}incidents:\n${incidents}` });

describe("units that enrolled during an incident", () => {
  const from = "from: 2026-03-04T08:00, before: 2026-03-04T14:00";

  it("are those from its start on and before its end, to the microsecond, in the plan's zone", async () => {
    // of 1 to 128: without 4, 8, 16 and 32
    const small = await reduced(
      planWith(`  - {name: a, ${from}}\n  - {name: b, ${from.replaceAll(":00,", ":00Z,")}Z}`),
      {
        "log.csv": LOG,
      },
    );
    expect(without(small, "a")).toEqual(["4: 195", "4: 195"]);
    // 08:00Z to 14:00Z is 09:00 to 15:00 in Oslo
    expect(small.reduction.facts.inIncidents).toEqual([
      [4, 4],
      [4, 4],
    ]);
    expect(without(small, "b")).toEqual(["4: 15", "4: 15"]);
    expect(small.arms).toEqual([["8: 255", "8: 255"]]);
  });

  it("are asked where they were by the row that enrolled them, and by no later one", async () => {
    const later = [
      row("list1NO", "2026-03-05T10:00", "", "0", "SE"),
      row("list1SE", "2026-03-05T10:00", "", "0", "NO"),
    ];
    const small = await reduced(planWith(`  - {name: a, ${from}, where: {country: SE}}`), {
      "log.csv": [LOG, ...later].join("\n"),
    });
    expect(without(small, "a")).toEqual(["6: 215", "6: 215"]); // without 8 and 32
  });

  it("are no choice where there are none, or where an arm would be left empty", async () => {
    const nobody = "  - {name: a, from: 2026-03-01, before: 2026-03-02}";
    const everybody = "  - {name: b, from: 2026-03-01, before: 2026-03-09}";
    const small = await reduced(planWith(`${nobody}\n${everybody}`), { "log.csv": LOG });
    expect([without(small, "a"), without(small, "b")]).toEqual([null, null]);
    expect(small.reduction.facts.inIncidents).toEqual([
      [0, 0],
      [8, 8],
    ]);
  });

  it("are left out of each of twenty incidents by itself", async () => {
    const incidents = Array.from(
      { length: 20 },
      (_, k) => `  - {name: i${k}, ${k % 2 === 0 ? from : "from: 2026-03-04T14:00, before: 2026-03-05"}}`,
    );
    const small = await reduced(planWith(incidents.join("\n")), { "log.csv": LOG });
    for (const k of [0, 18]) expect(without(small, `i${k}`)).toEqual(["4: 195", "4: 195"]);
    for (const k of [1, 19]) expect(without(small, `i${k}`)).toEqual(["6: 63", "6: 63"]);
  });
});

describe("an incident", () => {
  // Two rows at one time that differ in the column that only the incident names, and in one that a metric's filter names:
  // by the incident's column alone the other row would enrol first.
  it("decides no tie, wherever it stands in the plan: a column that only it names comes last", async () => {
    const at = "2026-03-04T10:00";
    const log = [LOG, row("tied", at, "list", "2000", "A", "z"), row("tied", at, "list", "1000", "B", "a")].join("\n");
    const filter = "filters: [{name: f, drop: units, where: {port: z}}]\n";
    const incidents = "  - {name: a, from: 2026-03-01, before: 2026-03-04T11:00, where: {country: A}}";
    const bare = await reduced(fares({ rest: `timezone: Europe/Oslo\n${filter}` }), { "log.csv": log });
    const first = await reduced(`incidents:\n${incidents}\n${fares({ rest: `timezone: Europe/Oslo\n${filter}` })}`, {
      "log.csv": log,
    });
    expect(first.units).toEqual(bare.units);
    expect(first.arms).toEqual(bare.arms);
    expect(first.arms).toEqual([["9: 3255", "8: 255"]]);
    expect(first.reduction.facts.inIncidents).toEqual([[0, 0]]);
  });
});
