import { describe, expect, it } from "vitest";
import { type FoundLog, loadPlan, logProblems, noSuchFile, noSuchList, placeProblems } from "../../src/plan/index.ts";
import { planText } from "./plans.ts";

const found = (...sources: readonly (readonly [string, readonly string[]])[][]): FoundLog => ({
  columnsBySource: sources.map((files) => ({ files: files.map(([name, columns]) => ({ name, columns })) })),
});
const HEADER = ["visitor", "at", "event", "arm", "fare"];

/** The message about a log, whatever else is wrong with the plan. */
function messageAbout(text: string, log: FoundLog): string {
  const loaded = loadPlan(text);
  const own = "problems" in loaded ? loaded.problems : [];
  const all = [...own, ...logProblems(loaded.source, log)];
  return all.length === 0 ? "" : placeProblems(loaded.source, "plan.yaml", all);
}

describe("a plan with mistakes of its own and mistakes that only the log shows", () => {
  // The example of PAGES, made whole: what it leaves out stands here, and so the places are those of this text.
  const text = `experiment: Fare calendar on the search page
question: Does a month of fares at a glance raise bookings?
log:
  - files: data/*.csv
    columns: {unit: visitor, time: at, event: event, variant: arm, event-id: id}
variants:
  - {name: list, control: true}
  - {name: calendar}
metrics:
  - name: Booked
    role: primary
    summary: proportion
    of: {event: booking}
    worthwile: {relative: 0.05}
  - name: Support contacts
    role: guardrail
    summary: mean
    of: {event: support_contact, sum: minuts}
    good-is: lower
    margin: {relative: 5%}
filters:
  - {name: staff, drop: units, where: {is_staff: true}}
decision:
  confidence: 95
`;

  it("is told of all of them at once, in the order of the text", () => {
    const log = found([["data/a.csv", ["visitor", "at", "event", "arm", "id", "fare", "minutes", "is_staff"]]]);
    expect(messageAbout(text, log)).toBe(`plan.yaml has 3 mistakes. Nothing was computed and no file was written.

plan.yaml:14:5   metrics, Booked
    worthwile: {relative: 0.05}
    ^^^^^^^^^
    Unknown key. Did you mean worthwhile?

plan.yaml:18:39  metrics, Support contacts
    of: {event: support_contact, sum: minuts}
                                      ^^^^^^
    No file of the log has this column. Did you mean minutes?
    The log has: arm, at, event, fare, id, is_staff, minutes, visitor.

plan.yaml:24:15  decision
    confidence: 95
                ^^
    Expected a number between 0 and 1. For 95% write 0.95.`);
  });

  it("gives the files to look at though the plan is wrong", () => {
    expect(loadPlan(text).source.log).toEqual([{ files: ["data/*.csv"] }]);
    const broken = planText({ log: "log: [5, {files: [a.csv, 7, b.csv]}, {columns: x}]" });
    expect(loadPlan(broken).source.log).toEqual([{ files: [] }, { files: ["a.csv", "b.csv"] }, { files: [] }]);
    const lists = "filters: [{name: a, drop: units, where: {x: 1}}, {name: b, drop: unit, listed-in: ids.csv}]";
    expect(loadPlan(planText({ filters: lists })).source.lists).toEqual([{ filter: 1, file: "ids.csv" }]);
  });
});

describe("a column of the plan", () => {
  const filters = `filters:
  - {name: a, drop: rows, where: {seats: {above: 4}}}
  - {name: b, drop: rows, where: {seats: {above: 8}}}`;

  it("is in order where the log has it", () => {
    expect(messageAbout(planText({ filters }), found([["data/a.csv", [...HEADER, "seats"]]]))).toBe("");
  });

  it("need not be in every file of the log", () => {
    const log = found([
      ["data/a.csv", HEADER],
      ["data/b.csv", [...HEADER, "seats"]],
    ]);
    expect(messageAbout(planText({ filters }), log)).toBe("");
  });

  it("is missed once, where the plan names it first", () => {
    expect(
      messageAbout(planText({ filters }), found([["data/a.csv", HEADER]])),
    ).toBe(`plan.yaml has 1 mistake. Nothing was computed and no file was written.

plan.yaml:15:35  filters, a
    - {name: a, drop: rows, where: {seats: {above: 4}}}
                                    ^^^^^
    No file of the log has this column.
    The log has: arm, at, event, fare, visitor.`);
  });

  it("shows the blanks at the ends of the names that are there", () => {
    const message = messageAbout(planText(), found([["data/a.csv", ["visitor", " at", "event ", "arm", "fare", ""]]]));
    expect(message).toContain('No file of this entry has this column. Did you mean " at"?');
    expect(message).toContain('data/a.csv has: "", " at", arm, "event ", fare, visitor.');
  });

  it.each([
    ["data/a.csv", ";", "semicolons", "Save it with commas."],
    ["data/a.csv", "\t", "tabs", "Call it .tsv."],
    ["data/a.csv.gz", "|", "upright strokes", "Save it with commas."],
    ["data/a.tsv", ",", "commas", "Call it .csv."],
  ])("is not missed in %s where the cells are set apart by %j: that is said, once", (name, sign, called, remedy) => {
    const message = messageAbout(planText({ filters }), found([[name, [HEADER.join(sign)]]]));
    expect(message).toBe(`plan.yaml has 1 mistake. Nothing was computed and no file was written.

plan.yaml:4:12  log
    - files: data/*.csv
             ^^^^^^^^^^
    The cells of ${name} are set apart by ${called}, so all of its header is one column. ${remedy}`);
  });

  it("is not missed while some file could not be found, for it may stand there", () => {
    expect(messageAbout(planText({ filters }), found([]))).toBe("");
    const [source] = found([["data/a.csv", HEADER]]).columnsBySource;
    expect(messageAbout(planText({ filters }), { columnsBySource: [{ files: [], ...source, isPartial: true }] })).toBe(
      "",
    );
  });

  it("called ours must be in every file of its entry, and the message says which lack it", () => {
    const log = `log:
  - {files: data/*.csv, columns: {unit: visitor, time: at, event: event, variant: arm}}
  - {files: more/*.csv, columns: {unit: visiter, time: at, event: event}}`;
    const files = found(
      [
        ["data/a.csv", HEADER],
        ["data/b.csv", ["visitor", "at", "event", "Arm"]],
        ["data/c.csv", ["visitor", "at", "event"]],
      ],
      [["more/a.csv", ["visitor", "at", "event"]]],
    );
    expect(
      messageAbout(planText({ log }), files),
    ).toBe(`plan.yaml has 2 mistakes. Nothing was computed and no file was written.

plan.yaml:4:83  log, number 1
    - {files: data/*.csv, columns: {unit: visitor, time: at, event: event, variant: arm}}
                                                                                    ^^^
    It must be in every file of this entry; data/b.csv and data/c.csv lack it. Did you mean Arm?
    data/b.csv has: Arm, at, event, visitor.

plan.yaml:5:41  log, number 2
    - {files: more/*.csv, columns: {unit: visiter, time: at, event: event}}
                                          ^^^^^^^
    No file of this entry has this column. Did you mean visitor?
    more/a.csv has: at, event, visitor.`);
  });

  it("is missed once though a `where` names it too", () => {
    const where = "filters: [{name: f, drop: rows, where: {visitor: x}}]";
    const message = messageAbout(planText({ filters: where }), found([["data/a.csv", ["user", "at", "event", "arm"]]]));
    expect(message).toContain("plan.yaml has 1 mistake.");
    expect(message).toContain("plan.yaml:5:21");
  });

  it("is not missed in a file without a header, which has no rows", () => {
    const log = found([
      ["data/a.csv", []],
      ["data/b.csv", [...HEADER, "seats"]],
    ]);
    expect(messageAbout(planText({ filters }), log)).toBe("");
    expect(messageAbout(planText({ filters }), found([["data/a.csv", []]]))).toBe("");
  });

  it("must not stand twice in a header", () => {
    const log = found([["data/a.csv", [...HEADER, "fare", "fare", "visitor", "seats"]]]);
    expect(
      messageAbout(planText({ filters }), log),
    ).toBe(`plan.yaml has 1 mistake. Nothing was computed and no file was written.

plan.yaml:5:21  log
    columns: {unit: visitor, time: at, event: event, variant: arm}
                    ^^^^^^^
    This column stands more than once in the header of data/a.csv. Give each its own name there.`);
  });

  it("that is missing brings a list that ends, and only so many files", () => {
    const many = Array.from({ length: 60 }, (_, i) => `c${String(i).padStart(2, "0")}`);
    const files = Array.from({ length: 6 }, (_, i): [string, string[]] => [
      `data/${i}.csv`,
      ["visitor", "at", "event", ...many],
    ]);
    const message = messageAbout(planText(), found([["data/x.csv", HEADER], ...files]));
    expect(message).toContain(
      "every file of this entry; data/0.csv, data/1.csv, data/2.csv and 3 other files lack it.",
    );
    expect(message).toContain(`data/0.csv has: at, ${many.slice(0, 39).join(", ")} and 23 more.`);
  });
});

describe("a file of the plan that is not there", () => {
  it("is told at its place in the list, or at the one path, with the nearest that is there", () => {
    const log = `log:
  - files: [data/*.csv, more.csv]
    columns: {unit: visitor, time: at, event: event, variant: arm}
  - files: bookings-2026.csv
    columns: {unit: visitor, time: at, event: event}`;
    const filters = "filters: [{name: load test, drop: units, listed-in: ids.csv}]";
    const { source } = loadPlan(planText({ log, filters }));
    const problems = [
      noSuchFile(0, 0, "data/*.csv"),
      noSuchFile(1, null, "bookings-2026.csv", ["plan.yaml", "booking-2026.csv"]),
      noSuchList(0, "ids.csv"),
    ];
    expect(
      placeProblems(source, "plan.yaml", problems),
    ).toBe(`plan.yaml has 3 mistakes. Nothing was computed and no file was written.

plan.yaml:4:13   log, number 1
    - files: [data/*.csv, more.csv]
              ^^^^^^^^^^
    No file matches data/*.csv. Paths are read from the plan's folder.

plan.yaml:6:12   log, number 2
    - files: bookings-2026.csv
             ^^^^^^^^^^^^^^^^^
    There is no file bookings-2026.csv. Paths are read from the plan's folder. Did you mean booking-2026.csv?

plan.yaml:16:53  filters, load test
    filters: [{name: load test, drop: units, listed-in: ids.csv}]
                                                        ^^^^^^^
    There is no file ids.csv. Paths are read from the plan's folder.`);
  });
});
