import { chmodSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { DuckDBInstance } from "@duckdb/node-api";
import { reduce } from "../../src/engine/index.ts";
import type { Reduction } from "../../src/engine/types.ts";
import { loadPlan, placeProblems } from "../../src/plan/index.ts";
import { nanoText } from "../oracle/number.ts";

/** Small logs, written, reduced and gone. */
export type Files = Readonly<Record<string, string | Uint8Array>>;

export interface Small {
  readonly reduction: Reduction;
  /** rejects.csv, without its header. */
  readonly rejects: string;
  /** Rows by ledger line, those with some. */
  readonly rows: Readonly<Record<string, number>>;
  readonly units: Readonly<Record<string, number>>;
  /** Per metric, per variant: "units: total". */
  readonly arms: readonly (readonly string[])[];
}

export interface SmallOptions {
  readonly threads?: number;
  /** Parquet files and the SELECT that each of them holds. */
  readonly parquet?: Readonly<Record<string, string>>;
}

/** A plan over `log.*` (csv, unless it says otherwise), with the sum of fares as its metric. */
export function fares(
  more: { readonly files?: string; readonly columns?: string; readonly rest?: string } = {},
): string {
  return `experiment: Small
question: What do the files hold?
log:
  - files: ${more.files ?? "log.csv"}
    columns: {${more.columns ?? "unit: visitor, time: at, event: event, variant: arm"}}
variants: [{name: list, control: true}, {name: calendar}]
metrics: [{name: Fare, role: primary, summary: mean, of: {sum: fare}}]
${more.rest ?? ""}`;
}

/** @throws the problems as a user would read them, or what makes the log unusable */
export async function reduced(plan: string, files: Files, options: SmallOptions = {}): Promise<Small> {
  const folder = mkdtempSync(join(tmpdir(), "closeout-small-"));
  try {
    for (const [name, content] of Object.entries(files)) {
      mkdirSync(dirname(join(folder, name)), { recursive: true });
      writeFileSync(join(folder, name), content);
    }
    await writeParquet(folder, options.parquet ?? {});
    return await reducedIn(folder, plan, options);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** Written by DuckDB itself, apart from the engine that is tested. */
export async function writeParquet(folder: string, files: Readonly<Record<string, string>>): Promise<void> {
  const selects = Object.entries(files);
  if (selects.length === 0) return;
  const instance = await DuckDBInstance.create();
  const connection = await instance.connect();
  for (const [name, select] of selects) {
    mkdirSync(dirname(join(folder, name)), { recursive: true });
    await connection.run(`COPY (${select}) TO '${join(folder, name)}' (FORMAT parquet)`);
  }
  connection.closeSync();
  instance.closeSync();
}

async function reducedIn(folder: string, text: string, options: SmallOptions): Promise<Small> {
  const loaded = loadPlan(text);
  const problems = "problems" in loaded ? loaded.problems : [];
  if (!("plan" in loaded)) throw new Error(placeProblems(loaded.source, "plan.yaml", problems));
  const rejectsTo = join(folder, "rejects-written.csv");
  const result = await reduce(loaded.plan, loaded.source, folder, { threads: options.threads ?? 1, rejectsTo });
  if ("problems" in result) throw new Error(placeProblems(loaded.source, "plan.yaml", result.problems));
  const { reduction } = result;
  const rejects = readFileSync(rejectsTo, "utf8");
  if (!rejects.startsWith("file,line,reason,text\n")) throw new Error(`rejects.csv begins ${rejects.slice(0, 40)}`);
  return {
    reduction,
    rejects: rejects.slice(rejects.indexOf("\n") + 1),
    rows: Object.fromEntries(reduction.rowLines.filter(({ rows }) => rows > 0).map(({ id, rows }) => [id, rows])),
    units: Object.fromEntries(reduction.unitLines.filter(({ units }) => units > 0).map(({ id, units }) => [id, units])),
    arms: reduction.metrics.map(({ of }) =>
      loaded.plan.variants.map((_, variant) => {
        const own = of.variant.flatMap((v, i) => (v === variant ? [i] : []));
        const n = own.reduce((sum, i) => sum + (of.n[i] ?? 0), 0);
        return `${n}: ${nanoText(own.reduce((sum, i) => sum + (of.total[i] ?? 0n), 0n))}`;
      }),
    ),
  };
}

/** Text as DuckDB, another program, packs it as Zstandard. */
export async function zstandardOf(text: string): Promise<Buffer> {
  const folder = mkdtempSync(join(tmpdir(), "closeout-packed-"));
  try {
    writeFileSync(join(folder, "plain.txt"), text);
    const instance = await DuckDBInstance.create();
    const connection = await instance.connect();
    await connection.run(`
      COPY (SELECT unnest(string_split(rtrim(content, chr(10)), chr(10))) FROM read_text('${join(folder, "plain.txt")}'))
      TO '${join(folder, "packed.csv.zst")}' (FORMAT csv, HEADER false, QUOTE '', ESCAPE '', DELIMITER '|', COMPRESSION zstd)`);
    connection.closeSync();
    instance.closeSync();
    return readFileSync(join(folder, "packed.csv.zst"));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** Does something where `path` may not be read: as somebody else, if these tests run as root, who may read anything. */
export async function asAnybody<T>(folder: string, path: string, work: () => Promise<T>): Promise<T> {
  const isRoot = process.geteuid?.() === 0;
  chmodSync(folder, 0o755);
  chmodSync(path, 0o000);
  if (isRoot) process.seteuid?.(65534);
  try {
    return await work();
  } finally {
    if (isRoot) process.seteuid?.(0);
    chmodSync(path, 0o755);
  }
}
