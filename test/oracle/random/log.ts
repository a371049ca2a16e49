import type { Clock } from "../time.ts";
import type { Cell } from "../where.ts";
import type { Dice } from "./dice.ts";
import { isoText } from "./plan.ts";
import { MANY_UNITS } from "./quantiles.ts";
import type { Shape, SourceShape } from "./shape.ts";
import { BAD_TIMES, NOT_NUMBERS, OUT_OF_RANGE } from "./values.ts";

/** One entry of the log before it is written to files. */
export interface RandomSource {
  readonly columns: readonly string[];
  readonly rows: readonly RandomRow[];
}
/** Null: a row that cannot be read. */
export type RandomRow = Readonly<Record<string, Cell>> | null;

export interface LogRules {
  readonly enrolmentEvent: string | null;
  readonly numericColumns: readonly string[];
  readonly clock: Clock;
}

export function drawLog(dice: Dice, shape: Shape, rules: LogRules): RandomSource[] {
  const few = dice.chance(0.3) ? dice.between(5, 30) : dice.between(30, 59);
  const wanted = shape.units.length > MANY_UNITS ? 7 * few : few;
  const sources = shape.sources.map((source) => ({ source, rows: [] as RandomRow[] }));
  const ids = Array.from({ length: dice.between(3, 20) }, (_, at) => (at === 0 ? "id, 0" : `id${at}`));
  for (let count = 0; count < wanted; count++) {
    const { source, rows } = dice.pick(sources);
    const id = dice.chance(0.7) ? [`row ${count}`] : ids;
    rows.push(dice.chance(0.02) ? null : drawRow(dice, shape, source, rules, id, rows));
  }
  return sources.map(({ source, rows }) => ({
    columns: columnsOf(dice, source),
    rows: withGoodRow(dice, rows, source, shape),
  }));
}

function columnsOf(dice: Dice, { names, extras }: SourceShape): string[] {
  return dice.shuffled([...Object.values(names).filter((name): name is string => name !== null), ...extras]);
}

/**
 * A log without any row that can be read is refused, so one row is always good. Now and then a row without a unit is the
 * only one with its event.
 */
function withGoodRow(dice: Dice, rows: readonly RandomRow[], { names }: SourceShape, shape: Shape): RandomRow[] {
  const good: Record<string, Cell> = { [names.unit]: shape.units[0] ?? "a" };
  if (names.time !== null) good[names.time] = isoText(shape.instants[0] ?? 0n);
  if (names.event === null || names.time === null) return [...rows, good];
  good[names.event] = "page";
  return dice.chance(0.1) ? [...rows, good, { [names.time]: "2026-03-10", [names.event]: "call" }] : [...rows, good];
}

function drawRow(
  dice: Dice,
  shape: Shape,
  source: SourceShape,
  rules: LogRules,
  ids: readonly string[],
  before: readonly RandomRow[],
): RandomRow {
  const earlier = before.length > 0 ? dice.pick(before) : null;
  if (earlier !== null && source.names.eventId !== null && dice.chance(0.15))
    return copyOf(dice, shape, source, rules, earlier);
  const row: Record<string, Cell> = {};
  for (const column of allColumns(source)) row[column] = drawCell(dice, shape, source, rules, column, row, ids);
  return row;
}

/** The row again, with none to two cells drawn anew. */
function copyOf(
  dice: Dice,
  shape: Shape,
  source: SourceShape,
  rules: LogRules,
  earlier: Exclude<RandomRow, null>,
): RandomRow {
  const copy: Record<string, Cell> = { ...earlier };
  const { eventId } = source.names;
  for (const column of dice
    .shuffled(allColumns(source).filter((name) => name !== eventId))
    .slice(0, dice.between(0, 2))) {
    copy[column] = drawCell(dice, shape, source, rules, column, copy, []);
  }
  return copy;
}

function allColumns({ names, extras }: SourceShape): string[] {
  return [names.unit, names.event, names.time, names.variant, names.eventId, ...extras].filter(
    (name): name is string => name !== null,
  );
}

function drawCell(
  dice: Dice,
  shape: Shape,
  { names, events }: SourceShape,
  rules: LogRules,
  column: string,
  row: Readonly<Record<string, Cell>>,
  ids: readonly string[],
): Cell {
  if (column === names.unit) return dice.chance(0.02) ? null : dice.pick(shape.units);
  if (column === names.time) return drawTime(dice, shape, rules.clock);
  if (column === names.event) return dice.chance(0.05) ? dice.pick([null, "Booking", "other"]) : dice.pick(events);
  if (column === names.eventId) return dice.chance(0.15) || ids.length === 0 ? null : dice.pick(ids);
  if (column === names.variant) {
    const enrols = names.event === null || rules.enrolmentEvent === null || row[names.event] === rules.enrolmentEvent;
    if (!dice.chance(enrols ? 0.7 : 0.1)) return null;
    if (dice.chance(0.05)) return dice.pick(["zebra", "List", "null", "aardvark"]);
    return dice.chance(0.15) ? dice.pick(shape.variants) : homeOf(shape, row[names.unit] ?? null);
  }
  const pool = shape.pools[column];
  if (pool === undefined) throw new Error(`no values for the column ${column}`);
  if (dice.chance(0.25)) return null;
  if (rules.numericColumns.includes(column)) {
    if (dice.chance(0.02)) return dice.pick(NOT_NUMBERS);
    if (dice.chance(0.01)) return dice.pick(OUT_OF_RANGE);
  }
  return dice.pick(pool);
}

/** The variant that a unit mostly names, so that not every unit has switched. */
function homeOf({ units, variants }: Shape, unit: Cell): string {
  return variants[Math.max(0, units.indexOf(unit ?? "")) % variants.length] ?? "";
}

function drawTime(dice: Dice, shape: Shape, clock: Clock): Cell {
  if (dice.chance(0.01)) return null;
  if (dice.chance(0.02)) return dice.pick(BAD_TIMES);
  if (dice.chance(0.07)) return dice.pick(shape.zone.locals);
  return timeText(dice, dice.pick(shape.instants), clock);
}

/** One of the forms in which an instant can be written. */
function timeText(dice: Dice, us: bigint, clock: Clock): string {
  const whole = us % 1_000_000n === 0n;
  const millis = us % 1000n === 0n;
  const shifted = (ms: number) => trimmed(dice, isoText(us + BigInt(ms) * 1000n).slice(0, -1));
  const local = clock.offset(Number(us / 1000n));
  const forms = [
    () => `${shifted(0)}Z`,
    () => shifted(local),
    () => shifted(local).replace("T", " "),
    () => `${shifted(2 * 3_600_000)}+02`,
    () => `${shifted(-3.5 * 3_600_000)}-0330`,
    () => `${shifted(5.75 * 3_600_000)}+05:45`,
    () => (whole ? String(us / 1_000_000n) : `${isoText(us).slice(0, -1)}9Z`),
    () => (millis ? String(us / 1000n) : String(us)),
    () => String(us),
  ];
  return dice.pick(forms)();
}

/** Zeros at the end of the seconds need not be written. */
function trimmed(dice: Dice, text: string): string {
  if (dice.chance(0.3)) return text;
  const short = text.replace(/\.?0+$/, "").replace(/:$/, ":00");
  const seconds = /T\d\d:\d\d:\d\d/.test(short) ? short : text;
  return seconds.endsWith(":00") && dice.chance(0.5) ? seconds.slice(0, -3) : seconds;
}
