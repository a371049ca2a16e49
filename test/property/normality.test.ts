import { mkdir, readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { closeout } from "../../src/index.ts";
import { generator } from "../../src/stats/generator.ts";
import { sectionOf } from "../report/markup.ts";
import { inFolder } from "./temporary.ts";

const PLAN = `experiment: Fares
question: Do fares rise?
log: [{files: "data/*.csv", columns: {unit: visitor, variant: arm}}]
variants: [{name: list, control: true}, {name: calendar}]
metrics:
  - {name: Fare, role: primary, summary: mean, of: {sum: fare}}
  - {name: Fare per search, summary: ratio-of-totals, of: {sum: fare}, per: {sum: searches}}
  - {name: Fare beside the past, summary: mean, of: {sum: fare}, adjust-for: {column: past}}
decision: {interval: skew-corrected}
`;

/** One row a visitor: 900 against 300, fares with a long tail, now and then no past. */
function rows(): string[] {
  const next = generator([2, 3, 5, 7]);
  const one = () => -Math.log((next() + 1) / 2 ** 32);
  return Array.from({ length: 1200 }, (_, i) => {
    const past = one();
    const fare = past + one() ** 2;
    return [
      `v${i}`,
      i % 4 === 0 ? "calendar" : "list",
      fare.toFixed(3),
      1 + (i % 3),
      i % 11 === 0 ? "" : past.toFixed(3),
    ].join(",");
  });
}

async function report(files: readonly (readonly string[])[], threads: number) {
  return inFolder(async (folder) => {
    await mkdir(join(folder, "data"));
    for (const [i, lines] of files.entries()) {
      await writeFile(join(folder, "data", `${i}.csv`), ["visitor,arm,fare,searches,past", ...lines, ""].join("\n"));
    }
    await writeFile(join(folder, "plan.yaml"), PLAN);
    const outcome = await closeout(join(folder, "plan.yaml"), { out: join(folder, "report"), threads });
    if (outcome.status !== 0) throw new Error(outcome.text);
    return { json: outcome.report, html: await readFile(join(folder, "report", "report.html"), "utf8") };
  });
}

describe("a plan that lets the corrected interval decide", () => {
  it("gives the same draws, tails and words whatever the files, their order and the threads", async () => {
    const all = rows();
    const [one, split] = [
      await report([all], 1),
      await report([all.slice(700).toReversed(), all.slice(0, 100), all.slice(100, 700)], 2),
    ];
    expect(split.json.effects).toEqual(one.json.effects);
    expect(split.json.checks).toEqual(one.json.checks);
    expect(split.json.sensitivity).toEqual(one.json.sensitivity);
    for (const section of ["decision", "metrics"])
      expect(sectionOf(split.html, section)).toBe(sectionOf(one.html, section));
    expect(one.html.match(/<section class="sampling wide"/g)).toHaveLength(3);
    expect(one.html.match(/at 1\/4 of the size/g)).toHaveLength(3);
  });

  it("decides by it, and report.json names it and holds the interval twice", async () => {
    const { json } = await report([rows()], 1);
    for (const { difference, adjusted, normality } of json.effects) {
      const own = adjusted?.difference ?? difference;
      expect(own.method).toBe("skew-corrected");
      expect(normality?.skewCorrected).toEqual({ low: own.low, high: own.high });
      expect(normality?.unitsByRule).toBeGreaterThan(0);
    }
    expect(json.checks.map(({ id }) => id)).toEqual(expect.arrayContaining(["normality", "one-unit"]));
  });
});
