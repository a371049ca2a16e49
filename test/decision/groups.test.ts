import { writeFile } from "node:fs/promises";
import path from "node:path";
import { beforeAll, describe, expect, it } from "vitest";
import { closeout } from "../../src/index.ts";
import type { ReportJson } from "../../src/report/json-types.ts";
import { bandCritical, chiSquareUpperTail } from "../../src/stats/index.ts";
import { type Dice, diceOf } from "../oracle/random/dice.ts";
import { inFolder } from "../property/temporary.ts";
import { expectWithin } from "../stats/expect.ts";

/**
 * From a log to report.json, against plain doubles computed unit by unit: the effect as units enrolled, by subgroup and by day
 * since enrolment.
 */

const DAYS = 5;
const FOLLOWED = 3;
const Z = 1.959963984540054;

interface Unit {
  readonly arm: "list" | "calendar";
  readonly enrolledOn: number;
  readonly country: string;
  readonly past: number | null;
  /** One of each day since enrolment. */
  readonly searches: readonly number[];
  readonly fares: readonly (readonly number[])[];
}

/** A few hundred a day; the variant books more, most of all on the first day. Country B is the other way round. */
function drawUnits(dice: Dice): Unit[] {
  return Array.from({ length: 2400 }, (_, i): Unit => {
    const arm = i % 2 === 0 ? "list" : "calendar";
    const country = dice.pick(["A", "A", "A", "B", "other", "", "rare"].slice(0, i < 40 ? 7 : 6));
    const past = dice.chance(0.9) ? dice.between(0, 40) : null;
    const gain = arm === "list" ? 0 : country === "B" ? -0.12 : 0.1;
    const books = (day: number) => dice.chance(0.25 + (day === 0 ? gain : gain / 4));
    const days = Array.from({ length: FOLLOWED }, (_, day) => ({
      searches: (day === 0 ? 1 : 0) + dice.between(0, 2),
      fares: books(day) ? [Number((10 + (past ?? 20) / 2 + dice.between(0, 300) / 10).toFixed(1))] : [],
    }));
    return {
      arm,
      country,
      past,
      enrolledOn: Math.min(DAYS - 1, Math.floor((i / 2400) * DAYS)),
      searches: days.map(({ searches }) => searches),
      fares: days.map(({ fares }) => fares),
    };
  });
}

function logOf(units: readonly Unit[]): string {
  const lines = units.flatMap((unit, i) => {
    const at = (day: number, minute: number) =>
      new Date(Date.UTC(2026, 2, 2 + unit.enrolledOn + day, 9, minute)).toISOString();
    const row = (day: number, minute: number, event: string, fare = "", first = false) =>
      `u${i},${at(day, minute)},${event},${first ? unit.arm : ""},${first ? unit.country : "later"},${first ? (unit.past ?? "") : ""},${fare}`;
    return unit.searches.flatMap((searches, day) => [
      ...Array.from({ length: searches }, (_, n) => row(day, n, "search", "", day === 0 && n === 0)),
      ...(unit.fares[day] ?? []).map((fare) => row(day, 30, "booking", String(fare))),
    ]);
  });
  return ["visitor,at,event,arm,country,past,fare", ...lines, "end,2026-03-11T00:00:00Z,booking,,,,1"].join("\n");
}

const PLAN = `experiment: Groups
question: What do days and levels say?
unit-called: {one: visitor, many: visitors}
log: [{files: log.csv, columns: {unit: visitor, time: at, event: event, variant: arm}}]
enrolment: {event: search}
variants: [{name: list, control: true}, {name: calendar}]
follow-up: {days: ${FOLLOWED}}
subgroups: [country]
planned: {units: 5000}
metrics:
  - {name: Booked, role: primary, summary: proportion, of: {event: booking}}
  - {name: Fare, role: guardrail, margin: {relative: 20%}, summary: mean, of: {event: booking, sum: fare}, adjust-for: {column: past}}
  - {name: Ratio, role: guardrail, margin: {relative: 20%}, summary: ratio-of-totals, of: {event: booking}, per: {event: search}}
  - {name: Middle, summary: quantile, quantile: 0.5, of: {event: booking, sum: fare}}
`;

const units = drawUnits(diceOf(20260302));
let report: ReportJson;
beforeAll(async () => {
  report = await inFolder(async (folder) => {
    await writeFile(path.join(folder, "log.csv"), logOf(units));
    await writeFile(path.join(folder, "plan.yaml"), PLAN);
    const outcome = await closeout(path.join(folder, "plan.yaml"), { out: path.join(folder, "report") });
    if (outcome.status !== 0) throw new Error(outcome.text);
    return outcome.report;
  });
}, 60_000);

const sum = (values: readonly number[]) => values.reduce((all, value) => all + value, 0);
const mean = (values: readonly number[]) => sum(values) / values.length;
const variance = (values: readonly number[]) =>
  sum(values.map((value) => (value - mean(values)) ** 2)) / (values.length - 1);
const booked = ({ fares }: Unit) => (fares.flat().length > 0 ? 1 : 0);
const paid = ({ fares }: Unit) => sum(fares.flat());
const of = (arm: string, from: readonly Unit[]) => from.filter((unit) => unit.arm === arm);

interface Found {
  readonly estimate: number;
  readonly standardError: number;
}
function difference(values: (unit: Unit) => number, from: readonly Unit[]): Found {
  const [c, t] = [of("list", from).map(values), of("calendar", from).map(values)];
  return {
    estimate: mean(t) - mean(c),
    standardError: Math.sqrt(variance(t) / t.length + variance(c) / c.length),
  };
}

function ratioDifference(a: (unit: Unit) => number, b: (unit: Unit) => number, from: readonly Unit[]): Found {
  const arm = (name: string) => {
    const own = of(name, from);
    const ratio = sum(own.map(a)) / sum(own.map(b));
    const scores = own.map((unit) => (a(unit) - ratio * b(unit)) / mean(own.map(b)));
    return { ratio, v: variance(scores) / own.length };
  };
  const [c, t] = [arm("list"), arm("calendar")];
  return { estimate: t.ratio - c.ratio, standardError: Math.sqrt(c.v + t.v) };
}

/** y - theta (x - X) with the slope and the mean of x of all units; a missing x is X. */
function adjustedFare(): (unit: Unit) => number {
  const known = units.flatMap(({ past }) => (past === null ? [] : [past]));
  const X = mean(known);
  const x = ({ past }: Unit) => past ?? X;
  const parts = ["list", "calendar"].map((arm) => {
    const own = of(arm, units);
    const [mx, my] = [mean(own.map(x)), mean(own.map(paid))];
    const cov = sum(own.map((unit) => (x(unit) - mx) * (paid(unit) - my))) / (own.length - 1);
    return { cov: cov / own.length, v: variance(own.map(x)) / own.length };
  });
  const theta = sum(parts.map(({ cov }) => cov)) / sum(parts.map(({ v }) => v));
  return (unit) => paid(unit) - theta * (x(unit) - X);
}

const METRICS: readonly (readonly [string, (from: readonly Unit[]) => Found])[] = [
  ["Booked", (from) => difference(booked, from)],
  ["Fare", (from) => difference(adjustedFare(), from)],
  [
    "Ratio",
    (from) =>
      ratioDifference(
        ({ fares }) => fares.flat().length,
        ({ searches }) => sum(searches),
        from,
      ),
  ],
];

/** report.json has twelve digits; differences of levels lose one or two. */
const DIGITS = 1e-9;

function expectInterval(
  found: { readonly estimate: number | null; readonly low: number | null; readonly high: number | null },
  { estimate, standardError }: Found,
): void {
  expectWithin(found.estimate, estimate, DIGITS);
  expect(Math.abs((found.low ?? 0) - (estimate - Z * standardError))).toBeLessThan(DIGITS * standardError * 10);
  expect(Math.abs((found.high ?? 0) - (estimate + Z * standardError))).toBeLessThan(DIGITS * standardError * 10);
}

describe("the effect as units enrolled", () => {
  it.each(METRICS)(
    "of %s is that of all enrolled up to each day, with the band that the plan's size asks for",
    (name, by) => {
      const accrual = report.accrual.find(({ metric }) => metric === name);
      expect(accrual?.days.map(({ day }) => day)).toEqual(
        ["02", "03", "04", "05", "06"].map((day) => `2026-03-${day}`),
      );
      expect(accrual?.band).toEqual({ units: 5000, planned: true });
      for (const [i, day] of (accrual?.days ?? []).entries()) {
        const soFar = units.filter(({ enrolledOn }) => enrolledOn <= i);
        const expected = by(soFar);
        expect(day.units).toBe(soFar.length);
        expectInterval(day, expected);
        const half = expected.standardError * bandCritical(soFar.length, { alpha: 0.05, planned: 5000 });
        expectWithin(day.bandLow, expected.estimate - half, 1e-8);
        expectWithin(day.bandHigh, expected.estimate + half, 1e-8);
      }
    },
  );

  it("ends where the effect itself stands, adjusted or not", () => {
    for (const { metric, days } of report.accrual) {
      const effect = report.effects.find((one) => one.metric === metric);
      const own = effect?.adjusted?.difference ?? effect?.difference;
      expectWithin(days.at(-1)?.estimate ?? null, own?.estimate ?? 0, 1e-11);
      expectWithin(days.at(-1)?.high ?? null, own?.high ?? 0, 1e-11);
    }
  });

  it("is not told of a quantile", () => {
    expect(report.accrual.map(({ metric }) => metric)).toEqual(["Booked", "Fare", "Ratio"]);
    expect(report.subgroups.map(({ metric }) => metric)).toEqual(["Booked", "Fare", "Ratio"]);
    expect(report.sinceEnrolment.map(({ metric }) => metric)).toEqual(["Booked", "Fare", "Ratio"]);
  });
});

describe("the effect by subgroup", () => {
  it.each(METRICS)("of %s is that of the units of each level, by the value on the row that enrolled", (name, by) => {
    const subgroup = report.subgroups.find(({ metric }) => metric === name);
    expect(subgroup?.levels.map(({ level, kind }) => `${kind} ${level}`)).toEqual([
      "value A",
      ...["B", "other"].sort((a, b) => inLevel(b).length - inLevel(a).length).map((level) => `value ${level}`),
      "value rare",
      "missing null",
    ]);
    for (const { level, units: counted, difference: found } of subgroup?.levels ?? []) {
      const own = inLevel(level ?? "");
      expect(counted).toBe(own.length);
      if (found.method !== "normal") continue;
      const expected = by(own);
      expectInterval(found, expected);
      expectWithin(found.standardError, expected.standardError, DIGITS);
    }
  });

  it.each(METRICS)("of %s has Cochran's Q over the levels that are large enough", (name, by) => {
    const subgroup = report.subgroups.find(({ metric }) => metric === name);
    const large = ["A", "B", "other", ""].map((level) => by(inLevel(level)));
    const weights = large.map(({ standardError }) => 1 / standardError ** 2);
    const middle = sum(large.map(({ estimate }, i) => estimate * (weights[i] ?? 0))) / sum(weights);
    const q = sum(large.map(({ estimate }, i) => (weights[i] ?? 0) * (estimate - middle) ** 2));
    expectWithin(subgroup?.heterogeneity?.q ?? null, q, 1e-7);
    expect(subgroup?.heterogeneity?.df).toBe(3);
    expectWithin(subgroup?.heterogeneity?.p ?? null, chiSquareUpperTail(q, 3), 1e-6);
  });

  it("adjusts p over all levels of all measures together", () => {
    const all = report.subgroups.flatMap(({ levels }) => levels.map(({ difference: found }) => found));
    const ps = all.flatMap(({ p }) => (p === null ? [] : [p])).sort((a, b) => a - b);
    for (const { p, pAdjusted } of all) {
      if (p === null) continue;
      const after = ps.flatMap((other, i) => (other >= p ? [(ps.length / (i + 1)) * other] : []));
      expectWithin(pAdjusted, Math.min(1, ...after), 1e-9);
    }
  });

  it("says of every level how it stands to the whole", () => {
    const levels = report.subgroups[0]?.levels ?? [];
    const stands = (level: string) => levels.find((one) => one.level === level);
    expect(stands("B")?.standing).toBe("against");
    expect(stands("B")?.sentence).toContain("It points against the whole");
    expect(stands("A")?.standing).toBe("not-against");
    expect(stands("rare")?.standing).toBe("too-few");
    expect(stands("rare")?.sentence).toMatch(
      /^"rare": too few to tell \(\d+ visitors? with "calendar", \d+ with "list"\)\.$/,
    );
    expect(levels.every(({ sentence }) => sentence.endsWith("."))).toBe(true);
  });

  const inLevel = (level: string) => units.filter(({ country }) => country === level);
});

describe("the effect by day since enrolment", () => {
  const onDay: readonly (readonly [string, (day: number) => Found])[] = [
    ["Booked", (day) => difference(({ fares }) => ((fares[day] ?? []).length > 0 ? 1 : 0), units)],
    ["Fare", (day) => difference(({ fares }) => sum(fares[day] ?? []), units)],
    [
      "Ratio",
      (day) =>
        ratioDifference(
          ({ fares }) => (fares[day] ?? []).length,
          ({ searches }) => searches[day] ?? 0,
          units,
        ),
    ],
  ];
  it.each(onDay)("of %s is what happened on each day of 24 hours, unadjusted", (name, by) => {
    const found = report.sinceEnrolment.find(({ metric }) => metric === name);
    expect(found?.units).toBe(units.length);
    expect(found?.days.map(({ day }) => day)).toEqual([0, 1, 2]);
    for (const { day, ...row } of found?.days ?? []) expectInterval(row, by(day));
  });

  // Three days, weights -1, 0, 1 over 2: a unit's slope is (y_2 - y_0) / 2.
  it.each([
    [
      "Booked",
      ({ fares }: Unit) => (((fares[2] ?? []).length > 0 ? 1 : 0) - ((fares[0] ?? []).length > 0 ? 1 : 0)) / 2,
    ],
    ["Fare", ({ fares }: Unit) => (sum(fares[2] ?? []) - sum(fares[0] ?? [])) / 2],
  ] as const)("of %s has the trend of the units' own slopes", (name, slope) => {
    const { trend } = report.sinceEnrolment.find(({ metric }) => metric === name) ?? {};
    const expected = difference(slope, units);
    expectWithin(trend?.estimate ?? null, expected.estimate, DIGITS);
    expectWithin(trend?.standardError ?? null, expected.standardError, DIGITS);
  });

  it("of a ratio has the trend of its units' scores", () => {
    const { trend } = report.sinceEnrolment.find(({ metric }) => metric === "Ratio") ?? {};
    const arm = (name: string) => {
      const own = of(name, units);
      const score = (day: number) => {
        const [a, b] = [
          own.map(({ fares }) => (fares[day] ?? []).length),
          own.map(({ searches }) => searches[day] ?? 0),
        ];
        const ratio = sum(a) / sum(b);
        return { ratio, scores: a.map((value, i) => (value - ratio * (b[i] ?? 0)) / mean(b)) };
      };
      const [first, last] = [score(0), score(2)];
      const slopes = last.scores.map((value, i) => (value - (first.scores[i] ?? 0)) / 2);
      return { slope: (last.ratio - first.ratio) / 2, v: variance(slopes) / own.length };
    };
    const [c, t] = [arm("list"), arm("calendar")];
    expectWithin(trend?.estimate ?? null, t.slope - c.slope, DIGITS);
    expectWithin(trend?.standardError ?? null, Math.sqrt(c.v + t.v), DIGITS);
  });
});
