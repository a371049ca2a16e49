import { createWriteStream } from "node:fs";
import path from "node:path";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import type { Plan } from "../plan/index.ts";
import { isWhole, textOf } from "./compression.ts";
import type { Engine } from "./engine.ts";
import { fingerprint } from "./files.ts";
import type { Layout } from "./layout.ts";
import { quoted, records } from "./records.ts";
import { listTable } from "./sql/index.ts";
import type { InputFile } from "./types.ts";
import { notWhole, UnusableLog } from "./unusable.ts";

/**
 * Lists of unit ids that filters name: one id a line, or a column headed like the unit's. They are cut in Node, whatever
 * they are called, and handed to the engine in one form.
 * Writes  list_<i>: id
 */
export async function readLists(
  plan: Plan,
  layout: Layout,
  folder: string,
  workFolder: string,
  engine: Engine,
): Promise<InputFile[]> {
  const read: InputFile[] = [];
  const unitColumns = plan.log.map((source) => source.columns.unit);
  for (const filter of layout.unitFilters) {
    if (filter.kind !== "listed") continue;
    const file = path.resolve(folder, filter.listedIn);
    if ((await isWhole(file)) === false) throw await notWhole(filter.listedIn, file);
    const copy = path.join(workFolder, `list-${filter.list}.csv`);
    let rows = 0;
    await pipeline(
      Readable.from(ids(file, filter.listedIn, unitColumns)),
      async function* (found: AsyncIterable<string>) {
        for await (const id of found) {
          rows += 1;
          yield `${quoted(id)}\n`;
        }
      },
      createWriteStream(copy),
    );
    await engine.run(listTable(filter.list, copy));
    read.push({ name: filter.listedIn, ...(await fingerprint(file)), rows });
  }
  return read;
}

async function* ids(file: string, name: string, unitColumns: readonly string[]): AsyncGenerator<string> {
  const delimiter = /\.tsv(\.gz|\.zst)?$/i.test(file) ? "\t" : ",";
  let column: number | null = null;
  for await (const { line, text, cells } of records(textOf(file), delimiter)) {
    if (text.includes("\0"))
      throw new UnusableLog(`${name} holds bytes that no text has. Give the ids as text, one a line.`);
    if (column === null) {
      column = cells?.findIndex((cell) => unitColumns.includes(cell)) ?? -1;
      if (column >= 0) continue;
      if (cells !== null && cells.length > 1) throw severalColumns(name, unitColumns);
    }
    if (column >= 0 && cells === null) throw brokenRow(name, line);
    // Without a header a line is one id, also one with a comma in it.
    const id = column >= 0 ? cells?.[column] : cells?.length === 1 ? cells[0] : text;
    if (id !== undefined && id !== "") yield id;
  }
}

const severalColumns = (name: string, unitColumns: readonly string[]) =>
  new UnusableLog(
    `${name} has several columns and none is headed ${[...new Set(unitColumns)].join(" or ")}. Give one id a line, or head the column of ids like the unit's.`,
  );

const brokenRow = (name: string, line: number) =>
  new UnusableLog(`${name}, line ${line}, cannot be cut into cells: a quote does not close, or more follows it.`);
