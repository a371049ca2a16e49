import type { Dice } from "./dice.ts";
import { NUMERIC_EXTRAS, type Shape, TEXT_EXTRAS } from "./shape.ts";
import type { Piece } from "./yaml.ts";

/** A `where` over one or two columns, of values that the log holds or nearly holds. */
export function drawWhere(dice: Dice, shape: Shape): { [column: string]: Piece } {
  const columns = dice.shuffled([...NUMERIC_EXTRAS, ...TEXT_EXTRAS]).slice(0, dice.chance(0.75) ? 1 : 2);
  return Object.fromEntries(columns.map((column) => [column, drawTest(dice, column, shape.pools[column] ?? [])]));
}

/** For rows also the event, the variant and the unit's column, and never a test that most rows meet. */
export function drawRowFilterWhere(dice: Dice, shape: Shape): { [column: string]: Piece } {
  const { names } = dice.pick(shape.sources);
  const special: { [column: string]: Piece }[] = [
    { [names.unit]: { matches: dice.pick(["a*", "?", "*\n*", '*"*']) } },
    ...(names.event === null ? [] : [{ [names.event]: dice.pick(["page", "Booking"]) }]),
    ...(names.variant === null ? [] : [{ [names.variant]: dice.pick([...shape.variants, "zebra"]) }]),
  ];
  return dice.chance(0.2) ? dice.pick(special) : drawWhere(dice, shape);
}

function drawTest(dice: Dice, column: string, pool: readonly string[]): Piece {
  // A number by value is one number however it is spelled: in a numeric column no test may tell 1 from 1.0.
  const numeric = NUMERIC_EXTRAS.includes(column);
  const numbers = [
    ...pool.filter((text) => /^-?\d+(\.\d+)?$/.test(text)).map(withoutZeros),
    "1",
    "2",
    "0.123456789",
    ...(numeric ? [] : ["123456789012345679"]),
  ];
  const scalars = (): Piece[] => {
    const asNumber = dice.pick(numbers).replace(/^\d+$/, (whole) => dice.pick([whole, `${whole}.0`, `${whole}.00`]));
    const choices: Piece[] = [
      { digits: asNumber },
      ...(numeric ? [] : [dice.pick(pool), dice.pick(pool), true, false]),
    ];
    return [dice.pick(choices)];
  };
  const threshold = (): Piece => ({ digits: dice.pick(numbers) });
  const kind = dice.pick([
    "value",
    "value",
    "list",
    "in",
    "not",
    "one-sided",
    "two-sided",
    "missing",
    ...(numeric ? [] : ["matches", "matches"]),
  ]);
  switch (kind) {
    case "list":
      return [...scalars(), ...scalars()];
    case "in":
      return { in: [...scalars(), ...scalars()] };
    case "not":
      return dice.chance(0.5) ? { not: scalars()[0] ?? true } : { not: [...scalars(), ...scalars()] };
    case "one-sided":
      return { [dice.pick(["above", "below", "at-least", "at-most"])]: threshold() };
    case "two-sided":
      return { [dice.pick(["above", "at-least"])]: threshold(), [dice.pick(["below", "at-most"])]: threshold() };
    case "missing":
      return { missing: dice.chance(0.7) };
    case "matches":
      return dice.chance(0.3) ? { matches: [glob(dice, pool), glob(dice, pool)] } : { matches: glob(dice, pool) };
    default:
      return scalars()[0] ?? true;
  }
}

function withoutZeros(text: string): string {
  return text.replace(/^(-?)0+(?=\d)/, "$1");
}

/** A pattern made of a text of the pool. */
function glob(dice: Dice, pool: readonly string[]): string {
  const text = [...dice.pick(pool)];
  const at = dice.below(text.length);
  const whole = text.join("");
  return dice.pick([
    whole,
    `${text.slice(0, at + 1).join("")}*`,
    `*${text.slice(at).join("")}`,
    [...text.slice(0, at), "?", ...text.slice(at + 1)].join(""),
    `${whole}?`,
    `?${whole}`,
    "?",
    "?",
    "*?*",
    `*${text[at] ?? ""}*`,
  ]);
}
