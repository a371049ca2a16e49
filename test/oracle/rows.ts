import type { Plan } from "../../src/plan/types.ts";
import { readDecimal, toNano } from "./number.ts";
import type { Clock } from "./time.ts";
import type { RawFile, RejectReason, Row } from "./types.ts";
import type { Cell } from "./where.ts";

/** Rules 1 and 2: every readable row with its time and numbers, and why it is rejected where it is. */
export function readRows(plan: Plan, files: readonly RawFile[], clock: Clock): readonly Row[] {
  return files.flatMap((file) => file.rows.map((cells) => readRow(plan, file, cells, clock)));
}

function readRow(plan: Plan, file: RawFile, cells: readonly Cell[], clock: Clock): Row {
  const names = plan.log[file.source]?.columns;
  if (names === undefined) throw new Error(`the plan has no log entry ${file.source}`);

  const present = new Map(file.header.map((column, at) => [column, emptyIsMissing(cells[at])]));
  const cell = (column: string | null): Cell => (column === null ? null : (present.get(column) ?? null));
  const numbers = new Map(plan.numericColumns.map((column) => [column, readNumber(cell(column))]));
  const time = cell(names.time);
  const us = time === null ? null : clock.read(time);
  const variant = cell(names.variant);
  return {
    source: file.source,
    unit: cell(names.unit),
    eventId: cell(names.eventId),
    us,
    event: cell(names.event),
    variant,
    variantIndex: variant === null ? null : plan.variants.findIndex(({ name }) => name === variant),
    cell,
    number: (column) => {
      const value = numbers.get(column) ?? null;
      if (typeof value === "string") throw new Error(`${value} in ${column} of a row that is not rejected`);
      return value;
    },
    rejected: whyRejected(cell(names.unit), names.time === null ? null : { text: time, us }, [...numbers.values()]),
  };
}

function whyRejected(
  unit: Cell,
  time: { readonly text: Cell; readonly us: bigint | null } | null,
  numbers: readonly (bigint | null | RejectReason)[],
): RejectReason | null {
  if (unit === null) return "no-unit";
  if (time !== null && time.text === null) return "no-time";
  if (time !== null && time.us === null) return "bad-time";
  return numbers.find((value) => typeof value === "string") ?? null;
}

function readNumber(cell: Cell): bigint | null | RejectReason {
  if (cell === null) return null;
  const value = readDecimal(cell);
  return value === null ? "not-a-number" : toNano(value);
}

const emptyIsMissing = (cell: Cell | undefined): Cell => (cell === undefined || cell === "" ? null : cell);
