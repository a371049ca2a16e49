import path from "node:path";
import type { Plan } from "../plan/index.ts";
import type { Engine } from "./engine.ts";
import { fingerprint } from "./files.ts";
import type { Layout } from "./layout.ts";
import { delimitedHeader } from "./open.ts";
import { join, name, type Statement, sql } from "./sql/index.ts";
import type { InputFile } from "./types.ts";
import { UnusableLog } from "./unusable.ts";

/**
 * Lists of unit ids that filters name: one id a line, or a column headed like the unit's.
 * Writes  list_<i>: id
 */
export async function readLists(plan: Plan, layout: Layout, folder: string, engine: Engine): Promise<InputFile[]> {
  const read: InputFile[] = [];
  const unitColumns = plan.log.map((source) => source.columns.unit);
  for (const filter of layout.unitFilters) {
    if (filter.kind !== "listed") continue;
    const file = path.resolve(folder, filter.listedIn);
    const delimiter = /\.tsv(\.gz|\.zst)?$/i.test(file) ? "\t" : ",";
    const header = (await delimitedHeader(file, delimiter)).columns;
    const column = header.findIndex((cell) => unitColumns.includes(cell));
    if (column < 0 && header.length > 1) {
      throw new UnusableLog(
        `${filter.listedIn} has several columns and none is headed ${unitColumns.join(" or ")}. Give one id a line, or head the column of ids like the unit's.`,
      );
    }
    await engine.run(listTable(filter.list, file, delimiter, header.length, column));
    const [row] = await engine.query(sql`SELECT count(*) AS ids FROM ${name(`list_${filter.list}`)}`);
    read.push({ name: filter.listedIn, ...(await fingerprint(file)), rows: Number(row?.ids ?? 0n) });
  }
  return read;
}

function listTable(list: number, file: string, delimiter: string, width: number, column: number): Statement {
  const columns = Array.from({ length: Math.max(width, 1) }, (_, i) => sql`${`c${i}`}: 'VARCHAR'`);
  const id = name(`c${Math.max(column, 0)}`);
  return sql`
    CREATE TEMP TABLE ${name(`list_${list}`)} AS
    SELECT ${id} AS id
    FROM read_csv(${file}, auto_detect = false, header = ${column >= 0}, columns = {${join(columns, ", ")}},
      delim = ${delimiter}, quote = '"', escape = '"', nullstr = '', strict_mode = false, null_padding = true)
    WHERE ${id} IS NOT NULL`;
}
