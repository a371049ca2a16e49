import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { closeout, type ReportJson } from "../../src/index.ts";
import type { Value } from "./choiceSums.ts";
import type { Expected } from "./choices.ts";
import { type Kind, plainContrast, scoresOf, twoSided } from "./plainContrast.ts";
import { randomTable } from "./randomTable.ts";
import { inFolder, twoAtATime } from "./temporary.ts";

const SEEDS = Array.from({ length: 30 }, (_, at) => 9_000 + at);
const KINDS: readonly Kind[] = ["mean", "ratio", "adjusted"];
const ALPHA = 0.05;
const SMALL = 200; // METHODS 1, small arms

type Rows = ReportJson["sensitivity"][number]["rows"];
type Effect = ReportJson["effects"][number];

describe("the sensitivity of report.json", () => {
  const met = new Set<string>();

  it("holds what the textbook formulas say of each choice's units", { timeout: 300_000 }, async () => {
    const wrong = await twoAtATime(SEEDS, (seed) =>
      inFolder(async (folder) => {
        const { plan, csv, expected } = randomTable(seed);
        await writeFile(join(folder, "table.csv"), csv);
        await writeFile(join(folder, "plan.yaml"), plan);
        const outcome = await closeout(join(folder, "plan.yaml"), { out: join(folder, "report"), threads: 1 });
        if (outcome.status !== 0) throw new Error(outcome.text);
        return KINDS.flatMap((kind, m) => {
          const { metric, rows } = at(outcome.report.sensitivity, m);
          const effect = at(outcome.report.effects, m);
          const wrong = [...wrongRows(kind, rows, at(expected, m), effect), ...wrongCorrection(rows, effect)];
          return wrong.map((line) => `seed ${seed}, ${metric}: ${line}`);
        });
      }),
    );
    expect(wrong.flat()).toEqual([]);
  });

  it("came by every choice of every kind of measure, by both methods, agreeing and not", () => {
    const choices = [
      "no-cap",
      "cap-0.99",
      "cap-0.999",
      "other-way-in-two-variants",
      "without-first-day",
      "without-incident:outage",
      "without-largest",
      "welch",
      "normal",
    ];
    const wanted = [
      ...KINDS.flatMap((kind) => choices.map((choice) => `${kind}: ${choice}`)),
      "adjusted: unadjusted",
      "mean: log",
      ...["skew-corrected", "bootstrap-t", "randomisation"].flatMap((choice) =>
        KINDS.map((kind) => `${kind}: ${choice}`),
      ),
      "bootstrap-t of many units",
      "agrees",
      "differs",
    ];
    expect(wanted.filter((name) => !met.has(name))).toEqual([]);
  });

  function wrongRows(kind: Kind, rows: Rows, expected: Expected, effect: Effect): string[] {
    const own = at(rows, 0);
    const isLed = isLedByOneUnit(effect);
    return rows.flatMap((row) => {
      met.add(`${kind}: ${row.choice}`);
      met.add(row.agrees ? "agrees" : "differs");
      if (row.choice === "bootstrap-t" && !isLed) met.add("bootstrap-t of many units");
      const agrees = sideOf(row) === sideOf(own);
      const lines =
        row.choice === "log"
          ? wrongLog(expected.own, row)
          : row.choice === "skew-corrected"
            ? []
            : row.choice === "bootstrap-t" || row.choice === "randomisation"
              ? wrongDraws(row, own, isLed)
              : wrongRow(kind, row, expected);
      return [...lines, ...(row.agrees === agrees ? [] : [`agrees is ${row.agrees}`])].map(
        (line) => `${row.choice}: ${line}`,
      );
    });
  }
});

function wrongRow(kind: Kind, row: Rows[number], expected: Expected): string[] {
  const found = plainContrast(row.choice === "unadjusted" ? "mean" : kind, valuesUnder(kind, row.choice, expected));
  if (found === null || found.standardError === 0) return row.low === null ? [] : ["has an interval without a spread"];
  const isWelch = row.choice === "welch" || (row.choice !== "normal" && found.n < SMALL);
  const { estimate, low, high, p } = row;
  if (estimate === null || low === null || high === null || p === null) return ["has no interval"];
  const [critical, z] = [(high - estimate) / found.standardError, found.estimate / found.standardError];
  return [
    ...near("estimate", estimate, found.estimate, 1e-9 * (Math.abs(found.estimate) + found.standardError)),
    ...near("low and high", high - estimate, estimate - low, 1e-9 * found.standardError),
    ...near("tail of the interval", twoSided(critical, isWelch ? found.df : null), ALPHA, 1e-7),
    ...near("p", p, twoSided(z, isWelch ? found.df : null), 1e-7),
  ];
}

/** The skew-corrected interval is the one of the effect's normality. */
function wrongCorrection(rows: Rows, { normality }: Effect): string[] {
  const row = rows.find(({ choice }) => choice === "skew-corrected");
  if (row === undefined) return [];
  const found = normality?.skewCorrected ?? null;
  return found?.low === row.low && found?.high === row.high ? [] : ["the skew-corrected interval is not the effect's"];
}

/**
 * About the plan's own estimate, and about as wide as its own interval: half to twice. Where one unit holds much of the
 * spread, a draw without it has so small a standard error that the interval may be of any width.
 */
function wrongDraws({ choice, estimate, low, high, p }: Rows[number], own: Rows[number], isLed: boolean): string[] {
  if (choice === "randomisation") return p !== null && p > 0 && p <= 1 && estimate === null ? [] : ["has no p"];
  if (low === null || high === null || own.low === null || own.high === null || estimate === null)
    return ["no interval"];
  const times = (high - low) / (own.high - own.low);
  return estimate === own.estimate && low < estimate && estimate < high && (isLed || (times > 0.5 && times < 2))
    ? []
    : [`${low} to ${high} about ${estimate}, where the plan's own is ${own.low} to ${own.high}`];
}

/** Whether one unit holds over a fifth of the squares of its arm. */
function isLedByOneUnit({ normality }: Effect): boolean {
  return (normality?.largestShare ?? 1) > 0.2;
}

/** log(1 + x): p of the plain contrast of the logarithms. */
function wrongLog(own: readonly Value[], { estimate, low, high, p, sign }: Rows[number]): string[] {
  const logs = own.map((value) => ({ ...value, y: BigInt(Math.round(Math.log1p(Number(value.y) / 1e9) * 1e15)) }));
  const found = plainContrast("mean", logs);
  if (found === null || p === null) return ["has no p"];
  if (sign !== Math.sign(found.estimate)) return [`sign is ${sign}`];
  const expected = twoSided(found.estimate / found.standardError, found.n < SMALL ? found.df : null);
  return [
    ...near("p", p, expected, 1e-6),
    ...(estimate === null && low === null && high === null ? [] : ["an interval"]),
  ];
}

function valuesUnder(kind: Kind, choice: Rows[number]["choice"], { own, others }: Expected): readonly Value[] {
  const other = others.get(choice as "no-cap");
  if (other != null) return other;
  return choice === "without-largest" ? withoutLargest(kind, own) : own;
}

/** The unit farthest from its arm's mean, of a ratio with the score farthest from 0; of equals the smallest pair. */
function withoutLargest(kind: Kind, values: readonly Value[]): Value[] {
  return [0, 1].flatMap((variant) => {
    const arm = values.filter((value) => value.variant === variant);
    const scores = kind === "ratio" ? scoresOf(arm) : arm.map(({ y }) => Number(y));
    const mean = kind === "ratio" ? 0 : scores.reduce((sum, y) => sum + y, 0) / arm.length;
    const [least, most] = [Math.min(...scores), Math.max(...scores)];
    const end = most - mean >= mean - least ? most : least;
    const near = (score: number) => Math.abs(score - end) <= 1e-12 * Math.abs(end);
    const first = arm
      .filter((_, i) => near(scores[i] ?? 0))
      .sort((a, b) => compared(a.y, b.y) || compared(a.x, b.x))[0];
    return arm.toSpliced(first === undefined ? arm.length : arm.indexOf(first), 1);
  });
}

/** A missing x comes last. */
function compared(a: bigint | null, b: bigint | null): number {
  if (a === null || b === null) return a === b ? 0 : a === null ? 1 : -1;
  return a < b ? -1 : a > b ? 1 : 0;
}

/** On which side of 0 the interval lies; of a p alone, on which the estimate does where p is under alpha. */
function sideOf({ low, high, p, choice, sign }: Rows[number]): string {
  if (choice === "log" || choice === "randomisation")
    return p === null || p >= ALPHA || sign === 0 ? "not told" : sign === 1 ? "above" : "below";
  return low !== null && low > 0 ? "above" : high !== null && high < 0 ? "below" : "not told";
}

function near(what: string, found: number, expected: number, tolerance: number): string[] {
  return Math.abs(found - expected) <= tolerance ? [] : [`${what} is ${found}, expected ${expected}`];
}

function at<T>(items: readonly T[], place: number): T {
  const item = items[place];
  if (item === undefined) throw new Error(`no ${place} of ${items.length}`);
  return item;
}
