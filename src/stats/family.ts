/**
 * Adjusts the p of a family in rising order and puts them back in the order given; null stays null and is no member.
 * @param adjust takes the p in rising order and gives as many, in that order
 */
export function inFamily(
  ps: readonly (number | null)[],
  adjust: (rising: readonly number[]) => readonly number[],
): (number | null)[] {
  const members = ps.flatMap((p, at) => (p === null ? [] : [{ p, at }])).sort((a, b) => a.p - b.p);
  const adjusted = adjust(members.map(({ p }) => p));
  const places = new Map(members.map(({ at }, i) => [at, adjusted[i]]));
  return ps.map((_, at) => places.get(at) ?? null);
}
