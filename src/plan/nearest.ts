import { distance } from "fastest-levenshtein";

/**
 * The known word that a word most likely stands for, by Levenshtein distance; undefined if none is near. Case and the
 * choice of - or _ between words do not count. Of words equally near, the first.
 */
export function nearest(word: string, known: Iterable<string>): string | undefined {
  let best: string | undefined;
  let least = Math.ceil(word.length / 3) + 1; // ours: a third of the letters may be wrong
  for (const candidate of known) {
    const steps = distance(alike(word), alike(candidate));
    if (candidate !== word && steps < least) [best, least] = [candidate, steps];
  }
  return best;
}

const alike = (word: string): string => word.toLowerCase().replaceAll("_", "-");
