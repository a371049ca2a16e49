import type { Dice } from "./dice.ts";
import { EDGE_NUMBERS, NUMBERS, TEXTS, UNITS, ZONES } from "./values.ts";

/** What a random log is made of, before plan and rows are drawn. */
export interface Shape {
  readonly zone: (typeof ZONES)[number];
  readonly variants: readonly string[];
  readonly units: readonly string[];
  readonly sources: readonly SourceShape[];
  readonly hasTime: boolean;
  readonly hasEvent: boolean;
  /** Instants in microseconds that the log's times are drawn from. */
  readonly instants: readonly bigint[];
  readonly followUpDays: number;
  /** For each column beyond unit, time, event, variant and id: the cells it is drawn from. */
  readonly pools: Readonly<Record<string, readonly string[]>>;
}

export interface SourceShape {
  readonly names: Names;
  readonly extras: readonly string[];
  /** The events that its rows mostly have. */
  readonly events: readonly string[];
}
/** The log's own name of each column; null where the source has none. */
export interface Names {
  readonly unit: string;
  readonly time: string | null;
  readonly event: string | null;
  readonly variant: string | null;
  readonly eventId: string | null;
}

export const NUMERIC_EXTRAS = ["fare", "seconds"];
export const TEXT_EXTRAS = ["country", "note", "is_staff", "pages"];
const EXTRAS = [...NUMERIC_EXTRAS, ...TEXT_EXTRAS];

const VARIANTS = [
  ["list", "calendar"],
  ["list", "calendar", "map"],
  ["it's", "A, old", "ünï"],
];

export function drawShape(dice: Dice): Shape {
  const layout = dice.pick(["one", "one", "one", "two", "two", "table", "timeless"] as const);
  const zone = dice.pick(ZONES);
  const followUpDays = dice.pick([1, 1, 2, 3]);
  return {
    zone,
    followUpDays,
    variants: dice.pick(VARIANTS),
    units: dice.shuffled(UNITS).slice(0, dice.between(2, 9)),
    sources: drawSources(dice, layout),
    hasTime: layout !== "timeless",
    hasEvent: layout === "one" || layout === "two",
    instants: drawInstants(dice, BigInt(Date.parse(zone.anchor)) * 1000n, followUpDays),
    pools: drawPools(dice),
  };
}

const EVENTS = ["search", "search", "booking", "booking", "page"];
const OURS = { unit: "visitor", time: "at", event: "event", variant: "arm", eventId: "id" };
const THEIRS = { unit: "customer no", time: "when", event: "what", variant: "group", eventId: "row-id" };

function drawSources(dice: Dice, layout: "one" | "two" | "table" | "timeless"): SourceShape[] {
  const eventId = () => dice.chance(0.6);
  const drop = (names: Names, gone: readonly (keyof Names)[]): Names =>
    Object.fromEntries(
      Object.entries(names).map(([key, name]) => [key, gone.includes(key as keyof Names) ? null : name]),
    ) as unknown as Names;
  const ids = (): (keyof Names)[] => (eventId() ? [] : ["eventId"]);
  const ours = dice.pick([OURS, THEIRS]);
  switch (layout) {
    case "one":
      return [{ names: drop(ours, ids()), extras: EXTRAS, events: EVENTS }];
    case "table":
      return [{ names: drop(ours, [...ids(), "event"]), extras: EXTRAS, events: EVENTS }];
    case "timeless":
      return [{ names: drop(ours, [...ids(), "event", "time"]), extras: EXTRAS, events: EVENTS }];
    case "two": {
      const second = dice.pick([OURS, THEIRS]);
      const apart = dice.chance(0.5);
      const extras = dice.some(EXTRAS, 0.6);
      const divided = apart && dice.chance(0.7);
      return [
        { names: drop(ours, ids()), extras, events: divided ? ["search"] : EVENTS },
        {
          names: drop(second, [...ids(), ...(apart ? (["variant"] as const) : [])]),
          extras: EXTRAS.filter((name) => !extras.includes(name) || dice.chance(0.5)),
          events: divided ? ["booking", "page"] : EVENTS,
        },
      ];
    }
  }
}

const MINUTE = 60_000_000n;
const HOUR = 60n * MINUTE;
const DAY = 24n * HOUR;

/** Around a change of the clocks, and each next one at an edge of the rules as seen from one before. */
function drawInstants(dice: Dice, anchor: bigint, followUpDays: number): bigint[] {
  const instants = [anchor];
  const wide = dice.chance(0.5);
  for (let count = dice.between(5, 13); count > 0; count--) {
    const from = dice.pick(instants);
    const edge = dice.pick([-1n, 0n, 0n, 1n]);
    const steps = [
      () => anchor + BigInt(dice.between(-60, 60)) * 30n * MINUTE,
      () => anchor + BigInt(dice.between(-90, 90)) * MINUTE,
      () => from + BigInt(followUpDays) * DAY + edge,
      () => from + edge,
      () => from + DAY,
      () => (wide ? from + 7n * DAY + edge : from + HOUR),
      () => (wide ? from - BigInt(dice.between(8, 20)) * DAY : from - HOUR),
    ];
    instants.push(dice.pick(steps)());
  }
  if (wide || dice.chance(0.5)) return instants;
  const end = dice.pick(instants) + BigInt(followUpDays) * DAY + dice.pick([-1n, 0n]);
  return [...instants.filter((instant) => instant < end), end];
}

function drawPools(dice: Dice): Record<string, string[]> {
  const numbers = () => [
    ...dice.shuffled(NUMBERS).slice(0, 5),
    ...(dice.chance(0.3) ? dice.shuffled(EDGE_NUMBERS).slice(0, 3) : []),
  ];
  const texts = () => dice.shuffled(TEXTS).slice(0, dice.between(2, 5));
  return {
    fare: numbers(),
    seconds: numbers(),
    // By UTF-8 bytes ｚ precedes 😀, by UTF-16 it does not.
    country: dice.chance(0.2) ? ["😀", "ｚ", "a"] : texts(),
    note: texts(),
    is_staff: dice
      .shuffled(["true", "TRUE", "t", "Yes", "y", "1", "false", "F", "no", "n", "0", "1.0", "maybe"])
      .slice(0, 4),
    pages: [...numbers(), "many"],
  };
}
