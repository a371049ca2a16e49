import { diceOf } from "../oracle/random/dice.ts";

/** A log of some hundred units with rows before and after enrolment, and a plan that adjusts in every way for them. */
export interface RandomJourneys {
  readonly plan: string;
  readonly csv: string;
}

const MINUTE = 60_000;
const DAY = 1440 * MINUTE;

export function randomJourneys(seed: number): RandomJourneys {
  const dice = diceOf(seed);
  const variants = dice.pick([
    ["list", "calendar"],
    ["list", "calendar", "map"],
  ]);
  const many = dice.pick([dice.between(40, 150), dice.between(450, 700)]);
  const days = dice.pick([1, 3, 7]);
  const far = dice.pick([0, 0, 5_000_000]);
  const rows: string[] = ["visitor,at,event,arm,fare,past"];
  for (let unit = 0; unit < many; unit++) {
    const enrolled = Date.UTC(2026, 2, 9) + dice.between(0, 6 * 1440) * MINUTE;
    const taste = dice.between(0, 9);
    const past = dice.chance(0.12) ? "" : String(far + taste * 3 + dice.between(0, 4) / 4);
    const row = (ms: number, event: string, arm: string, fare: string) =>
      rows.push([`u${unit}`, new Date(ms).toISOString(), event, arm, fare, event === "search" ? past : ""].join(","));
    const book = (ms: number) =>
      row(ms, "booking", "", dice.chance(0.04) ? "" : String(taste * 10 + dice.between(0, 400) / 8));
    row(enrolled, "search", dice.pick(variants), "");
    for (let n = dice.below(taste); n > 0; n -= 2) book(enrolled - dice.between(0, 2 * days * 1440) * MINUTE);
    // The first instant that counts, the last that does not, and enrolment itself.
    if (dice.chance(0.2)) book(enrolled - days * DAY);
    if (dice.chance(0.2)) book(enrolled - days * DAY - 1);
    if (dice.chance(0.1)) book(enrolled);
    for (let n = dice.below(taste + 1); n > 0; n -= 2) book(enrolled + dice.between(0, 3 * 1440) * MINUTE);
  }
  const cap = dice.pick(["", ", cap: {quantile: 0.95}", ", cap: {at: 60}"]);
  const other = dice.pick(["max", "min", "first", "last"]);
  return {
    plan: planText(variants, days, cap, other),
    csv: `${[rows[0], ...dice.shuffled(rows.slice(1))].join("\n")}\n`,
  };
}

function planText(variants: readonly string[], days: number, cap: string, other: string): string {
  const before = `adjust-for: {days-before: ${days}}`;
  return `experiment: Random journeys
question: Are adjusted contrasts what they say?
log: [{files: log.csv, columns: {unit: visitor, time: at, event: event, variant: arm}}]
enrolment: {event: search}
variants: [${variants.map((name, at) => `{name: ${name}${at === 0 ? ", control: true" : ""}}`).join(", ")}]
metrics:
  - {name: Fare, role: primary, summary: mean, of: {event: booking, sum: fare}, ${before}${cap}}
  - {name: Booked, role: guardrail, margin: {relative: 20%}, summary: proportion, of: {event: booking}, ${before}}
  - {name: Bookings for the past, summary: mean, of: {event: booking}, adjust-for: {column: past}}
  - {name: Booked for the past, summary: proportion, of: {event: booking}, adjust-for: {column: past}}
  - {name: Days, summary: mean, of: {event: booking, days: true}, ${before}}
  - {name: The ${other}, summary: mean, of: {event: booking, ${other}: fare}, without-rows: leave-out, ${before}}
`;
}
