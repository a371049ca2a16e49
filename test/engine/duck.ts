import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join as joinPath } from "node:path";
import { openDuckdb } from "../../src/engine/duckdb.ts";
import type { Engine, Value } from "../../src/engine/engine.ts";
import { join, type Statement, sql } from "../../src/engine/sql/sql.ts";

/** The engine that the product opens, and a folder of its own; both are gone afterwards. */
export async function inEngine<T>(
  work: (engine: Engine, folder: string) => Promise<T>,
  options: { readonly threads?: number } = {},
): Promise<T> {
  const folder = mkdtempSync(joinPath(tmpdir(), "closeout-engine-test-"));
  const engine = await openDuckdb({ threads: options.threads ?? 1, workFolder: folder });
  try {
    return await work(engine, folder);
  } finally {
    engine.close();
    rmSync(folder, { recursive: true, force: true });
  }
}

/** What an expression over text gives for each of some texts, in their order. */
export async function evaluated(
  engine: Engine,
  texts: readonly (string | null)[],
  expression: (text: Statement) => Statement,
): Promise<Value[]> {
  return inOrder(
    engine,
    texts.map((text) => sql`CAST(${text} AS VARCHAR)`),
    expression(sql`x`),
  );
}

/** An expression over x, for each of some values of x, in their order. */
export async function inOrder(engine: Engine, xs: readonly Statement[], expression: Statement): Promise<Value[]> {
  const values = xs.map((x, place) => sql`(${place}, ${x})`);
  const rows = await engine.query(sql`
    SELECT ${expression} AS found
    FROM (VALUES ${join(values, ", ")}) AS t(place, x)
    ORDER BY place`);
  return rows.map(({ found }) => found ?? null);
}
