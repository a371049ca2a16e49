import type { ByVariant, Reduction } from "../engine/types.ts";

/** Rows that ended on one line of the ledger. The engine writes every line, also with 0. */
export function rowsOn(reduction: Reduction, id: string): number {
  const line = reduction.rowLines.find((candidate) => candidate.id === id);
  if (line === undefined) throw new Error(`the ledger of rows has no line ${id}`);
  return line.rows;
}

/** Units that ended on one line, and by variant where the line knows it. */
export function unitsOn(reduction: Reduction, id: string): { units: number; byVariant: ByVariant | null } {
  const line = reduction.unitLines.find((candidate) => candidate.id === id);
  if (line === undefined) throw new Error(`the ledger of units has no line ${id}`);
  return line;
}

/** The analysed units by variant. */
export function analysedUnits(reduction: Reduction): ByVariant {
  const { byVariant } = unitsOn(reduction, "analysed");
  if (byVariant === null) throw new Error("the line analysed has no counts by variant");
  return byVariant;
}

export function sum(counts: readonly number[]): number {
  return counts.reduce((total, n) => total + n, 0);
}
