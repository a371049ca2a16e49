import { ascending } from "../number.ts";
import type { Dice } from "./dice.ts";
import { NUMERIC_EXTRAS, type Shape } from "./shape.ts";
import { drawRowFilterWhere, drawWhere } from "./where.ts";
import type { Piece } from "./yaml.ts";

/** A list of unit ids that a filter names. */
export interface RandomList {
  readonly file: string;
  /** Null: one id a line. */
  readonly column: string | null;
  readonly ids: readonly string[];
}

export interface RandomPlan {
  /** Without `log`, which depends on how the log is written. */
  readonly pieces: { readonly [key: string]: Piece };
  readonly lists: readonly RandomList[];
  readonly enrolmentEvent: string | null;
}

export const digits = (text: string) => ({ digits: text });

export function drawPlan(dice: Dice, shape: Shape): RandomPlan {
  const enrolmentEvent = shape.hasEvent && dice.chance(0.6) ? "search" : null;
  const enrolment = drawEnrolment(dice, shape, enrolmentEvent);
  const { filters, lists } = drawFilters(dice, shape);
  const metrics = Array.from({ length: dice.between(1, 3) }, (_, at) => drawMetric(dice, shape, at));
  const pieces: Record<string, Piece> = {
    experiment: "A random log",
    question: "Does the engine count as the oracle does?",
    timezone: shape.zone.zone,
    variants: shape.variants.map((name, at) => ({ name, ...(at === 0 ? { control: true } : {}) })),
    metrics,
    ...(Object.keys(enrolment).length > 0 ? { enrolment } : {}),
    ...(filters.length > 0 ? { filters } : {}),
    ...(shape.hasTime && dice.chance(0.6) ? { "follow-up": drawFollowUp(dice, shape) } : {}),
  };
  return { pieces: reordered(dice, pieces), lists, enrolmentEvent };
}

/** The same keys in another order: the canonical order of rows goes by first mention. */
export function reordered(dice: Dice, piece: { readonly [key: string]: Piece }): { [key: string]: Piece } {
  return Object.fromEntries(dice.shuffled(Object.entries(piece)));
}

function drawFollowUp(dice: Dice, shape: Shape): { [key: string]: Piece } {
  const incomplete = dice.pick([{}, { incomplete: "exclude" }, { incomplete: "keep" }]);
  return { days: digits(String(shape.followUpDays)), ...incomplete };
}

function drawEnrolment(dice: Dice, shape: Shape, event: string | null): { [key: string]: Piece } {
  const ordered = [...shape.instants].sort(ascending);
  const bound = (instants: readonly bigint[]): Piece => {
    const instant = dice.pick(instants);
    return dice.chance(0.4) ? digits(isoText(instant).slice(0, 10)) : isoText(instant);
  };
  const half = Math.ceil(ordered.length / 2);
  const from = bound(ordered.slice(0, Math.ceil(half / 2)));
  const before = bound(ordered.slice(half - 1));
  // A day alone is local, an instant is UTC: two days apart, from is surely the earlier.
  const apart = Date.parse(dayOf(before)) - Date.parse(dayOf(from)) >= 2 * 86_400_000;
  return {
    ...(event === null ? {} : { event }),
    ...(shape.hasTime && dice.chance(0.3) ? { from } : {}),
    ...(shape.hasTime && apart && dice.chance(0.3) ? { before } : {}),
    ...dice.pick([{}, { "in-two-variants": "first" }, { "in-two-variants": "exclude" }]),
  };
}

const dayOf = (bound: Piece): string =>
  (typeof bound === "string" ? bound : (bound as { digits: string }).digits).slice(0, 10);

/** With six places: 2026-03-29T01:00:00.000001Z. */
export function isoText(us: bigint): string {
  const ms = us / 1000n;
  const text = new Date(Number(ms)).toISOString();
  return `${text.slice(0, -1)}${(us - ms * 1000n).toString().padStart(3, "0")}Z`;
}

function drawFilters(dice: Dice, shape: Shape): { filters: Piece[]; lists: RandomList[] } {
  const lists: RandomList[] = [];
  const filters = Array.from({ length: dice.pick([0, 0, 1, 1, 2, 3]) }, (_, at): Piece => {
    const name = dice.pick(["staff", "load test", 'it\'s: "odd"']) + (at === 0 ? "" : ` ${at}`);
    const kind = dice.pick(["rows", "rows", "at-enrolment", "ever", "listed"]);
    if (kind === "rows") return reordered(dice, { name, drop: "rows", where: drawRowFilterWhere(dice, shape) });
    if (kind !== "listed") {
      const when = kind === "ever" ? { when: "ever" } : dice.pick([{}, { when: "at-enrolment" }]);
      return reordered(dice, { name, drop: "units", where: drawWhere(dice, shape), ...when });
    }
    const list = drawList(dice, shape, at);
    lists.push(list);
    return { name, drop: "units", "listed-in": list.file };
  });
  return { filters, lists };
}

function drawList(dice: Dice, shape: Shape, at: number): RandomList {
  const column = dice.chance(0.5) ? dice.pick(shape.sources).names.unit : null;
  const plain = column === null ? shape.units.filter((unit) => /^[\p{L}\d ]+$/u.test(unit)) : shape.units;
  return {
    file: column === null ? `ids ${at}.txt` : `ids-${at}.csv`,
    column,
    ids: [...dice.some(plain, 0.3), "nobody"],
  };
}

function drawMetric(dice: Dice, shape: Shape, at: number): Piece {
  const summary = dice.pick(["mean", "mean", "proportion", "ratio-of-totals"] as const);
  const name = `metric ${at}`;
  const of = drawPart(dice, shape, summary === "proportion");
  const per = summary === "ratio-of-totals" ? drawPart(dice, shape, false) : null;
  const needsZero = [of, per].some(
    (part) => part !== null && ["max", "min", "first", "last"].some((key) => key in part),
  );
  const cap = summary === "proportion" ? {} : dice.pick([{}, {}, { cap: drawCap(dice, shape) }]);
  return reordered(dice, {
    name,
    summary,
    of: reordered(dice, of),
    ...(per === null ? {} : { per: reordered(dice, per) }),
    ...cap,
    ...(summary === "ratio-of-totals" ? {} : drawCovariate(dice, shape)),
    ...drawRole(dice, at),
    ...drawWithoutRows(dice, summary, needsZero),
    ...dice.pick([{}, { "good-is": "lower" }, { "good-is": "higher" }]),
  });
}

function drawCovariate(dice: Dice, shape: Shape): { [key: string]: Piece } {
  if (dice.chance(0.5)) return {};
  const column = { column: dice.pick(NUMERIC_EXTRAS) };
  // Instants lie a follow-up apart: days before of that length begin at one.
  const whole = String(shape.followUpDays);
  const days = { "days-before": digits(dice.pick(["0.5", "2", "30", whole, whole, whole])) };
  return { "adjust-for": shape.hasTime ? dice.pick([column, days, days]) : column };
}

function drawRole(dice: Dice, at: number): { [key: string]: Piece } {
  if (at === 0) return dice.pick([{ role: "primary" }, { role: "primary", worthwhile: { relative: digits("5%") } }]);
  return dice.pick([{}, { role: "secondary" }, { role: "guardrail", margin: { relative: digits("0.05") } }]);
}

function drawWithoutRows(
  dice: Dice,
  summary: "mean" | "proportion" | "ratio-of-totals",
  needed: boolean,
): { [key: string]: Piece } {
  const zero = { "without-rows": digits("0") };
  if (summary !== "mean") return needed ? zero : {};
  return needed
    ? dice.pick([zero, { "without-rows": "leave-out" }])
    : dice.pick([{}, {}, zero, { "without-rows": "leave-out" }]);
}

function drawPart(dice: Dice, shape: Shape, countOnly: boolean): { [key: string]: Piece } {
  const column = dice.pick(NUMERIC_EXTRAS);
  const timed: { [key: string]: Piece }[] = shape.hasTime
    ? [{ days: true }, { days: true }, { first: column }, { last: column }, { first: column }, { last: column }]
    : [];
  const taken: { [key: string]: Piece }[] = [
    {},
    { count: true },
    { sum: column },
    { sum: column },
    { max: column },
    { min: column },
    ...timed,
  ];
  const event = shape.hasEvent
    ? dice.pick([
        {},
        { event: "booking" },
        { event: "booking" },
        { event: "search" },
        { event: "page" },
        { event: "call" },
      ])
    : {};
  return {
    ...event,
    ...(dice.chance(0.3) ? { where: drawWhere(dice, shape) } : {}),
    ...(countOnly ? {} : dice.pick(taken)),
  };
}

function drawCap(dice: Dice, shape: Shape): Piece {
  if (dice.chance(0.6)) return { quantile: digits(dice.pick(["0.5", "0.25", "0.9", "75%", "0.6", "1e-1"])) };
  const numbers = Object.values(shape.pools)
    .flat()
    .filter((text) => /^\d+(\.\d{1,9})?$/.test(text));
  return { at: digits(dice.pick([...numbers, "1", "2.5"]).replace(/^0+(?=\d)/, "")) };
}
