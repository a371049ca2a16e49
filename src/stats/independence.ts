import { type ChiSquareTest, chiSquareTest } from "./chi-square.ts";

/**
 * Are the rows of a table of counts split alike over its columns?
 *
 *   e_ij = row_i column_j / N    chiSquare = sum (o_ij - e_ij)^2 / e_ij    df = (r - 1)(c - 1)
 * No continuity correction. Rows and columns that hold nothing are left out of r and c.
 * @param table r rows of c counts
 * @returns smallestExpected as well (the approximation is poor under 5; null without a count); p 1 on 0 degrees of
 *   freedom when one row or column holds all
 *
 * Source: Pearson 1900, Philosophical Magazine 50, 157-175; degrees of freedom: Fisher 1922, JRSS 85, 87-94.
 */
export function independence(
  table: readonly (readonly number[])[],
): ChiSquareTest & { readonly smallestExpected: number | null } {
  const rows = table.map((row) => row.reduce((a, b) => a + b, 0));
  const columns = (table[0] ?? []).map((_, j) => table.reduce((total, row) => total + (row[j] ?? 0), 0));
  const total = rows.reduce((a, b) => a + b, 0);

  const pairs: (readonly [number, number])[] = [];
  table.forEach((row, i) => {
    row.forEach((observed, j) => {
      const expected = ((rows[i] ?? 0) * (columns[j] ?? 0)) / total;
      if (expected > 0) pairs.push([observed, expected]);
    });
  });
  const filled = (counts: readonly number[]) => counts.filter((count) => count > 0).length;
  const df = total === 0 ? 0 : (filled(rows) - 1) * (filled(columns) - 1);
  return {
    ...chiSquareTest(pairs, df),
    smallestExpected: pairs.length === 0 ? null : Math.min(...pairs.map(([, expected]) => expected)),
  };
}
