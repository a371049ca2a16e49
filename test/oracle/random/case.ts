import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { planFromYaml } from "../plan.ts";
import { clockOf } from "../time.ts";
import type { Lists, RawFile } from "../types.ts";
import { withDays } from "./days.ts";
import { type Dice, diceOf } from "./dice.ts";
import { withIncidents } from "./incidents.ts";
import { drawLog, type RandomSource } from "./log.ts";
import { drawPlan, type RandomList, reordered } from "./plan.ts";
import { withQuantiles } from "./quantiles.ts";
import { drawShape, type Shape } from "./shape.ts";
import { withSubgroups } from "./subgroups.ts";
import { type Form, writeList, writeLog } from "./write.ts";
import { type Piece, planText } from "./yaml.ts";

/** A small random plan and log: one seed, one case. */
export interface RandomCase {
  readonly seed: number;
  readonly sources: readonly RandomSource[];
  readonly lists: readonly RandomList[];
  /** The plan's text, given the files of each source. */
  readonly plan: (patterns: readonly string[]) => string;
}

export function randomCase(seed: number): RandomCase {
  const dice = diceOf(seed);
  // Dice of their own, so that the other draws of a seed stay what they were.
  const few = drawShape(dice);
  const { plan: plain, shape: many } = withQuantiles(diceOf(seed + 3_000_000), drawPlan(dice, few), few);
  const divided = withSubgroups(diceOf(seed + 4_000_000), plain, few);
  const { plan: daily, shape } = withDays(diceOf(seed + 5_000_000), divided, many);
  const drawn = withIncidents(diceOf(seed + 6_000_000), daily, shape);
  const logFirst = dice.chance(0.5);
  const columns = shape.sources.map(({ names }) => columnsPiece(dice, names));
  const plan = (patterns: readonly string[]) => {
    const log = patterns.map((files, at) => ({ files, columns: columns[at] ?? {} }));
    return planText(logFirst ? { log, ...drawn.pieces } : { ...drawn.pieces, log });
  };
  const { numericColumns } = planFromYaml(plan(shape.sources.map(() => "")));
  const sources = drawLog(dice, shape, {
    enrolmentEvent: drawn.enrolmentEvent,
    numericColumns,
    clock: clockOf(shape.zone.zone),
  });
  return { seed, sources, lists: drawn.lists, plan };
}

function columnsPiece(dice: Dice, names: Shape["sources"][number]["names"]): Piece {
  const { eventId, ...others } = names;
  const given = Object.entries({ ...others, "event-id": eventId }).filter(
    (pair): pair is [string, string] => pair[1] !== null,
  );
  return reordered(dice, Object.fromEntries(given));
}

/** Plan, log and lists in a folder; gives the plan's path and text. */
export function writeCase(
  folder: string,
  drawn: RandomCase,
  form: Form,
  seed = drawn.seed,
): { path: string; text: string } {
  const patterns = writeLog(diceOf(seed + 1_000_000), folder, drawn.sources, form);
  const text = drawn.plan(patterns);
  const path = join(folder, "plan.yaml");
  writeFileSync(path, text);
  for (const list of drawn.lists) writeList(folder, list);
  return { path, text };
}

/** The log as the oracle takes it, without a file in between. */
export function rawFiles(drawn: RandomCase): RawFile[] {
  return drawn.sources.map(({ columns, rows }, source) => ({
    source,
    file: `source ${source}`,
    header: columns,
    rows: rows.flatMap((row) => (row === null ? [] : [columns.map((column) => row[column] ?? null)])),
    unreadable: rows.filter((row) => row === null).length,
  }));
}

export function rawLists(drawn: RandomCase): Lists {
  return new Map(drawn.lists.map(({ file, ids }) => [file, new Set(ids)]));
}
