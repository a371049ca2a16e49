import { Temporal } from "temporal-polyfill";
import type { NoSuchUnit, TracedRow, UnitTrace } from "../engine/index.ts";
import { nearest } from "../plan/nearest.ts";
import type { Plan } from "../plan/types.ts";
import { count, exact, list, plural, quoted } from "../words/index.ts";
import { rowLine } from "./ledger.ts";
import { printable, wrapped } from "./terminal-lines.ts";

/**
 * One unit's way through the ledger, for a terminal: what became of it in a sentence, then each of its rows in order of
 * time. It names the unit, so it is never written to a file.
 */
export function traceText(plan: Plan, trace: UnitTrace): string {
  const head = ["time", "event", "variant", ...trace.columns, "file", "where it ended"];
  const rows = trace.rows.map((row) => rowCells(plan, row));
  return [
    ...wrapped(sentence(plan, trace)),
    "",
    ...aligned([head, ...rows], trace.columns.length),
    "",
    ...wrapped(tally(plan, trace)),
  ]
    .map((line) => line.trimEnd())
    .join("\n");
}

/** No row has the unit: perhaps it is spelt otherwise. */
export function noSuchUnitText({ unitCalled }: Plan, unit: string, { nearest: spelt }: NoSuchUnit): string {
  const near = spelt === null ? undefined : nearest(unit, [spelt]);
  return [
    `No row of the log has the ${unitCalled.one} ${quoted(printable(unit))}.`,
    ...(near === undefined ? [] : [`The nearest that is there is ${quoted(printable(near))}.`]),
    "An id is compared letter by letter, blanks included; a row that could not be cut into cells shows none.",
  ].join("\n");
}

function sentence(plan: Plan, trace: UnitTrace): string {
  const name = `${plan.unitCalled.one[0]?.toUpperCase()}${plan.unitCalled.one.slice(1)} ${quoted(trace.unit)}`;
  const { line, enrolledUs } = trace;
  if (line === null)
    return `${name} was not seen: all its rows were rejected, had come before, or were removed by filters of rows.`;
  const when = enrolledUs === null ? "" : ` on ${timeText(enrolledUs, plan)}`;
  const into = trace.variant === null ? "" : (plan.variants[trace.variant]?.name ?? null);
  const enrolled = `it was first enrolled${into === "" || into === null ? "" : ` in ${quoted(into)}`}${when}`;
  if (line === "analysed") return `${name} is counted: ${enrolled}${rowsCount(plan, trace)}.${twice(trace)}`;
  return `${name} is not counted: ${why(plan, trace, line, enrolled)}.`;
}

function rowsCount(plan: Plan, { enrolledUs }: UnitTrace): string {
  if (plan.followUp === null || enrolledUs === null) return "";
  const end = enrolledUs + BigInt(Math.round(plan.followUp.days * 86_400_000_000));
  return `, and its rows count until before ${timeText(end, plan)}`;
}

const twice = ({ switched }: UnitTrace): string =>
  switched ? " It was seen in two variants and counts where first enrolled." : "";

function why(plan: Plan, trace: UnitTrace, line: string, enrolled: string): string {
  const { event, fromText, beforeText } = plan.enrolment;
  switch (line) {
    case "not-enrolled":
      return `no row of it names a variant${event === null ? "" : ` in the event ${quoted(event)}`}, so it was never enrolled`;
    case "outside-enrolment": {
      const dates = [fromText === null ? "" : `from ${fromText}`, beforeText === null ? "" : `before ${beforeText}`];
      return `${enrolled}, outside the planned dates (${list(dates.filter((text) => text !== ""))})`;
    }
    case "unknown-variant": {
      const name = trace.rows.find((row) => row.enrolled)?.variant;
      return `the row that enrolled it names ${name == null ? "a variant" : quoted(name)}, which the plan does not`;
    }
    case "switched":
      return `it was seen in two variants, and the plan leaves such out`;
    case "follow-up":
      return `${enrolled}, and the log ends${trace.logEndUs === null ? "" : ` on ${timeText(trace.logEndUs, plan)}`}, before ${plural(plan.followUp?.days ?? 0, "day has", "days have")} passed`;
    default: {
      const filter = plan.filters.find(({ name }) => line === `filter:${name}`);
      if (filter === undefined) throw new Error(`no words for the line ${line} of a unit`);
      return `the filter ${quoted(filter.name)} removed it${filter.why === null ? "" : ` (${filter.why})`}; ${enrolled}`;
    }
  }
}

function tally({ timezone }: Plan, { rows }: UnitTrace): string {
  const counted = rows.filter(({ countedIn }) => countedIn.length > 0).length;
  const times = rows.some(({ atUs }) => atUs !== null) ? ` Times are those of ${timezone}.` : "";
  return `${plural(rows.length, "row", "rows")}, ${count(counted)} of them counted by a measure.${times}`;
}

function rowCells(plan: Plan, row: TracedRow): string[] {
  return [
    row.atUs === null ? "" : timeText(row.atUs, plan),
    row.event ?? "",
    row.variant ?? "",
    ...row.values.map((value) => (value === null ? "" : exact(value))),
    row.file,
    endedText(plan, row) + (row.enrolled ? "; this row enrolled it" : ""),
  ];
}

function endedText(plan: Plan, { line, reason, countedIn }: TracedRow): string {
  if (reason !== null) return `rejected: ${reason}`;
  const ended = rowLine(line, plan);
  if (line !== "in-follow-up") return ended;
  return countedIn.length === 0 ? ended.replace("counted", "no measure asks for it") : `${ended} in ${list(countedIn)}`;
}

/** In the plan's time zone, as exact as the log has it: "2026-03-02 09:15:30.25". */
function timeText(us: bigint, { timezone }: Plan): string {
  const milliseconds = us / 1000n - (us % 1000n < 0n ? 1n : 0n);
  const at = Temporal.Instant.fromEpochMilliseconds(Number(milliseconds)).toZonedDateTimeISO(timezone);
  const micros = (us - milliseconds * 1000n).toString().padStart(3, "0");
  const fraction = `${String(at.millisecond).padStart(3, "0")}${micros}`.replace(/0+$/, "");
  const clock = [at.hour, at.minute, at.second].map((part) => String(part).padStart(2, "0")).join(":");
  return `${at.toPlainDate().toString()} ${clock}${fraction === "" ? "" : `.${fraction}`}`;
}

/** Columns as wide as their widest cell; values to the right, words to the left. */
function aligned(rows: readonly (readonly string[])[], values: number): string[] {
  const cells = rows.map((row) => row.map(printable));
  const widths = (cells[0] ?? []).map((_, c) => Math.max(...cells.map((row) => [...(row[c] ?? "")].length)));
  return cells.map((row) =>
    row
      .map((cell, c) => (c >= 3 && c < 3 + values ? padded(cell, widths[c], true) : padded(cell, widths[c], false)))
      .join("  "),
  );
}

function padded(cell: string, width = 0, toTheRight: boolean): string {
  const room = " ".repeat(Math.max(0, width - [...cell].length));
  return toTheRight ? room + cell : cell + room;
}
