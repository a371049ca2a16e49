import { distance } from "fastest-levenshtein";

/**
 * The name with the fewest edits to `wanted` (Levenshtein 1966), where another case is less than one edit; of equally near
 * ones the first. Null of none.
 */
export function nearest(wanted: string, names: readonly string[]): string | null {
  const lower = (text: string) => text.toLowerCase();
  const longest = Math.max(wanted.length, ...names.map((name) => name.length)) + 1;
  const distances = names.map((name) => distance(lower(wanted), lower(name)) + distance(wanted, name) / longest);
  const index = distances.indexOf(Math.min(...distances));
  return names[index] ?? null;
}
