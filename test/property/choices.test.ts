import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { reduce } from "../../src/engine/index.ts";
import type { MetricCells } from "../../src/engine/types.ts";
import { loadPlan } from "../../src/plan/index.ts";
import type { Metric } from "../../src/plan/types.ts";
import { type OracleChoice, underChoice } from "../oracle/choices.ts";
import { trace } from "../oracle/oracle.ts";
import { planFromYaml } from "../oracle/plan.ts";
import { randomCase, rawFiles, rawLists, writeCase } from "../oracle/random/case.ts";
import { diceOf } from "../oracle/random/dice.ts";
import { drawForm } from "../oracle/random/write.ts";
import type { OracleMetric } from "../oracle/types.ts";
import type { Value } from "./choiceSums.ts";
import { type Expected, wrongChoices } from "./choices.ts";
import { randomTable } from "./randomTable.ts";
import { runEngine } from "./run.ts";
import { inFolder, twoAtATime } from "./temporary.ts";

const LOGS = Array.from({ length: 100 }, (_, at) => 3_000 + at);
const TABLES = Array.from({ length: 40 }, (_, at) => 8_000 + at);
const CHOICES: readonly OracleChoice[] = [
  "no-cap",
  "cap-0.99",
  "cap-0.999",
  "other-way-in-two-variants",
  "any-follow-up",
  "without-first-day",
];
const MINUTES = 60_000;

describe("the cells under other reasonable choices", () => {
  const met = new Map<string, number>();
  const meet = (cells: readonly MetricCells[], where: string) => {
    for (const { choices } of cells)
      for (const found of choices) {
        const choice = found.choice.split(":")[0] ?? "";
        const paired = found.choice !== "log" && found.joint !== null ? " of a pair" : "";
        met.set(`${where}: ${choice}${paired}`, (met.get(`${where}: ${choice}${paired}`) ?? 0) + 1);
      }
  };

  it("hold the sums of the log under a plan that makes that choice its own", { timeout: 5 * MINUTES }, async () => {
    const wrong = await twoAtATime(LOGS, (seed) =>
      inFolder(async (folder) => {
        const drawn = randomCase(seed);
        const { path, text } = writeCase(folder, drawn, drawForm(diceOf(seed)));
        const plan = planFromYaml(text);
        const [files, lists] = [rawFiles(drawn), rawLists(drawn)];
        const own = trace(plan, files, lists).result.metrics;
        const incidents = plan.incidents.map(({ name }) => `without-incident:${name}` as const);
        const others = [...CHOICES, ...incidents].map(
          (choice) => [choice, underChoice(choice, plan, files, lists)] as const,
        );
        const { metrics } = (await runEngine(path)).reduction;
        meet(metrics, "log");
        return metrics.flatMap((cells, m) =>
          wrongChoices(cells, expectedOf(plan.metrics[m], m, own, others)).map(
            (line) => `seed ${seed}, ${cells.metric}: ${line}`,
          ),
        );
      }),
    );
    expect(wrong.flat()).toEqual([]);
  });

  it("hold the sums of some hundred units worked out one by one, covariates included", {
    timeout: 5 * MINUTES,
  }, async () => {
    const wrong = await twoAtATime(TABLES, (seed) =>
      inFolder(async (folder) => {
        const { plan, csv, expected } = randomTable(seed);
        await writeFile(join(folder, "table.csv"), csv);
        const loaded = loadPlan(plan, { later: [] });
        if (!("plan" in loaded)) throw new Error(JSON.stringify(loaded.problems));
        const reduced = await reduce(loaded.plan, loaded.source, folder, { threads: 1 + (seed % 2) });
        if ("problems" in reduced) throw new Error(JSON.stringify(reduced.problems));
        const { metrics } = reduced.reduction;
        meet(metrics, "table");
        return metrics.flatMap((cells, m) =>
          wrongChoices(cells, at(expected, m)).map((line) => `seed ${seed}, ${cells.metric}: ${line}`),
        );
      }),
    );
    expect(wrong.flat()).toEqual([]);
  });

  it("came by every choice, of a value alone and of a pair", () => {
    const logs = [...CHOICES.filter((choice) => !choice.startsWith("cap-")), "without-incident"];
    const tables = [
      "no-cap",
      "cap-0.99",
      "cap-0.999",
      "other-way-in-two-variants",
      "without-first-day",
      "without-incident",
    ];
    const wanted = [
      ...["log: log", "table: log"],
      ...logs.flatMap((choice) => [`log: ${choice}`, `log: ${choice} of a pair`]),
      ...tables.flatMap((choice) => [`table: ${choice}`, `table: ${choice} of a pair`]),
    ];
    expect(wanted.filter((name) => !met.has(name))).toEqual([]);
  });
});

function expectedOf(
  metric: Metric | undefined,
  m: number,
  own: readonly OracleMetric[],
  others: readonly (readonly [OracleChoice, readonly OracleMetric[] | null])[],
): Expected {
  const values = (found: OracleMetric | undefined): Value[] =>
    (found?.values ?? []).map(({ variant, of, per, x }) => ({ variant, y: of, x: per ?? x }));
  const mine = values(own[m]);
  return {
    own: mine,
    // A quantile has no other choices.
    others: new Map(
      (metric?.summary === "quantile" ? [] : others).map(([choice, metrics]) => [
        choice,
        metrics === null ? null : values(metrics[m]),
      ]),
    ),
    isPaired: metric?.per != null || metric?.adjustFor != null,
    isLogged: metric?.summary === "mean" && mine.length > 0 && mine.every(({ y }) => y >= 0n),
    held: [own, ...others.map(([, metrics]) => metrics)].flatMap((metrics) => metrics?.[m]?.cap?.value ?? []),
  };
}

function at<T>(items: readonly T[], place: number): T {
  const item = items[place];
  if (item === undefined) throw new Error(`no ${place} of ${items.length}`);
  return item;
}
