import { readFile, writeFile } from "node:fs/promises";
import path from "node:path";
import { describe, expect, it } from "vitest";
import { closeout } from "../../src/index.ts";
import type { EffectJson, ReportJson } from "../../src/report/json-types.ts";
import { inFolder } from "../property/temporary.ts";
import { expectWithin } from "../stats/expect.ts";
import { adjustedContrasts } from "../stats/reference.ts";

interface Unit {
  readonly arm: string;
  readonly y: number;
  readonly x: number | null;
}
interface Report {
  readonly json: ReportJson;
  readonly html: string;
  readonly terminal: string;
}

/** The report of a table of units, one a row, adjusted for its column x. */
function reportOf(units: readonly Unit[], metric = "summary: mean, of: {sum: y}"): Promise<Report> {
  const variants = [...new Set(units.map(({ arm }) => arm))];
  return inFolder(async (folder) => {
    const rows = units.map(({ arm, y, x }, i) => `u${i},${arm},${y},${x ?? ""}`);
    await writeFile(path.join(folder, "table.csv"), `visitor,arm,y,x\n${rows.join("\n")}\n`);
    await writeFile(
      path.join(folder, "plan.yaml"),
      `experiment: Adjusted
question: What does the rule say of an adjusted contrast?
unit-called: {one: visitor, many: visitors}
log: [{files: table.csv, columns: {unit: visitor, variant: arm}}]
variants: [${variants.map((name, v) => `{name: ${name}${v === 0 ? ", control: true" : ""}}`).join(", ")}]
metrics: [{name: Y, role: primary, ${metric}, adjust-for: {column: x}}]
`,
    );
    const outcome = await closeout(path.join(folder, "plan.yaml"), { out: path.join(folder, "report") });
    if (outcome.status !== 0) throw new Error(outcome.text);
    const html = await readFile(path.join(folder, "report", "report.html"), "utf8");
    return { json: outcome.report, html, terminal: outcome.terminal };
  });
}

function effectOf({ json }: Report, at = 0): EffectJson & { readonly adjusted: NonNullable<EffectJson["adjusted"]> } {
  const effect = json.effects[at];
  if (effect === undefined || effect.adjusted === null) throw new Error("an effect that is not adjusted");
  return { ...effect, adjusted: effect.adjusted };
}

describe("the rule on an adjusted contrast", () => {
  // test/reference/adjusted-contrast.R: R 4.2.2 on ChickWeight, airquality and quakes. report.json has twelve digits, so half a
  // unit of the last is up to 5e-12.
  it.each(adjustedContrasts())("has R's figures from log to report on $name", async (example) => {
    const isShare = example.y.every((y) => y === 0 || y === 1);
    const units = example.y.map((y, i) => ({
      arm: example.variant[i] === 1 ? "calendar" : "list",
      y,
      x: example.x[i] ?? null,
    }));
    const sorted = [...units.filter(({ arm }) => arm === "list"), ...units.filter(({ arm }) => arm === "calendar")];
    const metric = isShare ? "summary: proportion, of: {where: {y: 1}}" : "summary: mean, of: {sum: y}";
    const effect = effectOf(await reportOf(sorted, metric));
    const { difference, relative, theta, varianceReduction } = effect.adjusted;
    expectWithin(theta, example.theta, 6e-12);
    expectWithin(varianceReduction, example.varianceReduction, 1e-11);
    expectWithin(difference.estimate, example.estimate, 1e-11);
    expectWithin(difference.standardError, example.standardError, 6e-12);
    expectWithin(difference.low, example.low, 1e-11);
    expectWithin(difference.high, example.high, 1e-11);
    expectWithin(difference.p, example.p, 1e-9);
    // One variant: p itself.
    expect(difference.pAdjusted).toBe(difference.p);
    expectWithin(relative?.low ?? null, example.relativeLow, 1e-10);
    expectWithin(relative?.high ?? null, example.relativeHigh, 1e-10);
    expect(effect.zone).toBe(Number(example.low) > 0 ? "better" : Number(example.high) < 0 ? "worse" : "not-settled");
    // The arms are of y itself.
    const ys = sorted.filter(({ arm }) => arm === "list").map(({ y }) => y);
    expectWithin(effect.arms.control.mean, ys.reduce((a, b) => a + b) / ys.length, 1e-11);
    if (difference.method === "normal") {
      // qnorm(.975) + qnorm(.8), R 4.2.2
      expectWithin(effect.power.detectable, 2.80158521811 * Number(example.standardError), 1e-10);
    }
  });

  // A year, an account's number: what counts of x is how it differs, not how far it lies from 0.
  it("loses no digit where x is large and hardly varies", async () => {
    const [example] = adjustedContrasts();
    if (example === undefined) throw new Error("no example of R's");
    const units = example.y.map((y, i) => ({
      arm: example.variant[i] === 1 ? "calendar" : "list",
      y,
      x: 1e15 + (example.x[i] ?? 0),
    }));
    const { difference, theta } = effectOf(await reportOf(units.sort((a, b) => (a.arm < b.arm ? 1 : -1)))).adjusted;
    expectWithin(theta, example.theta, 6e-12);
    expectWithin(difference.estimate, example.estimate, 6e-12);
    expectWithin(difference.standardError, example.standardError, 6e-12);
  });

  // By hand: x 0..9, y = 3 x + e with e -1, 0, 1, ten times each, 300 units an arm: x and e are not correlated, so theta is 3
  // and the adjusted variance (2/3) 300/299; the differences are those added. Two variants with equal variances:
  // Dunnett's critical value 2.212128 (R 4.2.2, mvtnorm 1.1-3; Dunnett 1964, table II.b: 2.21).
  it("holds at once over several variants, and compares the best two adjusted as well", async () => {
    const arm = (name: string, more: number): Unit[] =>
      Array.from({ length: 300 }, (_, i) => ({
        arm: name,
        y: 3 * (i % 10) + (Math.floor(i / 10) % 3) - 1 + more,
        x: i % 10,
      }));
    const report = await reportOf([...arm("list", 0), ...arm("calendar", 0.5), ...arm("map", 0.75)]);
    const standardError = Math.sqrt((2 * (2 / 3)) / 299);
    for (const [at, estimate] of [
      [0, 0.5],
      [1, 0.75],
    ] as const) {
      const effect = effectOf(report, at);
      expect(effect.adjusted.theta).toBe(3);
      expectWithin(effect.adjusted.difference.estimate, estimate, 1e-12);
      expectWithin(effect.adjusted.difference.low, estimate - 2.212128 * standardError, 1e-6);
      expect(effect.zone).toBe("better");
      // Unadjusted the spread of 3 x is 100 times as large.
      expect(effect.difference.low).toBeLessThan(0);
      expect(effect.difference.pAdjusted).toBeGreaterThan(0.3);
      expect(effect.adjusted.difference.pAdjusted).toBeLessThan(1e-6);
    }
    expect(report.json.conclusion).toMatchObject({ decision: "adopt", variant: "map" });
    // Fieller by hand: v = (2/3) / 299 in both, q^2 v = 0.0109110: 0.007267 and 0.028560.
    expect(report.json.conclusion.reasons.at(-1)).toMatch(
      /^Between the two, Y: 14\.25 with "map" and 14\.00 with "calendar", 1\.8% higher \(95% interval: 0\.7% to 2\.9% higher\)\./,
    );
    expect(report.terminal).toContain('Adjusted Y for "x" at enrolment');
  });

  it("says so where nothing can be adjusted, and goes by the unadjusted contrast", async () => {
    const arm = (name: string, more: number): Unit[] =>
      Array.from({ length: 250 }, (_, i) => ({ arm: name, y: (i % 7) + more, x: 5 }));
    const report = await reportOf([...arm("list", 0), ...arm("calendar", 1)]);
    const [effect] = report.json.effects;
    expect(effect?.adjusted).toBeNull();
    expect(effect?.zone).toBe("better");
    expect(effect?.difference.pAdjusted).toBe(effect?.difference.p);
    const why =
      'Not adjusted for "x" at enrolment, since what it would be adjusted for is the same for every visitor of a group.';
    expect(report.json.conclusion.reasons[0]).toContain(why);
    expect(text(report.html)).toContain(why);
    expect(report.terminal).not.toContain("Adjusted ");
  });

  it("keeps the score interval beside an adjusted share with few events", async () => {
    const arm = (name: string, every: number): Unit[] =>
      Array.from({ length: 400 }, (_, i) => ({ arm: name, y: i % every === 0 ? 1 : 0, x: i % 11 }));
    const report = await reportOf(
      [...arm("list", 100), ...arm("calendar", 40)],
      "summary: proportion, of: {where: {y: 1}}",
    );
    const effect = effectOf(report);
    expect(effect.difference.method).toBe("score");
    expect(effect.adjusted.difference.method).toBe("normal");
    expect(text(report.html)).toMatch(
      /calendar, adjusted .* normal beside it: score, .* calendar, not adjusted .* score/,
    );
  });
});

const text = (html: string) =>
  html
    .replace(/<[^>]+>/g, " ")
    .replace(/[\u201c\u201d]|&quot;/g, '"')
    .replace(/\s+/g, " ");
