/** Ranks whose values a method wants next, in each arm: rising, none twice, none asked before. One of the lists may be empty. */
export interface RanksAsked {
  readonly control: readonly number[];
  readonly variant: readonly number[];
}

/** The values at these ranks, in the order asked, in 10^-9 of the metric's unit. */
export interface RankValues {
  readonly control: readonly bigint[];
  readonly variant: readonly bigint[];
}

/**
 * A method on ordered values that it never holds: it asks for ranks, is told the values, and in the end returns its figure.
 * So who has the units (an engine, a sorted array in a test) answers a round of ranks with one look at them.
 */
export type RankSearch<Figure> = Generator<RanksAsked, Figure, RankValues>;

/** Runs a search to its end against values at hand. */
export function answered<Figure>(search: RankSearch<Figure>, values: (asked: RanksAsked) => RankValues): Figure {
  let step = search.next();
  while (!step.done) step = search.next(values(step.value));
  return step.value;
}

/** The same against values that are looked up elsewhere, round by round. */
export async function answeredLater<Figure>(
  search: RankSearch<Figure>,
  values: (asked: RanksAsked) => Promise<RankValues>,
): Promise<Figure> {
  let step = search.next();
  while (!step.done) step = search.next(await values(step.value));
  return step.value;
}

/** What a search has been told so far: values by rank. */
export interface Known {
  readonly control: Map<number, bigint>;
  readonly variant: Map<number, bigint>;
}

/** Adds the values at these ranks to what is known; asks for those that are new, all at once, and not at all if none is. */
export function* learn(known: Known, ranks: RanksAsked): RankSearch<void> {
  const asked = { control: fresh(known.control, ranks.control), variant: fresh(known.variant, ranks.variant) };
  if (asked.control.length + asked.variant.length === 0) return;
  const told = yield asked;
  for (const arm of ["control", "variant"] as const) {
    if (told[arm].length !== asked[arm].length)
      throw new Error(`${told[arm].length} values for ${asked[arm].length} ranks of the ${arm}`);
    for (const [i, rank] of asked[arm].entries()) known[arm].set(rank, told[arm][i] ?? 0n);
  }
}

function fresh(known: ReadonlyMap<number, bigint>, ranks: readonly number[]): number[] {
  return [...new Set(ranks)].filter((rank) => !known.has(rank)).sort((a, b) => a - b);
}
