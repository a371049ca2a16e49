/** Chance that repeats: the same seed gives the same log. */
export interface Dice {
  /** A whole number from 0 to n - 1. */
  readonly below: (n: number) => number;
  /** A whole number from low to high, both included. */
  readonly between: (low: number, high: number) => number;
  readonly chance: (share: number) => boolean;
  readonly pick: <T>(items: readonly T[]) => T;
  readonly shuffled: <T>(items: readonly T[]) => T[];
  /** Each item with its own chance, in the order given. */
  readonly some: <T>(items: readonly T[], share: number) => T[];
}

/** Mulberry32 by Tommy Ettinger (2017, public domain). */
export function diceOf(seed: number): Dice {
  let state = seed >>> 0;
  const next = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
  const below = (n: number) => Math.floor(next() * n);
  const chance = (share: number) => next() < share;
  return {
    below,
    chance,
    between: (low, high) => low + below(high - low + 1),
    pick: (items) => {
      const item = items[below(items.length)];
      if (item === undefined) throw new Error("nothing to pick from");
      return item;
    },
    shuffled: (items) => {
      const order = items.map((item) => ({ item, key: next() }));
      return order.sort((a, b) => a.key - b.key).map(({ item }) => item);
    },
    some: (items, share) => items.filter(() => chance(share)),
  };
}
