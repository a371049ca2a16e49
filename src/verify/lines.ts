/** Lines that stand in the place of each other: of two texts the runs that are not common to both. */
export interface Hunk {
  /** Index of the first line of the first text. */
  readonly at: number;
  readonly given: readonly string[];
  readonly made: readonly string[];
}

/** Above this product of lengths the longest common part is not searched for: the texts then have little in common. */
const MOST_CELLS = 4_000_000;

/** What differs between two texts, line by line, around their longest common part. */
export function hunks(given: readonly string[], made: readonly string[]): Hunk[] {
  let from = 0;
  while (from < given.length && from < made.length && given[from] === made[from]) from++;
  let tail = 0;
  while (
    tail < given.length - from &&
    tail < made.length - from &&
    given[given.length - 1 - tail] === made[made.length - 1 - tail]
  ) {
    tail++;
  }
  const a = given.slice(from, given.length - tail);
  const b = made.slice(from, made.length - tail);
  if (a.length === 0 && b.length === 0) return [];
  const common = a.length * b.length <= MOST_CELLS ? commonLines(a, b) : [];
  return between(a, b, common).map((hunk) => ({ ...hunk, at: hunk.at + from }));
}

/** Pairs of places that hold the same line, in order, as many as there can be. */
function commonLines(a: readonly string[], b: readonly string[]): (readonly [number, number])[] {
  const width = b.length + 1;
  const longest = new Uint32Array((a.length + 1) * width);
  const at = (i: number, j: number) => longest[i * width + j] ?? 0;
  for (let i = a.length - 1; i >= 0; i--) {
    for (let j = b.length - 1; j >= 0; j--) {
      longest[i * width + j] = a[i] === b[j] ? at(i + 1, j + 1) + 1 : Math.max(at(i + 1, j), at(i, j + 1));
    }
  }
  const pairs: (readonly [number, number])[] = [];
  let [i, j] = [0, 0];
  while (i < a.length && j < b.length) {
    if (a[i] === b[j]) pairs.push([i++, j++]);
    else if (at(i + 1, j) >= at(i, j + 1)) i++;
    else j++;
  }
  return pairs;
}

function between(a: readonly string[], b: readonly string[], common: readonly (readonly [number, number])[]): Hunk[] {
  const found: Hunk[] = [];
  let [i, j] = [0, 0];
  for (const [nextA, nextB] of [...common, [a.length, b.length] as const]) {
    if (nextA > i || nextB > j) found.push({ at: i, given: a.slice(i, nextA), made: b.slice(j, nextB) });
    [i, j] = [nextA + 1, nextB + 1];
  }
  return found;
}
