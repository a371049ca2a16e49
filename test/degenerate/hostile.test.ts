import { expect, it } from "vitest";
import { z } from "zod";
import { reportJsonSchema } from "../../src/index.ts";
import { tagsOf, textOf, unescaped } from "../report/markup.ts";
import { run } from "./run.ts";

// Names and values of plan and log that are SQL, markup, templates, patterns or keys of every object: the report must be
// the one of the same log with plain names.

type Name =
  | "experiment"
  | "list"
  | "calendar"
  | "map"
  | "search"
  | "booking"
  | "Booked"
  | "Fare"
  | "staff"
  | "old"
  | "visitor"
  | "at"
  | "event"
  | "arm"
  | "fare"
  | "page"
  | "beta"
  | "file"
  | "ids"
  | "Anna"
  | "Ben";

const HOSTILE: Readonly<Record<Name, string>> = {
  experiment: "'; DROP TABLE rows; -- <script>alert(1)</script>",
  list: "__proto__",
  calendar: "constructor",
  map: "a'b\"c\\d",
  search: "x' OR '1' = '1",
  booking: "{{#each this}}{{{.}}}{{/each}}",
  Booked: "</style><script>alert(2)</script>",
  Fare: "toString | `code` [x](http://example.org)",
  staff: "filter:analysed",
  old: "%_\\%",
  visitor: 'unit" ; SELECT 1 --',
  at: "SELECT",
  event: "e,v'ent",
  arm: "c0",
  fare: '"fare"\' || fare',
  page: "page\u202Eegap",
  beta: "*[0]?$.x",
  file: "lo'g [1] {a,b}",
  ids: "it's; a list",
  Anna: "Robert'); DROP TABLE units;--",
  Ben: "=cmd|'/C calc'!A0",
};
const PLAIN: Readonly<Record<Name, string>> = Object.fromEntries(
  Object.keys(HOSTILE).map((name) => [name, name]),
) as Record<Name, string>;

const csv = (text: string) => `"${text.replaceAll('"', '""')}"`;

function experiment(of: Readonly<Record<Name, string>>): { plan: string; files: Record<string, string> } {
  const q = (name: Name) => JSON.stringify(of[name]);
  const plan = `experiment: ${q("experiment")}
question: ${q("Booked")}
log:
  - files: ${JSON.stringify(`${of.file}.csv`)}
    columns: {unit: ${q("visitor")}, time: ${q("at")}, event: ${q("event")}, variant: ${q("arm")}}
enrolment: {event: ${q("search")}}
variants: [{name: ${q("list")}, control: true, what: ${q("Booked")}}, {name: ${q("calendar")}}, {name: ${q("map")}}]
metrics:
  - {name: ${q("Booked")}, role: primary, summary: proportion, of: {event: ${q("booking")}, where: {${q("page")}: {matches: ${JSON.stringify(`*${of.page.slice(1, 3)}*`)}}}}}
  - {name: ${q("Fare")}, summary: mean, of: {event: ${q("booking")}, sum: ${q("fare")}}, in: ${q("list")}}
filters:
  - {name: ${q("staff")}, why: ${q("experiment")}, drop: units, where: {${q("beta")}: ${q("old")}}}
  - {name: ${q("old")}, drop: rows, where: {${q("page")}: {in: [${q("beta")}, 7], missing: false}}}
  - {name: listed, drop: units, listed-in: ${JSON.stringify(`${of.ids}.csv`)}}
`;
  const row = (cells: readonly string[]) => cells.map(csv).join(",");
  const header = row((["visitor", "at", "event", "arm", "fare", "page", "beta"] as const).map((name) => of[name]));
  const rows = (["list", "calendar", "map"] as const).flatMap((arm, a) =>
    Array.from({ length: 60 }, (_, i) => {
      const unit = i === 0 ? (arm === "list" ? of.Anna : of.Ben + a) : `${a}-${i}`;
      return [
        row([unit, "2026-03-02", of.search, of[arm], "", "", i % 10 === 3 ? of.old : ""]),
        row([unit, "2026-03-03", of.booking, "", `${i}.5`, i % 3 === a ? of.page : i % 3 === 1 ? of.beta : "x", ""]),
      ];
    }).flat(),
  );
  const odd = [
    row(["v", "2026-03-02", of.search, of.Anna, "", "", ""]),
    row(["w", of.at, of.search, of.list, "", "", ""]),
  ];
  return {
    plan,
    files: {
      [`${of.file}.csv`]: `${[header, ...rows, ...odd].join("\n")}\n`,
      [`${of.ids}.csv`]: `${[csv(of.Anna), csv("1-5"), csv("nobody")].join("\n")}\n`,
      // What a pattern or an unquoted name would read instead.
      "log 1 a.csv": `${header}\n${row(["z", "2026-03-02", of.search, of.list, "", "", ""])}\n`,
    },
  };
}

const schema = z.fromJSONSchema(reportJsonSchema() as Parameters<typeof z.fromJSONSchema>[0]);

async function reportOf(of: Readonly<Record<Name, string>>) {
  const { plan, files } = experiment(of);
  const found = await run(plan, files);
  if (found.outcome.status !== 0) throw new Error(found.outcome.text);
  return { ...found, report: found.outcome.report };
}

it("names and values of any characters come to the report of the same log with plain ones", async () => {
  const plain = await reportOf(PLAIN);
  const hostile = await reportOf(HOSTILE);
  const figures = ({ report }: typeof plain) => ({
    decision: report.conclusion.decision,
    rows: report.flow.rows.map(({ rows }) => rows),
    units: report.flow.units.map(({ units, byVariant }) => [
      units,
      byVariant === null ? null : Object.values(byVariant),
    ]),
    analysed: Object.values(report.flow.analysed),
    effects: report.effects.map(({ arms, difference, relative, zone }) => ({ arms, difference, relative, zone })),
    checks: report.checks.map(({ id, result, strong }) => ({ id, result, strong })),
  });
  expect(figures(hostile)).toEqual(figures(plain));
  expect(
    plain.report.flow.rows.every(({ id, rows }) => rows > 0 || !/^(rejected|filter|unit-filter|unit-unknown)/.test(id)),
  ).toBe(true);
  expect(Object.keys(hostile.report.flow.analysed)).toEqual([HOSTILE.list, HOSTILE.calendar, HOSTILE.map]);
});

it("no such name becomes markup, a formula of ours, or a figure that does not exist", async () => {
  const { files, report } = await reportOf(HOSTILE);
  const html = files["report.html"] ?? "";
  const names = new Set(tagsOf(html).map(({ name }) => name));
  for (const name of ["script", "img", "iframe", "object"]) expect(names.has(name), name).toBe(false);
  expect(html.match(/<\/style>/g)).toHaveLength(1);
  const text = textOf(html);
  for (const name of ["list", "calendar", "map", "Booked"] as const) {
    expect(unescaped(text), name).toContain(HOSTILE[name].replace(/\s+/g, " "));
  }
  for (const [name, content] of Object.entries(files)) {
    expect(/\bNaN\b|\bundefined\b|\bInfinity\b|\[object|function /.exec(content)?.[0], name).toBeUndefined();
  }
  expect(schema.safeParse(JSON.parse(files["report.json"] ?? "")).error).toBeUndefined();
  expect(JSON.parse(files["report.json"] ?? "").flow.analysed).toEqual(
    JSON.parse(JSON.stringify(report.flow.analysed)),
  );
  // Report, JSON and summary hold no unit's id (DESIGN 7).
  for (const name of ["report.html", "report.json", "summary.md", "effects.csv"]) {
    for (const id of [`${HOSTILE.Ben}1`, "1-17"]) expect(unescaped(files[name] ?? "").includes(id), name).toBe(false);
  }
});
