import { count, fixed } from "./number.ts";

/** Limits that readers hold a p-value against: rounding must not carry it across. */
const KNOWN_LIMITS = [0.05, 0.01, 0.001];

/** "p = 0.031"; "p < 0.0001" below that. */
export function pText(p: number): string {
  if (p < 0.0001) return "p < 0.0001";
  const first = p < 0.001 ? 5 : p < 0.01 ? 4 : 3;
  const crosses = KNOWN_LIMITS.some((limit) => p < limit !== Number(p.toFixed(first)) < limit);
  return `p = ${fixed(p, crosses ? first + 2 : first).replace(/\.?0+$/, "")}`;
}

/** The same for a column that is headed p: "0.031", "< 0.0001". */
export function pCell(p: number): string {
  return pText(p).replace(/^p (= )?/, "");
}

/** How often chance alone does this: "in fewer than one test in a million", "in about one test in 1,300". */
export function chanceText(p: number): string {
  if (p < 1e-6) return "in fewer than one test in a million";
  if (p < 0.05) return `in about one test in ${count(Number((1 / p).toPrecision(2)))}`;
  return `in about ${count(Math.round(p * 100))} of 100 tests`;
}
