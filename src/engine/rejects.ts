import { rename } from "node:fs/promises";
import type { Engine } from "./engine.ts";
import type { LogFile } from "./files.ts";
import { type Layout } from "./layout.ts";
import { reasonText } from "./ledger.ts";
import { FATE } from "./layout.ts";
import { join, type Statement, sql } from "./sql/index.ts";

/** Writes rejects.csv: file, line, reason, text of every rejected row, by the engine, so that no row travels through Node. */
export async function writeRejects(to: string, layout: Layout, files: readonly LogFile[], engine: Engine): Promise<void> {
  const reasons = await engine.query(sql`SELECT DISTINCT reason FROM rows WHERE fate = ${FATE.rejected}`);
  const words = reasons.map((row) => Number(row["reason"])).map((reason) => sql`(${reason}, ${reasonText(reason, layout)})`);
  const names = files.map((file, i) => sql`(${i}, ${file.name})`);
  await engine.run(copyTo(`${to}.part`, names, words.length === 0 ? [sql`(0, '')`] : words));
  await rename(`${to}.part`, to);
}

function copyTo(to: string, files: readonly Statement[], reasons: readonly Statement[]): Statement {
  return sql`
    COPY (
      SELECT f.name AS file, NULL AS line, w.words AS reason, r.text
      FROM rows AS r
      JOIN (VALUES ${join(files, ", ")}) AS f(file, name) ON f.file = r.file
      JOIN (VALUES ${join(reasons, ", ")}) AS w(reason, words) ON w.reason = r.reason
      WHERE r.fate = ${FATE.rejected}
      ORDER BY r.file, w.words, r.text
    ) TO ${to} (FORMAT csv, HEADER true)`;
}
