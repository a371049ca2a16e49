import { distance } from "fastest-levenshtein";

/** The name with the fewest edits to `wanted` (Levenshtein 1966); of equally near ones the first. Null of none. */
export function nearest(wanted: string, names: readonly string[]): string | null {
  const distances = names.map((name) => distance(wanted, name));
  const index = distances.indexOf(Math.min(...distances));
  return names[index] ?? null;
}
