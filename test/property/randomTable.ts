import { diceOf } from "../oracle/random/dice.ts";
import type { Value } from "./choiceSums.ts";
import type { Expected } from "./choices.ts";

/** A table of some hundred units, enough for the usual quantiles to lie inside, and what each choice makes of them. */
export interface RandomTable {
  readonly plan: string;
  readonly csv: string;
  /** One a metric, in plan order. */
  readonly expected: readonly Expected[];
}

interface Unit {
  readonly id: string;
  readonly variant: number;
  readonly switched: boolean;
  readonly x: bigint;
  readonly b: bigint;
  /** A covariate, missing for some. */
  readonly z: bigint | null;
  /** The day on which it enrolled, where the table has times. */
  readonly day: number;
}

const ONE = 1_000_000_000n;

export function randomTable(seed: number): RandomTable {
  const dice = diceOf(seed);
  const exclude = dice.chance(0.5);
  const cap = dice.pick([null, { quantile: "0.9" }, { quantile: "0.990" }, { quantile: "0.999" }, { at: "2" }]);
  const isRare = dice.chance(0.2);
  const hasNegative = dice.chance(0.3);
  // Of more than 1,000 units some lie above the 0.999 quantile.
  const many = dice.pick([dice.between(120, 900), dice.between(1_001, 1_500)]);
  const value = (): bigint => {
    if (dice.chance(isRare ? 0.995 : 0.3)) return 0n;
    const size = dice.pick([1n, 1n, 3n, 10n, 1_000n]);
    const sign = hasNegative && dice.chance(0.2) ? -1n : 1n;
    return sign * BigInt(dice.between(1, 400)) * size * (dice.chance(0.5) ? ONE / 100n : ONE / 4n);
  };
  // Dice of their own, so that the other draws of a seed stay what they were.
  const days = diceOf(seed + 5_000_000);
  const hasTime = days.chance(0.5);
  const units = Array.from({ length: many }, (_, at): Unit => {
    const variant = dice.between(0, 1);
    return {
      id: `u${at}`,
      variant,
      switched: variant === 0 && dice.chance(0.05),
      x: value(),
      b: BigInt(dice.between(1, 6)) * ONE,
      z: dice.chance(0.1) ? null : value() + BigInt(dice.between(0, 3)) * ONE,
      day: days.pick([2, 3, 3, 4, 4]),
    };
  });
  const rows = units.flatMap((unit) => {
    const z = unit.z === null ? "" : text(unit.z);
    const at = hasTime ? `2026-03-0${unit.day}T10:00` : "";
    const own = [unit.id, at, ARMS[unit.variant], text(unit.x), text(unit.b), z].join(",");
    // A row of the other variant too, that adds nothing.
    return unit.switched ? [own, [unit.id, at, ARMS[1], "", "", z].join(",")] : [own];
  });
  return {
    plan: planText(cap, exclude, hasTime),
    csv: `visitor,at,arm,x,b,z\n${dice.shuffled(rows).join("\n")}\n`,
    expected: [null, "b" as const, "z" as const].map((paired) => expectedOf(units, cap, exclude, hasTime, paired)),
  };
}

type Cap = { readonly quantile: string } | { readonly at: string } | null;
const ARMS = ["list", "calendar"];

function planText(cap: Cap, exclude: boolean, hasTime: boolean): string {
  const capped = cap === null ? "" : `, cap: {${Object.entries(cap).map(([key, text]) => `${key}: ${text}`)}}`;
  return `experiment: A random table
question: Are other choices what they say?
log: [{files: table.csv, columns: {unit: visitor, ${hasTime ? "time: at, " : ""}variant: arm}}]
enrolment: {in-two-variants: ${exclude ? "exclude" : "first"}}
variants: [{name: list, control: true}, {name: calendar}]
metrics:
  - {name: X, role: primary, summary: mean, of: {sum: x}${capped}}
  - {name: X for b, summary: ratio-of-totals, of: {sum: x}, per: {sum: b}${capped}}
  - {name: X adjusted, summary: mean, of: {sum: x}, adjust-for: {column: z}${capped}}
${hasTime ? "incidents: [{name: outage, from: 2026-03-03, before: 2026-03-04, where: {b: {above: 3}}}]" : ""}
`;
}

function expectedOf(
  units: readonly Unit[],
  cap: Cap,
  exclude: boolean,
  hasTime: boolean,
  paired: "b" | "z" | null,
): Expected {
  const counted = (exclusive: boolean) => units.filter(({ switched }) => !exclusive || !switched);
  const mine = counted(exclude);
  const own = capOf(mine, cap);
  const values = (from: readonly Unit[], limit: bigint | null): Value[] =>
    from.map(({ variant, x, b, z }) => ({
      variant,
      y: limit !== null && x > limit ? limit : x,
      x: paired === null ? null : paired === "b" ? b : z,
    }));
  const first = Math.min(...mine.map(({ day }) => day));
  const firstDay = ({ day }: Unit) => day === first;
  const inOutage = ({ day, b }: Unit) => day === 3 && b > 3n * ONE;
  const without = (isOut: (unit: Unit) => boolean) => mine.filter((unit) => !isOut(unit));
  const [most, nearly] = [capOf(mine, { quantile: "0.99" }), capOf(mine, { quantile: "0.999" })];
  return {
    own: values(mine, own),
    others: new Map([
      ["no-cap", values(mine, null)],
      ["cap-0.99", values(mine, most)],
      ["cap-0.999", values(mine, nearly)],
      ["other-way-in-two-variants", values(counted(!exclude), own)],
      ["any-follow-up", null],
      ["without-first-day", hasTime ? values(without(firstDay), own) : null],
      ["without-incident:outage", hasTime ? values(without(inOutage), own) : null],
    ]),
    isPaired: paired !== null,
    isLogged: paired !== "b" && mine.every(({ x }) => x >= 0n),
    held: [own, most, nearly].filter((limit) => limit !== null),
  };
}

/** The ceil(n q)-th smallest. */
function capOf(units: readonly Unit[], cap: Cap): bigint | null {
  if (cap === null) return null;
  if ("at" in cap) return BigInt(cap.at) * ONE;
  const sorted = units.map(({ x }) => x).sort((a, b) => (a < b ? -1 : a > b ? 1 : 0));
  const thousandths = Math.round(Number(cap.quantile) * 1000);
  return sorted[Math.ceil((sorted.length * thousandths) / 1000) - 1] ?? null;
}

function text(nano: bigint): string {
  const size = nano < 0n ? -nano : nano;
  return `${nano < 0n ? "-" : ""}${size / ONE}.${(size % ONE).toString().padStart(9, "0")}`;
}
